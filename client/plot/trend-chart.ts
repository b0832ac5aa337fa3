import uPlot from 'uplot';
import 'uplot/dist/uPlot.min.css';

export type Cell = number | null | undefined;

export interface TrendLine {
  /** Stands at the line's right end and in the legend. */
  readonly letter: string;
  readonly color: string;
  /** px on, px off; empty: solid */
  readonly dash: readonly number[];
  readonly last: readonly Cell[];
  readonly min: readonly Cell[];
  readonly max: readonly Cell[];
}

export interface LimitLine {
  readonly value: number;
  readonly label: string;
  readonly level: 'caution' | 'stop';
}

/** Everything in the unit that is shown; `times` in s. */
export interface TrendPicture {
  readonly times: readonly number[];
  readonly lines: readonly TrendLine[];
  readonly limits: readonly LimitLine[];
  /** Bounds of the drawing. */
  readonly x: readonly [from: number, to: number];
  readonly y: readonly [low: number, high: number];
}

export interface Look {
  readonly ink: string;
  readonly ground: string;
  readonly rule: string;
  readonly caution: string;
  readonly stop: string;
  /** CSS px */
  readonly fontSize: number;
  readonly fontFamily: string;
}

/** On axes uPlot scales a font to the screen itself; what is drawn by hand does so here. */
const fontOf = ({ fontSize, fontFamily }: Look, scale = 1): string =>
  `${fontSize * scale}px ${fontFamily}`;

/** Height of a limit's label, CSS px. */
const LABEL = 16;

/** Stop limits are named at the left end of their line, caution limits at the right. */
interface Label {
  readonly y: number;
  readonly label: string;
  readonly stop: boolean;
  /** Stop limits are named on their far side, caution limits toward zero: so they keep apart. */
  readonly up: boolean;
}

const isFigure = (cell: Cell): cell is number => cell !== null && cell !== undefined;

/** A figure with a gap on both sides, which no line would show. */
const loneFigures = (cells: readonly Cell[]): number[] => {
  const lone: number[] = [];
  let candidate = -1;
  let run = 0;
  cells.forEach((cell, i) => {
    if (cell === undefined) return;
    if (cell === null) {
      if (run === 1) lone.push(candidate);
      run = 0;
      return;
    }
    candidate = i;
    run++;
  });
  return run === 1 ? [...lone, candidate] : lone;
};

/** 0 to 255 as two hexadecimal digits behind a `#rrggbb`. */
const faint = (color: string): string => `${color}38`;

/** A drawing of trends: for each line the last figures, and a band from least to greatest. */
export class TrendChart {
  readonly #host: HTMLElement;
  readonly #look: () => Look;
  #plot: uPlot | null = null;
  #picture: TrendPicture | null = null;
  #key = '';

  constructor(host: HTMLElement, look: () => Look) {
    this.#host = host;
    this.#look = look;
  }

  draw(picture: TrendPicture, width: number, height: number): void {
    this.#picture = picture;
    const look = this.#look();
    const key = JSON.stringify([look, picture.lines.map(({ letter, color }) => letter + color)]);
    if (key !== this.#key || !this.#plot) {
      this.#plot?.destroy();
      this.#plot = new uPlot(this.#options(picture, look, width, height), [[]], this.#host);
      this.#key = key;
    }
    const plot = this.#plot;
    if (plot.width !== width || plot.height !== height) plot.setSize({ width, height });
    const columns = picture.lines.flatMap(({ last, max, min }) => [last, max, min]);
    plot.batch(() => {
      plot.setData([[...picture.times], ...columns.map((c) => [...c])], false);
      plot.setScale('x', { min: picture.x[0], max: picture.x[1] });
      plot.setScale('y', { min: picture.y[0], max: picture.y[1] });
    });
  }

  destroy(): void {
    this.#plot?.destroy();
    this.#plot = null;
  }

  #options({ lines }: TrendPicture, look: Look, width: number, height: number): uPlot.Options {
    const axis = { stroke: look.ink, font: fontOf(look), grid: { stroke: look.rule, width: 1 } };
    const none = { stroke: 'transparent', width: 0, points: { show: false } };
    return {
      ...{ width, height, padding: [10, 26, 0, 0] },
      legend: { show: false },
      cursor: { show: false },
      scales: { x: { time: true, auto: false }, y: { auto: false } },
      axes: [
        {
          ...{ ...axis, space: 90 },
          values: (_plot, splits) =>
            splits.map((t) => new Date(t * 1e3).toTimeString().slice(0, 8)),
        },
        { ...axis, size: 62, values: (_plot, splits) => splits.map(axisText(splits)) },
      ],
      series: [
        {},
        ...lines.flatMap(({ color, dash }): uPlot.Series[] => [
          {
            ...{ stroke: color, width: 2.5, dash: [...dash] },
            points: {
              ...{ show: true, size: 6, fill: color },
              filter: (_plot, place) => loneFigures(lineAt(this.#picture, place)),
            },
          },
          none,
          none,
        ]),
      ],
      bands: lines.map(({ color }, i) => ({
        series: [3 * i + 2, 3 * i + 3],
        fill: faint(color),
      })),
      hooks: {
        drawAxes: [(plot) => this.#drawLimits(plot, look)],
        draw: [(plot) => this.#drawLetters(plot, look)],
      },
    };
  }

  #drawLimits(plot: uPlot, look: Look): void {
    const { ctx, bbox } = plot;
    ctx.save();
    ctx.font = fontOf(look, devicePixelRatio);
    ctx.textAlign = 'left';
    ctx.lineJoin = 'round';
    const labels: Label[] = [];
    for (const { value, label, level } of this.#picture?.limits ?? []) {
      const y = Math.round(plot.valToPos(value, 'y', true));
      if (y < bbox.top || y > bbox.top + bbox.height) continue;
      const stop = level === 'stop';
      ctx.strokeStyle = stop ? look.stop : look.caution;
      ctx.lineWidth = (stop ? 2.5 : 1.5) * devicePixelRatio;
      ctx.setLineDash(stop ? [] : [10 * devicePixelRatio, 6 * devicePixelRatio]);
      ctx.beginPath();
      ctx.moveTo(bbox.left, y);
      ctx.lineTo(bbox.left + bbox.width, y);
      ctx.stroke();
      labels.push({ y, label, stop, up: stop === value >= 0 });
    }
    ctx.setLineDash([]);
    ctx.strokeStyle = look.ground;
    ctx.fillStyle = look.ink;
    ctx.lineWidth = 4 * devicePixelRatio;
    labels.forEach((one, i) => {
      // Of lines that lie on each other the first one's label stands for the rest of its level.
      if (labels.slice(0, i).some((other) => this.#hides(other, one))) return;
      const room = LABEL * devicePixelRatio;
      // Close before a stop limit is where the lines run on the way to it: named beyond both.
      const { y: line, up } =
        labels.find(
          (o) => o.stop && !one.stop && o.up !== one.up && Math.abs(o.y - one.y) < room,
        ) ?? one;
      const fits = up ? line - bbox.top > room : bbox.top + bbox.height - line > room;
      const above = up === fits;
      const y = line + (above ? -4 : 5) * devicePixelRatio;
      const inset = 6 * devicePixelRatio;
      const x = one.stop ? bbox.left + inset : bbox.left + bbox.width - inset;
      ctx.textAlign = one.stop ? 'left' : 'right';
      ctx.textBaseline = above ? 'bottom' : 'top';
      ctx.strokeText(one.label, x, y);
      ctx.fillText(one.label, x, y);
    });
    ctx.restore();
  }

  #hides(first: Label, second: Label): boolean {
    const apart = Math.abs(first.y - second.y) / devicePixelRatio;
    return first.stop === second.stop && apart < LABEL;
  }

  /** Each line's letter at its right end, moved apart where lines lie together. */
  #drawLetters(plot: uPlot, look: Look): void {
    const { ctx, bbox } = plot;
    const ends = (this.#picture?.lines ?? []).flatMap(({ letter, color, last }) => {
      const value = last.findLast(isFigure);
      return value === undefined ? [] : [{ letter, color, y: plot.valToPos(value, 'y', true) }];
    });
    ends.sort((a, b) => a.y - b.y);
    const room = 15 * devicePixelRatio;
    let above = bbox.top - room;
    ctx.save();
    ctx.font = `bold ${fontOf(look, devicePixelRatio)}`;
    ctx.textAlign = 'left';
    ctx.textBaseline = 'middle';
    for (const { letter, color, y } of ends) {
      above = Math.max(y, above + room);
      ctx.fillStyle = color;
      ctx.fillText(letter, bbox.left + bbox.width + 6 * devicePixelRatio, above);
    }
    ctx.restore();
  }
}

const lineAt = (picture: TrendPicture | null, series: number): readonly Cell[] =>
  picture?.lines[(series - 1) / 3]?.last ?? [];

/** As many decimals as tell one split from the next. */
const axisText =
  (splits: readonly number[]) =>
  (value: number): string => {
    const step = Math.abs((splits[1] ?? 1) - (splits[0] ?? 0)) || 1;
    const decimals = Math.max(0, Math.ceil(-Math.log10(step) - 1e-9));
    const text = Math.abs(value).toFixed(Math.min(decimals, 6));
    return value < 0 && Number(text) !== 0 ? `\u2212${text}` : text;
  };
