/** Sets of whole numbers kept as ranges with both ends included, ascending and apart. */
export type Ranges = readonly (readonly [first: number, last: number])[];

export const contains = (ranges: Ranges, n: number): boolean =>
  ranges.some(([first, last]) => n >= first && n <= last);

/** The set with `n` in it; ranges that come to touch are joined. */
export const include = (ranges: Ranges, n: number): Ranges => {
  const top = ranges.at(-1);
  if (!top) return [[n, n]];
  if (n === top[1] + 1) return [...ranges.slice(0, -1), [top[0], n]];
  if (n > top[1]) return [...ranges, [n, n]];
  if (contains(ranges, n)) return ranges;
  const before = ranges.filter(([, last]) => last < n);
  const after = ranges.filter(([first]) => first > n);
  const below = before.at(-1);
  const above = after[0];
  const joinsBelow = below !== undefined && below[1] === n - 1;
  const joinsAbove = above !== undefined && above[0] === n + 1;
  return [
    ...(joinsBelow ? before.slice(0, -1) : before),
    [joinsBelow ? below[0] : n, joinsAbove ? above[1] : n],
    ...(joinsAbove ? after.slice(1) : after),
  ];
};

/** Numbers between the first and the last of the set that are not in it. */
export const missing = (ranges: Ranges): number =>
  ranges.reduce(
    (sum, [first], i) => sum + (i === 0 ? 0 : first - (ranges[i - 1]?.[1] ?? 0) - 1),
    0,
  );

export const highest = (ranges: Ranges): number => ranges.at(-1)?.[1] ?? -1;
