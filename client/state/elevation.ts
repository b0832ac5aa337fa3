import type { Elevation, Member, Point, Station, Structure } from '../../shared/model/site.ts';

/** Screen coordinates: px, y downward. */
export type Spot = readonly [x: number, y: number];

export interface MemberShape {
  readonly member: Member;
  readonly from: Spot;
  readonly to: Spot;
  /** Of the section as seen, to scale, but never thinner than can be seen, px. */
  readonly depth: number;
  /** Degrees clockwise from level, over −90 to 90, −90 itself included: text along it reads upright or upward. */
  readonly angle: number;
  /** In the middle of its longest stretch without a station. */
  readonly name: Spot;
}

export interface StationShape {
  readonly station: Station;
  readonly member: Member;
  readonly at: Spot;
  readonly angle: number;
}

export interface ElevationLayout {
  readonly width: number;
  readonly height: number;
  readonly members: readonly MemberShape[];
  readonly stations: readonly StationShape[];
  /** Where members stand on the ground. */
  readonly supports: readonly Spot[];
  readonly ground: number;
  /** px per m. */
  readonly scale: number;
}

/** Room round the drawing, px. */
export interface Margins {
  readonly side: number;
  readonly top: number;
  readonly bottom: number;
}

const THINNEST = 6;

/** m, to the right and upward. */
const project = ([x, y, z]: Point, right: Elevation['right']): Spot => {
  switch (right) {
    case 'x':
      return [x, z];
    case '-x':
      return [-x, z];
    case 'y':
      return [y, z];
    case '-y':
      return [-y, z];
  }
};

const between = ([ax, ay]: Spot, [bx, by]: Spot, share: number): Spot => [
  ax + (bx - ax) * share,
  ay + (by - ay) * share,
];

export const memberLength = ({ from, to }: Member): number =>
  Math.hypot(to[0] - from[0], to[1] - from[1], to[2] - from[2]);

/** Middle of the longest stretch without a station, as a share of the length. */
const longestFree = (member: Member): number => {
  const length = memberLength(member);
  if (length === 0) return 0.5;
  const stops = [0, ...member.stations.map(({ at }) => at / length), 1].sort((a, b) => a - b);
  const gaps = stops.slice(1).map((stop, i) => stop - (stops[i] ?? 0));
  const widest = gaps.indexOf(Math.max(...gaps));
  return ((stops[widest] ?? 0) + (stops[widest + 1] ?? 1)) / 2;
};

const angleOf = ([ax, ay]: Spot, [bx, by]: Spot): number => {
  const degrees = (Math.atan2(by - ay, bx - ax) * 180) / Math.PI;
  if (degrees >= 90) return degrees - 180;
  return degrees < -90 ? degrees + 180 : degrees;
};

/** Members of the view that the structure has, in the view's order. */
const membersOf = (structure: Structure, { members }: Elevation): Member[] =>
  members.flatMap((id) => structure.members.find((member) => member.id === id) ?? []);

/** Level extent of a view, m. */
export const viewExtent = (
  structure: Structure,
  view: Elevation,
): { width: number; height: number } => {
  const spots = membersOf(structure, view).flatMap(({ from, to }) =>
    [from, to].map((p) => project(p, view.right)),
  );
  if (spots.length === 0) return { width: 0, height: 0 };
  const span = (values: number[]) => Math.max(...values) - Math.min(...values);
  return { width: span(spots.map(([x]) => x)), height: span(spots.map(([, z]) => z)) };
};

/** A view drawn to one scale in `width` px, or less scale if it would be higher than `highest` px. */
export const layoutElevation = (
  structure: Structure,
  view: Elevation,
  width: number,
  highest: number,
  margins: Margins,
): ElevationLayout => {
  const members = membersOf(structure, view);
  const extent = viewExtent(structure, view);
  const room = { x: width - 2 * margins.side, y: highest - margins.top - margins.bottom };
  const fits = [room.x / extent.width, room.y / extent.height].filter(Number.isFinite);
  const scale = fits.length > 0 ? Math.max(1, Math.min(...fits)) : 1;
  const ends = members.flatMap(({ from, to }) => [from, to].map((p) => project(p, view.right)));
  const left = Math.min(...ends.map(([x]) => x));
  const [low, high] = [Math.min(...ends.map(([, z]) => z)), Math.max(...ends.map(([, z]) => z))];
  const inset = (width - extent.width * scale) / 2;
  const place = (point: Point): Spot => {
    const [x, z] = project(point, view.right);
    return [inset + (x - left) * scale, margins.top + (high - z) * scale];
  };
  const shapes = members.map((member): MemberShape => {
    const [from, to] = [place(member.from), place(member.to)];
    const angle = angleOf(from, to);
    return {
      ...{ member, from, to, angle },
      depth: Math.max(THINNEST, member.section.height * scale),
      name: between(from, to, longestFree(member)),
    };
  });
  const stations = shapes.flatMap(({ member, from, to, angle }) =>
    member.stations.map((station): StationShape => {
      const length = memberLength(member);
      const at = between(from, to, length > 0 ? station.at / length : 0);
      return { station, member, at, angle };
    }),
  );
  const ground = margins.top + (Number.isFinite(high - low) ? high - low : 0) * scale;
  const feet = shapes.flatMap(({ from, to, angle }) =>
    Math.abs(angle) < 1 ? [] : [from, to].filter(([, y]) => Math.abs(y - ground) < 0.5),
  );
  const isFirst = (spot: Spot, i: number) =>
    feet.findIndex(([x]) => Math.abs(x - spot[0]) < 0.5) === i;
  return {
    ...{ width, height: ground + margins.bottom, members: shapes, stations, ground, scale },
    supports: feet.filter(isFirst),
  };
};

/** A figure toward tension (up) or compression (down) of a two-sided bar. */
export interface BarShape {
  readonly y: number;
  readonly height: number;
  readonly side: 'tension' | 'compression';
  /** It goes past what the bar can show. */
  readonly beyond: boolean;
}

/** How far past its end mark a bar may be drawn, as a share of its half. */
export const OVERSHOOT = 1.12;

/** `share`: signed, 1 at the end mark `reach` px from the middle; null for no figure. */
export const barShape = (share: number, reach: number): BarShape | null => {
  if (!Number.isFinite(share)) return null;
  const size = Math.min(Math.abs(share), OVERSHOOT) * reach;
  return {
    y: share < 0 ? 0 : -size,
    height: size,
    side: share < 0 ? 'compression' : 'tension',
    beyond: Math.abs(share) > OVERSHOOT,
  };
};

/** Middles of `count` lanes of `pitch` px, side by side and centred, px. */
export const laneOffsets = (count: number, pitch: number): number[] =>
  Array.from({ length: count }, (_, i) => (i - (count - 1) / 2) * pitch);

/** Views that stand side by side in one row, and the scale they share, px per m. */
export const arrangeViews = (
  widths: readonly number[],
  room: number,
  side: number,
  gap: number,
  smallest: number,
): { perRow: number; scale: number } => {
  const widest = [...widths].sort((a, b) => b - a);
  for (let perRow = widths.length; perRow >= 1; perRow--) {
    const metres = widest.slice(0, perRow).reduce((sum, width) => sum + width, 0);
    const scale = (room - (perRow - 1) * gap - perRow * 2 * side) / metres;
    if (scale >= smallest || perRow === 1) return { perRow, scale };
  }
  return { perRow: 1, scale: smallest };
};
