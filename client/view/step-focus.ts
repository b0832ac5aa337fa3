const STEPS: Readonly<Record<string, number>> = { ArrowDown: 1, ArrowUp: -1 };

const nextStop = (stops: readonly HTMLElement[], key: string): HTMLElement | undefined => {
  const at = stops.findIndex((stop) => stop === document.activeElement);
  if (at < 0) return undefined;
  if (key === 'Home') return stops[0];
  if (key === 'End') return stops.at(-1);
  const step = STEPS[key];
  return step === undefined ? undefined : stops[Math.min(Math.max(at + step, 0), stops.length - 1)];
};

/** Arrow keys, Home and End move the focus among the first controls of a list's entries; Tab stays as it is. */
export const stepFocus = (list: HTMLElement): (() => void) => {
  const step = (event: KeyboardEvent) => {
    const stops = [...list.children].flatMap(
      (entry) => entry.querySelector<HTMLElement>('button, a') ?? [],
    );
    const next = nextStop(stops, event.key);
    if (!next) return;
    event.preventDefault();
    next.focus();
  };
  list.addEventListener('keydown', step);
  return () => list.removeEventListener('keydown', step);
};
