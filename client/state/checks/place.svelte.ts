/** Where the channel checks are in the address: a page of the set-up. */
export const CHECKS_LINK = '#/set-up/checks';

const isHere = (): boolean => /^#?\/set-up\/checks(\?|$)/.test(location.hash);

/** Whether somebody is at the channel checks. */
export class ChecksPlace {
  #open = $state(isHere());

  get isOpen(): boolean {
    return this.#open;
  }

  /** Listens; the returned function ends it. */
  listen(): () => void {
    const look = () => {
      this.#open = isHere();
    };
    look();
    addEventListener('hashchange', look);
    return () => removeEventListener('hashchange', look);
  }
}
