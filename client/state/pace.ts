/**
 * Calls `draw` with the next frame of the screen after something came, and not
 * more often than every `gap` s. `now` in s, from any moment on; `frame` as
 * requestAnimationFrame, `after` as setTimeout in s.
 */
export const paced = (
  gap: number,
  draw: (now: number) => void,
  now: () => number,
  frame: (call: () => void) => void,
  after: (seconds: number, call: () => void) => void,
): (() => void) => {
  let waiting = false;
  let drawn = -Infinity;
  const run = () => {
    waiting = false;
    drawn = now();
    draw(drawn);
  };
  return () => {
    if (waiting) return;
    waiting = true;
    const left = drawn + gap - now();
    if (left > 0) after(left, () => frame(run));
    else frame(run);
  };
};
