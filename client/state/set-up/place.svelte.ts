import { parsePlace, type SetUpPlace } from './place.ts';

/** The address as a place of the set-up. */
export class PlaceState {
  #now = $state.raw<SetUpPlace>(parsePlace(location.hash));

  get now(): SetUpPlace {
    return this.#now;
  }

  /** Listens; the returned function ends it. */
  open(): () => void {
    const look = () => {
      this.#now = parsePlace(location.hash);
    };
    look();
    addEventListener('hashchange', look);
    return () => removeEventListener('hashchange', look);
  }
}
