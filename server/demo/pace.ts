/**
 * Calls back once for each period of the clock that has passed, with its number
 * since 1970, in order. Periods slept through are made up for, `mostBehind` at
 * most. Returns what stops it.
 */
export const eachPeriod = (
  period: number,
  mostBehind: number,
  call: (index: number) => void,
): (() => void) => {
  const current = () => Math.floor(Date.now() / 1e3 / period);
  let next = current();
  let timer: NodeJS.Timeout;
  const wait = () => {
    timer = setTimeout(run, Math.max(0, (next + 1) * period * 1e3 - Date.now()));
  };
  const run = () => {
    const now = current();
    next = Math.max(next, now - mostBehind);
    while (next < now) call(next++);
    wait();
  };
  wait();
  return () => clearTimeout(timer);
};
