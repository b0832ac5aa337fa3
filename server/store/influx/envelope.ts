import type { Envelope, EnvelopeQuery, SeriesKey } from '../../ports.ts';
import { emptySummary, envelopeOf, merge, summarise, type Summary } from '../summary.ts';
import { stepFor } from '../step.ts';
import type { Boots } from './boots.ts';
import { quoted, type Database } from './database.ts';
import { framesIn, samplesOf } from './frames.ts';
import { nanosText, readTime, toSeconds } from './time.ts';

/** The database groups by whole nanoseconds only. */
const isGroupable = (step: number): boolean => Number.isInteger(step * 1e9);
const BLOCK = 1;

class Points {
  readonly #by = new Map<number, Summary>();
  readonly #step: number;

  constructor(step: number) {
    this.#step = step;
  }

  /** Of samples from time `t` on, all of one point. */
  add(t: number, summary: Summary): void {
    if (summary.count === 0) return;
    const point = Math.floor(t / this.#step);
    const into = this.#by.get(point) ?? emptySummary();
    merge(into, summary);
    this.#by.set(point, into);
  }

  envelope(from: number): Envelope {
    return envelopeOf(this.#by, this.#step, from);
  }
}

interface Task {
  readonly database: Database;
  readonly boots: Boots;
  readonly series: SeriesKey;
  readonly step: number;
  readonly points: Points;
}

const where = ({ node, input }: SeriesKey, from: number, to: number): string =>
  `"node" = ${quoted(node)} AND "input" = ${quoted(input)} ` +
  `AND time >= ${nanosText(from)} AND time < ${nanosText(to)}`;

/** Has the database sum up [from, to) by steps. */
const addGrouped = async (task: Task, from: number, to: number, source: 'raw' | 'block') => {
  if (!(from < to)) return;
  const { database, series, step, points } = task;
  const figures =
    source === 'raw'
      ? 'min("value"), max("value"), sum("value"), count("value") FROM "raw"'
      : 'min("min"), max("max"), sum("sum"), sum("count") FROM "block"';
  const over = source === 'block' ? ` AND "over" = ${quoted(series.over ?? '')}` : '';
  const width = BigInt(Math.round(step * 1e9));
  const groups = await database.select(
    `SELECT ${figures} WHERE ${where(series, from, to)}${over} GROUP BY time(${width}ns) fill(none)`,
  );
  for (const [time, min, max, sum, count] of groups.flatMap(({ rows }) => rows)) {
    const summary = { min: Number(min), max: Number(max), sum: Number(sum), count: Number(count) };
    points.add(toSeconds(readTime(String(time))), summary);
  }
};

/** Sums up the samples of [from, to) itself: quotients, and steps that are not whole in ns. */
const addSamples = async (task: Task, from: number, to: number) => {
  if (!(from < to)) return;
  const { database, boots, series, step, points } = task;
  const { node, input, over } = series;
  const frames = await framesIn(database, boots, node, from, to);
  const raw = await samplesOf(database, node, input, frames);
  const by = over === null ? null : await samplesOf(database, node, over, frames);
  for (const frame of frames) {
    const samples = raw.get(frame);
    const divisor = by === null ? null : by.get(frame);
    if (!samples || divisor === undefined) continue;
    const timeOf = (i: number) => frame.t0 + i * frame.dt;
    let i = 0;
    while (i < frame.count) {
      const point = Math.floor(timeOf(i) / step);
      const inside = timeOf(i) >= from && timeOf(i) < to;
      let end = i + 1;
      if (inside) {
        while (end < frame.count && timeOf(end) < to && Math.floor(timeOf(end) / step) === point) {
          end++;
        }
        points.add(timeOf(i), summarise(samples, divisor, i, end));
      }
      i = end;
    }
  }
};

/** Were there frames with both inputs of a pair that nobody had named yet? */
const isPartly = async ({ database, boots, series }: Task, from: number, to: number) => {
  const { node, input, over } = series;
  if (over === null) return false;
  const frames = await framesIn(database, boots, node, from, to);
  return frames.some(({ layout, pairs }) => {
    const has = (name: string) => layout.inputs.some((entry) => entry.input === name);
    return has(input) && has(over) && !pairs.includes(`${input}/${over}`);
  });
};

export const readEnvelope = async (
  database: Database,
  boots: Boots,
  { series, from, to, points: atMost }: EnvelopeQuery,
): Promise<Envelope> => {
  const step = stepFor((to - from) / atMost);
  const task: Task = { database, boots, series, step, points: new Points(step) };
  const addRaw = (a: number, b: number) =>
    series.over === null && isGroupable(step)
      ? addGrouped(task, a, b, 'raw')
      : addSamples(task, a, b);
  const [first, end] = [Math.ceil(from / BLOCK) * BLOCK, Math.floor(to / BLOCK) * BLOCK];
  const whole = step % BLOCK === 0 && first < end && !(await isPartly(task, first, end));
  if (whole) {
    await addRaw(from, first);
    await addGrouped(task, first, end, 'block');
    await addRaw(end, to);
  } else {
    await addRaw(from, to);
  }
  return task.points.envelope(from);
};
