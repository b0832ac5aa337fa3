import type { Seconds } from '../model/units.ts';
import { finiteOf } from './series.ts';

/** Nominal frequencies of public supply, Hz. */
export const MAINS = [50, 60] as const;
export type MainsFrequency = (typeof MAINS)[number];

/**
 * Supply stays within ±1 % of nominal for 99.5 % of a year in a joined grid: EN 50160, 4.2.1,
 * value from memory.
 */
const WANDER = 0.5;

/** A stretch has to last this long (s) and hold this many samples for a frequency to be told. */
const STRETCH_SECONDS = 0.5;
const STRETCH_SAMPLES = 32;

/** Where a frequency shows in samples taken `rate` times a second, 0 to rate/2: Shannon's theorem. */
export const aliasOf = (frequency: number, rate: number): number =>
  Math.abs(frequency - rate * Math.round(frequency / rate));

export type MainsShare =
  | {
      readonly told: true;
      /** Of the variance, 0 to 1, what the noise beside it shows taken off. */
      readonly share: number;
      /** Root mean square of it, in the unit of the samples. */
      readonly rms: number;
      /** Hz at which it shows; another than its own where the rate is below twice the frequency. */
      readonly seenAt: number;
    }
  | { readonly told: false; readonly why: string };

/** One turn after another of a frequency, as long as a stretch. */
const waveOf = (frequency: number, dt: number, length: number) => {
  const angle = (i: number) => 2 * Math.PI * frequency * i * dt;
  return {
    cos: Float64Array.from({ length }, (_, i) => Math.cos(angle(i))),
    sin: Float64Array.from({ length }, (_, i) => Math.sin(angle(i))),
  };
};

/** How much of a stretch's sum of squares mean-free cosine and sine account for, by least squares. */
const explained = (stretch: Float64Array, { cos, sin }: ReturnType<typeof waveOf>): number => {
  let [n, y, c, s, cc, cs, ss, yc, ys] = [0, 0, 0, 0, 0, 0, 0, 0, 0];
  for (let i = 0; i < stretch.length; i++) {
    const value = stretch[i] ?? NaN;
    if (!Number.isFinite(value)) continue;
    const [ci, si] = [cos[i] ?? NaN, sin[i] ?? NaN];
    n += 1;
    y += value;
    c += ci;
    s += si;
    cc += ci * ci;
    cs += ci * si;
    ss += si * si;
    yc += value * ci;
    ys += value * si;
  }
  // About the means: the residuals lie near zero, the waves within ±1, and no digits are lost.
  cc -= (c * c) / n;
  cs -= (c * s) / n;
  ss -= (s * s) / n;
  yc -= (y * c) / n;
  ys -= (y * s) / n;
  return (yc * yc * ss - 2 * yc * ys * cs + ys * ys * cc) / (cc * ss - cs * cs);
};

/** So many resolutions off a frequency nothing of it is left, and what lies there is other noise. */
const BESIDE = 3;

/** Frequencies either side that tell the noise at `alias`, clear of the ends and of other mains. */
const neighbours = (alias: number, rate: number, resolution: number): number[] =>
  [alias - BESIDE * resolution, alias + BESIDE * resolution].filter(
    (f) =>
      f > resolution &&
      f < rate / 2 - resolution &&
      MAINS.every((mains) => Math.abs(aliasOf(mains, rate) - f) > resolution),
  );

/** What keeps `frequency` from being told apart, or null. */
const hidden = (frequency: MainsFrequency, rate: number, resolution: number): string | null => {
  const alias = aliasOf(frequency, rate);
  const at = `at ${Number(rate.toPrecision(3))} samples a second ${frequency} Hz`;
  if (alias < resolution) return `${at} looks like a steady value`;
  if (rate / 2 - alias < resolution) return `${at} lies on half the rate, where it may not show`;
  const other = MAINS.find((each) => each !== frequency) ?? frequency;
  return Math.abs(aliasOf(other, rate) - alias) < resolution
    ? `${at} looks the same as ${other} Hz`
    : null;
};

/**
 * Share of mains hum in the variance of evenly spaced samples (their line taken off, NaN where
 * missing): sinusoids fitted by least squares in stretches of half a second. Not a Fourier
 * transform, because samples are missing, windows are not whole periods, and mains wanders off
 * its nominal frequency over a long window, while a short stretch still holds nearly all of it.
 */
export const mainsShare = (
  residuals: Float64Array,
  dt: Seconds,
  frequency: MainsFrequency,
): MainsShare => {
  const length = Math.max(Math.ceil(STRETCH_SECONDS / dt), STRETCH_SAMPLES);
  const resolution = 1 / (length * dt);
  const why = hidden(frequency, 1 / dt, resolution);
  if (why !== null) return { told: false, why };
  const stretches: Float64Array[] = [];
  let [all, count] = [0, 0];
  for (let from = 0; from + length <= residuals.length; from += length) {
    const stretch = residuals.subarray(from, from + length);
    const believed = finiteOf(stretch);
    if (believed.length <= length / 2) continue;
    stretches.push(stretch);
    count += believed.length;
    for (const value of believed) all += value * value;
  }
  if (stretches.length === 0) {
    return { told: false, why: `${Number((length * dt).toPrecision(2))} s of samples are needed` };
  }
  if (!(all > 0)) return { told: false, why: 'the value does not change' };
  const at = (hertz: number) => {
    const wave = waveOf(hertz, dt, length);
    return stretches.reduce((sum, stretch) => sum + explained(stretch, wave), 0);
  };
  const seenAt = aliasOf(frequency, 1 / dt);
  const beside = neighbours(seenAt, 1 / dt, resolution).map(at);
  const background = beside.reduce((sum, each) => sum + each, 0) / Math.max(1, beside.length);
  // A stretch longer than half a second tells frequencies within the wander apart.
  const steps = Math.floor(WANDER / (resolution / 2));
  let most = 0;
  for (let step = -steps; step <= steps; step++) {
    most = Math.max(most, at(frequency + (step * resolution) / 2));
  }
  const hum = Math.max(0, most - background);
  return { told: true, share: Math.min(1, hum / all), rms: Math.sqrt(hum / count), seenAt };
};
