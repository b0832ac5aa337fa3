import type { Theme } from '../state/preferences.ts';

/** Sets the colours, and follows the system's where that is wished; the returned function ends it. */
export const applyTheme = (theme: Theme): (() => void) => {
  const system = matchMedia('(prefers-color-scheme: dark)');
  const set = () => {
    const dark = theme === 'dark' || (theme === 'auto' && system.matches);
    document.documentElement.toggleAttribute('data-dark', dark);
  };
  set();
  system.addEventListener('change', set);
  return () => system.removeEventListener('change', set);
};
