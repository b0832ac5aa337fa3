/** Shapes of the REST API, one home for both ends. Figures are SI; times are UTC seconds. */
import type { Fault } from '../model/fault.ts';
import type { AlarmEvent, Limit } from '../model/limit.ts';
import type { Quality } from '../model/block.ts';
import type { Measurand, MEASURAND_UNITS } from '../model/site.ts';

export interface Health {
  readonly ok: boolean;
  readonly simulated: boolean;
  readonly version: string;
  readonly upSince: number;
  readonly broker: { readonly connected: boolean; readonly description: string };
  readonly store: { readonly ok: boolean; readonly description: string };
}

export interface CurrentValue {
  readonly channel: string;
  /** Of the last believed sample, in the channel's SI unit; null if there has been none. */
  readonly value: number | null;
  readonly at: number | null;
  readonly quality: Quality | 'stale' | 'none';
}

/** A channel, where it sits and what it reads now; limits are those in force. */
export interface ChannelReport {
  readonly id: string;
  readonly name: string;
  readonly structure: string;
  readonly member: string;
  readonly station: string;
  readonly measurand: Measurand;
  /** SI unit of its figures. */
  readonly unit: (typeof MEASURAND_UNITS)[Measurand];
  /** null: virtual. */
  readonly node: string | null;
  readonly input: string | null;
  readonly limits: readonly Limit[];
  readonly current: CurrentValue;
}

export interface ChannelAnswer {
  readonly simulated: boolean;
  readonly channel: ChannelReport;
}

export interface ChannelsAnswer {
  readonly simulated: boolean;
  /** In site order. */
  readonly channels: readonly ChannelReport[];
}

/**
 * Columns of equal length, ascending in time; min ≤ mean ≤ max in the
 * channel's SI unit. null where a sample in the point is not to be believed
 * (over range, excitation): a gap, never a figure.
 */
export interface History {
  readonly channel: string;
  readonly simulated: boolean;
  readonly from: number;
  readonly to: number;
  readonly step: number;
  /** means: of a virtual channel over a long window, worked out of the means of its sources. */
  readonly derived: 'samples' | 'means';
  readonly t: readonly number[];
  readonly min: readonly (number | null)[];
  readonly mean: readonly (number | null)[];
  readonly max: readonly (number | null)[];
}

export interface RefusalCount {
  readonly code: string;
  readonly field: string;
  readonly expected: string;
  /** What came the last time. */
  readonly came: string;
  readonly count: number;
  readonly lastAt: number;
}

/** Frames of one node, since the store began for stored and missing; since start for the rest. */
export interface NodeTally {
  readonly node: string;
  /** false: something publishes under a name that the site file does not have. */
  readonly known: boolean;
  readonly status: 'online' | 'offline' | 'unknown';
  readonly boot: string | null;
  readonly lastFrameAt: number | null;
  readonly stale: boolean;
  readonly received: number;
  readonly stored: number;
  readonly duplicate: number;
  readonly missing: number;
  readonly refused: number;
  readonly refusals: readonly RefusalCount[];
  /** Inputs that came but belong to no channel and no excitation; stored all the same. */
  readonly unassigned: readonly string[];
}

export interface ActiveAlarm {
  readonly channel: string;
  readonly level: Limit['level'];
  readonly raised: AlarmEvent;
}

export interface AlarmList {
  readonly active: readonly ActiveAlarm[];
  /** Newest first. */
  readonly recent: readonly AlarmEvent[];
}

export interface AlarmsAnswer extends AlarmList {
  readonly simulated: boolean;
}

export interface TallyAnswer {
  readonly simulated: boolean;
  readonly nodes: readonly NodeTally[];
}

export interface LimitsRequest {
  readonly limits: readonly Limit[];
  readonly author: string;
  readonly reason: string;
}

/** The site file with the limits in force, and who made it what it is. */
export interface SetUpAnswer {
  readonly simulated: boolean;
  readonly revision: number;
  readonly at: number;
  readonly author: string;
  readonly reason: string;
  readonly origin: 'file' | 'screen';
  /** As docs/site.schema.json describes it. */
  readonly document: unknown;
}

export interface SetUpRequest {
  readonly document: unknown;
  /** The revision that it was made from. */
  readonly basedOn: number;
  readonly author: string;
  readonly reason: string;
}

export interface RevisionsAnswer {
  readonly simulated: boolean;
  /** Newest first. */
  readonly revisions: readonly Omit<SetUpAnswer, 'simulated' | 'document'>[];
}

/** What a change of the set-up would make of one channel's past, SI. */
export interface ChannelChange {
  readonly channel: string;
  readonly from: number;
  /** Not included. */
  readonly to: number;
  /** How many points were compared. */
  readonly points: number;
  /** Extremes over the window; null: nothing believed in it. */
  readonly before: { readonly min: number; readonly max: number } | null;
  readonly after: { readonly min: number; readonly max: number } | null;
  /** Of the means of points. */
  readonly largest: { readonly at: number; readonly before: number; readonly after: number } | null;
}

/** A line of the preview (application/x-ndjson); the last one is the result. */
export type PreviewLine =
  | { readonly kind: 'progress'; readonly done: number; readonly of: number }
  | { readonly kind: 'result'; readonly channels: readonly ChannelChange[] };

export type { Fault };

/** Body of every answer that is not 2xx. */
export interface Problem {
  readonly error: string;
  readonly faults: readonly Fault[];
}
