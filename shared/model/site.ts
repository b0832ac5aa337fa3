import type { CalibrationRecord, ZeroRecord } from './calibration.ts';
import type { Limit } from './limit.ts';
import type {
  CubicMetre,
  Metre,
  Newton,
  Pascal,
  QuarticMetre,
  Seconds,
  Share,
  SquareMetre,
} from './units.ts';
import type { Definition } from './virtual.ts';

/** A cross-section; axes as EN 1993-1-1 §1.7: y–y strong, z–z weak. */
export interface Section {
  readonly designation: string;
  readonly source: string;
  readonly height: Metre;
  readonly width: Metre;
  readonly area: SquareMetre;
  readonly inertiaY: QuarticMetre;
  readonly inertiaZ: QuarticMetre;
  readonly modulusY: CubicMetre;
  readonly modulusZ: CubicMetre;
  /** Thickness of the thickest plate or wall, which sets the yield strength. */
  readonly thickness: Metre;
}

export interface Material {
  readonly designation: string;
  readonly source: string;
  readonly youngsModulus: Pascal;
  readonly poisson: number;
  /** Linear thermal expansion, 1/K. */
  readonly expansion: number;
  /** Yield (or 0.2 % proof) strength at the member's thickness. */
  readonly yieldStrength: Pascal;
}

/** What a channel reports. */
export const MEASURANDS = [
  'strain',
  'shear',
  'force',
  'displacement',
  'temperature',
  'stress',
  'moment',
  'angle',
  'number',
] as const;
export type Measurand = (typeof MEASURANDS)[number];

/** The SI unit of each. */
export const MEASURAND_UNITS = {
  strain: 'm/m',
  shear: 'm/m',
  force: 'N',
  displacement: 'm',
  temperature: 'Cel',
  stress: 'Pa',
  moment: 'N m',
  angle: 'rad',
  number: '1',
} as const satisfies Readonly<Record<Measurand, string>>;

interface ChannelHead {
  /** Unique in the site. */
  readonly id: string;
  readonly name: string;
  readonly measurand: Measurand;
  readonly limits: readonly Limit[];
}

/** Read from an input of a node by its calibration records. */
export interface MeasuredChannel extends ChannelHead {
  readonly kind: 'measured';
  readonly node: string;
  readonly input: string;
  /** In the order in which they were added; at least one. */
  readonly calibration: readonly CalibrationRecord[];
  /** In the order in which they were added. */
  readonly zeros: readonly ZeroRecord[];
}

/** Comes from other channels, and is in all else a channel as others. */
export interface VirtualChannel extends ChannelHead {
  readonly kind: 'virtual';
  readonly definition: Definition;
}

export type Channel = MeasuredChannel | VirtualChannel;

export interface Station {
  readonly id: string;
  /** Distance along the member from its start. */
  readonly at: Metre;
  readonly channels: readonly Channel[];
}

export type Point = readonly [x: Metre, y: Metre, z: Metre];

export interface Member {
  readonly id: string;
  readonly name: string;
  readonly section: Section;
  readonly material: Material;
  /** Axis of the member in site coordinates: x, y level, z up. */
  readonly from: Point;
  readonly to: Point;
  readonly stations: readonly Station[];
}

/** A side view: which members it shows, and which site axis runs to the right. */
export interface Elevation {
  readonly name: string;
  readonly right: 'x' | 'y' | '-x' | '-y';
  readonly members: readonly string[];
}

export interface Structure {
  readonly id: string;
  readonly name: string;
  readonly members: readonly Member[];
  readonly elevations: readonly Elevation[];
  /** The channel that says how much load is on, if there is one. */
  readonly loadChannel: string | null;
  readonly safeWorkingLoad: Newton | null;
}

/** The unit in which a node states an input (SenML names, RFC 8428 §12.1). */
export type InputUnit = '/' | 'V' | 'count' | 'Cel' | 'N' | 'm';

export interface NodeInput {
  readonly name: string;
  readonly unit: InputUnit;
  /** At or beyond either end the input is over range and its samples are not believed. */
  readonly range: readonly [low: number, high: number] | null;
}

export interface FieldNode {
  readonly id: string;
  readonly name: string;
  readonly inputs: readonly NodeInput[];
  /** Without a frame for this long its channels are stale. */
  readonly staleAfter: Seconds;
}

/** A checked site: every reference in it resolves. Made by the site file's reader only. */
export interface Site {
  readonly id: string;
  readonly name: string;
  /** Its nodes are simulated: said on every screen and in every export. */
  readonly simulated: boolean;
  /** The share of yield that no limit may pass. */
  readonly highestLimit: Share;
  readonly structures: readonly Structure[];
  readonly nodes: readonly FieldNode[];
}

/** Channels in site order: by structure, member, station, there measured ones before virtual ones. */
export const channelsOf = (site: Site): { channel: Channel; member: Member; station: Station }[] =>
  site.structures.flatMap(({ members }) =>
    members.flatMap((member) =>
      member.stations.flatMap((station) =>
        station.channels.map((channel) => ({ channel, member, station })),
      ),
    ),
  );

export const measuredOf = (
  site: Site,
): { channel: MeasuredChannel; member: Member; station: Station }[] =>
  channelsOf(site).flatMap(({ channel, ...place }) =>
    channel.kind === 'measured' ? [{ channel, ...place }] : [],
  );
