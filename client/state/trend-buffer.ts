/** What a stretch of history has to offer, as the server answers it. */
export interface PastPoints {
  /** Begin of each point, s, ascending. */
  readonly t: readonly number[];
  readonly min: readonly (number | null)[];
  readonly mean: readonly (number | null)[];
  readonly max: readonly (number | null)[];
}

/** null: a gap. undefined: nothing new here, the line goes on to the next figure. */
export type Cell = number | null | undefined;

export interface TrendColumns {
  readonly last: Cell[];
  readonly min: Cell[];
  readonly max: Cell[];
}

const [EMPTY, BROKEN, GOOD] = [0, 1, 2];

/**
 * The newest `bins` stretches of `step` s of one channel, whole multiples of `step` since 1970.
 * Each keeps its least and greatest figure, whatever came in whichever order, and the latest.
 * Figures older than the newest stretch less `bins` are let go.
 */
export class TrendBuffer {
  readonly step: number;
  readonly bins: number;
  /** Which stretch a place holds at present. */
  readonly #bin: Float64Array;
  readonly #state: Uint8Array;
  readonly #min: Float64Array;
  readonly #max: Float64Array;
  readonly #last: Float64Array;
  readonly #lastAt: Float64Array;

  constructor(step: number, bins: number) {
    this.step = step;
    this.bins = bins;
    this.#bin = new Float64Array(bins).fill(-1);
    this.#state = new Uint8Array(bins);
    this.#min = new Float64Array(bins);
    this.#max = new Float64Array(bins);
    this.#last = new Float64Array(bins);
    this.#lastAt = new Float64Array(bins);
  }

  binOf(t: number): number {
    return Math.floor(t / this.step + 1e-9);
  }

  /** The place of a stretch, made ready for it; -1 if it is too old to keep. */
  #placeOf(bin: number): number {
    const place = bin % this.bins;
    const held = this.#bin[place] ?? -1;
    if (held > bin || bin < 0) return -1;
    if (held < bin) {
      this.#bin[place] = bin;
      this.#state[place] = EMPTY;
    }
    return place;
  }

  /** One figure and the extremes around it; any of them not finite is a gap. */
  add(t: number, last: number, min: number, max: number): void {
    const place = this.#placeOf(this.binOf(t));
    if (place < 0) return;
    const good = this.#state[place] === GOOD;
    if (!Number.isFinite(min) || !Number.isFinite(max)) {
      if (!good) this.#state[place] = BROKEN;
      return;
    }
    this.#min[place] = good ? Math.min(this.#min[place] ?? min, min) : min;
    this.#max[place] = good ? Math.max(this.#max[place] ?? max, max) : max;
    if (Number.isFinite(last) && (!good || t >= (this.#lastAt[place] ?? 0))) {
      this.#last[place] = last;
      this.#lastAt[place] = t;
    } else if (!good) {
      this.#last[place] = (min + max) / 2;
      this.#lastAt[place] = t;
    }
    this.#state[place] = GOOD;
  }

  /** Points that lie where live figures are already widen the extremes and change nothing else. */
  merge(past: PastPoints): void {
    past.t.forEach((t, i) => {
      const [min, mean, max] = [past.min[i], past.mean[i], past.max[i]];
      this.add(t, mean ?? NaN, min ?? NaN, max ?? NaN);
    });
  }

  /** Middles of the stretches up to the one that `to` lies in, s, ascending. */
  times(to: number): number[] {
    const first = this.binOf(to) - this.bins + 1;
    return Array.from({ length: this.bins }, (_, i) => (first + i + 0.5) * this.step);
  }

  /** Columns beside `times(to)`. Silence longer than `patience` s is a gap. */
  columns(to: number, patience: number): TrendColumns {
    const first = this.binOf(to) - this.bins + 1;
    const column = () => new Array<Cell>(this.bins).fill(undefined);
    const columns: TrendColumns = { last: column(), min: column(), max: column() };
    const put = (i: number, last: Cell, min: Cell, max: Cell) => {
      columns.last[i] = last;
      columns.min[i] = min;
      columns.max[i] = max;
    };
    let before = -1;
    for (let i = 0; i < this.bins; i++) {
      const place = (first + i) % this.bins;
      const state = this.#bin[place] === first + i ? this.#state[place] : EMPTY;
      if (state === BROKEN) put(i, null, null, null);
      if (state !== GOOD) continue;
      put(i, this.#last[place], this.#min[place], this.#max[place]);
      const silent = before >= 0 && (i - before) * this.step > patience;
      for (let j = before + 1; silent && j < i; j++) put(j, null, null, null);
      before = i;
    }
    return columns;
  }
}

/** Least, greatest and latest figure of columns; null if they hold none. */
export const columnsExtent = ({
  last,
  min,
  max,
}: TrendColumns): { last: number; min: number; max: number } | null => {
  let [lowest, highest, latest] = [Infinity, -Infinity, NaN];
  for (let i = 0; i < last.length; i++) {
    const [low, high, figure] = [min[i], max[i], last[i]];
    if (typeof low === 'number') lowest = Math.min(lowest, low);
    if (typeof high === 'number') highest = Math.max(highest, high);
    if (typeof figure === 'number') latest = figure;
  }
  return lowest <= highest ? { last: latest, min: lowest, max: highest } : null;
};

export type Buffers = ReadonlyMap<number, TrendBuffer>;

export const NO_BUFFERS: Buffers = new Map();

/** One for each channel; those that are there already with the same step are kept. */
export const buffersFor = (
  before: Buffers,
  indices: readonly number[],
  step: number,
  bins: number,
): Buffers =>
  new Map(
    indices.map((index) => {
      const kept = before.get(index);
      return [index, kept?.step === step ? kept : new TrendBuffer(step, bins)];
    }),
  );
