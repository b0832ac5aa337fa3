import { keepPreferences, readPreferences, type Preferences, type Theme } from './preferences.ts';
import type { UnitSystem } from './quantity.ts';

const memory = () => localStorage;

/** How one person reads the screen; kept in this browser alone. */
export class PreferenceState {
  #now = $state.raw<Preferences>(readPreferences(memory));

  get units(): UnitSystem {
    return this.#now.units;
  }

  get theme(): Theme {
    return this.#now.theme;
  }

  set(change: Partial<Preferences>): void {
    this.#now = { ...this.#now, ...change };
    keepPreferences(memory, this.#now);
  }
}
