import type { Look } from '../plot/trend-chart.ts';

const styleOf = (name: string): string =>
  getComputedStyle(document.documentElement).getPropertyValue(name).trim();

/** The sheet's colours as they are now, for what is drawn on a canvas. */
export const lookOf = (): Look => ({
  ink: styleOf('--ink'),
  ground: styleOf('--sheet'),
  rule: styleOf('--rule'),
  caution: styleOf('--caution'),
  stop: styleOf('--stop'),
  fontSize: 13,
  fontFamily: getComputedStyle(document.body).fontFamily,
});

/** `#rrggbb` */
export const lineColor = (place: number): string => styleOf(`--line-${place + 1}`);
