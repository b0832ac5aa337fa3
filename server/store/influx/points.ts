import type { IPoint } from 'influx';
import { sampleCount, type RawArray } from '../../../shared/model/frame.ts';
import type { StoredFrame } from '../../ports.ts';
import { layoutText } from '../layout.ts';
import { arraysOf, secondsOf, seriesOf, summarise, type SeriesInputs } from '../summary.ts';
import { nanosText } from './time.ts';

/** What the database's float field cannot hold as it is: NaN, infinities, and the sign of −0. */
const needsBits = (x: number): boolean => x - x !== 0 || Object.is(x, -0);

const bitsOf = ({ buffer, byteOffset, BYTES_PER_ELEMENT: width }: RawArray, i: number): string =>
  Buffer.from(buffer, byteOffset + i * width, width).toString('hex');

/** Measurement `raw`: a point a sample; `bits` is its memory, little-endian, where `value` cannot be. */
export const rawPoints = ({ frame }: StoredFrame, lane: number): IPoint[] => {
  const { node, boot, t0, dt, inputs } = frame;
  const times = Array.from({ length: sampleCount(frame) }, (_, i) => nanosText(t0 + i * dt));
  return inputs.flatMap(({ input, samples }) => {
    const tags = { node, boot, input, lane: String(lane) };
    return Array.from(samples, (x, i): IPoint => {
      const fields = needsBits(x)
        ? { bits: bitsOf(samples, i), ...(x === 0 ? { value: 0 } : {}) }
        : { value: x };
      return { measurement: 'raw', timestamp: times[i] ?? '', tags, fields };
    });
  });
};

/** Pairs whose inputs a frame both has. */
export const pairsIn = (
  { frame }: StoredFrame,
  pairs: readonly SeriesInputs[],
): readonly SeriesInputs[] => seriesOf(frame.inputs, pairs).filter(({ over }) => over !== null);

/** Measurement `block`: what a frame's finite samples within one whole second come to. */
export const blockPoints = (
  stored: StoredFrame,
  lane: number,
  pairs: readonly SeriesInputs[],
): IPoint[] => {
  const { node, boot, t0, dt, inputs } = stored.frame;
  const stretches = secondsOf(t0, dt, sampleCount(stored.frame));
  return seriesOf(inputs, pairs).flatMap((series) => {
    const arrays = arraysOf(inputs, series);
    if (!arrays) return [];
    const { input, over } = series;
    const tags = { node, boot, input, ...(over === null ? {} : { over }), lane: String(lane) };
    return stretches.flatMap(({ from, to }): IPoint[] => {
      const { min, max, sum, count } = summarise(...arrays, from, to);
      const timestamp = nanosText(t0 + from * dt);
      if (count === 0) return [];
      return [{ measurement: 'block', timestamp, tags, fields: { min, max, sum, count } }];
    });
  });
};

/** Measurement `frame`: what is needed to put the raw points of a frame together again. */
export const framePoint = (
  stored: StoredFrame,
  lane: number,
  pairs: readonly SeriesInputs[],
): IPoint => {
  const { frame, arrived } = stored;
  const { node, boot, seq, t0, dt, inputs } = frame;
  const named = pairsIn(stored, pairs).map(({ input, over }) => `${input}/${over}`);
  return {
    measurement: 'frame',
    timestamp: nanosText(t0),
    tags: {
      ...{ node, boot, lane: String(lane), layout: layoutText(inputs) },
      ...(named.length > 0 ? { pairs: named.join(',') } : {}),
    },
    fields: { seq, t0, dt, count: sampleCount(frame), arrived },
  };
};
