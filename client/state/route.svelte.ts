import { parseRoute, routeText, toggleChosen, MOST_CHOSEN, type Route } from './route.ts';

/** The address bar as state. */
export class RouteState {
  #now = $state.raw<Route>(parseRoute(location.hash));

  constructor() {
    addEventListener('hashchange', () => {
      this.#now = parseRoute(location.hash);
    });
  }

  get now(): Route {
    return this.#now;
  }

  /** A link to here with something changed. */
  to(change: Partial<Route>): string {
    return routeText({ ...this.#now, ...change });
  }

  /** A step that the browser's Back undoes. */
  go(change: Partial<Route>): void {
    location.hash = this.to(change);
  }

  /** A change of what is shown in the same place. */
  adjust(change: Partial<Route>): void {
    this.#now = { ...this.#now, ...change };
    history.replaceState(null, '', routeText(this.#now));
  }

  toggle(id: string): void {
    this.adjust({ chosen: toggleChosen(this.#now.chosen, id) });
  }

  choose(ids: readonly string[]): void {
    this.adjust({ chosen: ids.slice(0, MOST_CHOSEN) });
  }
}
