import { UNIT_SYSTEMS, type UnitSystem } from './quantity.ts';

export const THEMES = ['auto', 'light', 'dark'] as const;
export type Theme = (typeof THEMES)[number];

export interface Preferences {
  readonly units: UnitSystem;
  readonly theme: Theme;
}

export const DEFAULTS: Preferences = { units: 'si', theme: 'auto' };
const KEY = 'yieldward.preferences';

/** What is used of Web Storage; a browser may refuse it altogether. */
export interface Memory {
  getItem(key: string): string | null;
  setItem(key: string, value: string): void;
}

const fieldOf = (map: unknown, name: string): unknown =>
  typeof map === 'object' && map !== null
    ? Object.entries(map).find(([k]) => k === name)?.[1]
    : null;

/** The defaults for whatever is not there, not readable or not known. */
export const readPreferences = (memory: () => Memory): Preferences => {
  try {
    const stored: unknown = JSON.parse(memory().getItem(KEY) ?? 'null');
    return {
      units: UNIT_SYSTEMS.find((u) => u === fieldOf(stored, 'units')) ?? DEFAULTS.units,
      theme: THEMES.find((t) => t === fieldOf(stored, 'theme')) ?? DEFAULTS.theme,
    };
  } catch (error) {
    // SyntaxError: not ours. SecurityError: the browser keeps nothing for this page.
    if (error instanceof Error) return DEFAULTS;
    throw error;
  }
};

/** False if the browser keeps nothing; the preferences hold until the page is left. */
export const keepPreferences = (memory: () => Memory, preferences: Preferences): boolean => {
  try {
    memory().setItem(KEY, JSON.stringify(preferences));
    return true;
  } catch (error) {
    if (error instanceof Error) return false;
    throw error;
  }
};
