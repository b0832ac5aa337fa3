/** Shapes of the channel checks and zeros, one home for both ends. SI; times are UTC seconds. */
import type { CheckLimits } from '../channel-check/limits.ts';
import type { ShuntPlace } from '../channel-check/shunt.ts';
import type { Check, Verdict } from '../channel-check/verdict.ts';
import type { HeatSink, StructureState } from '../model/calibration.ts';
import type { Refusal } from '../model/frame.ts';
import type { Arm } from '../pipeline/2-ratio/shunt.ts';

export interface TimeWindow {
  readonly from: number;
  /** Not included. */
  readonly to: number;
}

/** What a check was judged from. */
export type Given =
  | ({ readonly kind: 'samples' } & TimeWindow)
  | ({ readonly kind: 'push'; readonly expected: PushRequest['expected'] } & TimeWindow)
  | {
      readonly kind: 'shunt';
      readonly how: ShuntRequest['how'];
      readonly place: ShuntPlace;
      readonly arm: Arm;
      /** Ohm */
      readonly resistance: number;
      readonly before: TimeWindow;
      readonly during: TimeWindow;
      /** null: not read again without the shunt. */
      readonly after: TimeWindow | null;
    }
  /** Ohm to ground. */
  | { readonly kind: 'insulation'; readonly resistance: number }
  | {
      readonly kind: 'self-heating';
      /** V across the bridge. */
      readonly excitation: number;
      /** m² */
      readonly gridArea: number;
      readonly on: HeatSink;
    };

/** A verdict as it was put on record. */
export interface CheckRecord {
  readonly channel: string;
  readonly at: number;
  readonly author: string;
  /** Of the set-up that it was judged by. */
  readonly revision: number;
  readonly check: Check;
  readonly given: Given;
  /** May be empty. */
  readonly note: string;
}

/** The latest of each kind, in the order of CHECK_KINDS; `record` null: never made. */
export interface ChannelChecks {
  readonly channel: string;
  /** The gravest of all; not judged only where none is. */
  readonly verdict: Verdict;
  readonly checks: readonly {
    readonly check: Check;
    readonly record: Omit<CheckRecord, 'channel' | 'check'> | null;
  }[];
}

export interface ChecksAnswer {
  readonly simulated: boolean;
  /** Of the set-up that stands; what was judged by an earlier one may no longer hold. */
  readonly revision: number;
  /** Measured channels in site order. */
  readonly channels: readonly ChannelChecks[];
  /** The last that were taken since the server started; null: none. */
  readonly zeros: ZerosAnswer | null;
}

interface Signed {
  readonly author: string;
  readonly note: string;
}

/** What may be stated in place of the usual limits; SI. */
export type StatedLimits = Partial<Pick<CheckLimits, 'offset' | 'noise' | 'drift'>>;

export interface CheckRequest extends Signed {
  /** null: all measured ones. */
  readonly channels: readonly string[] | null;
  /** The last so many, 2 to 600. */
  readonly seconds: number;
  readonly limits: StatedLimits;
}

export interface PushRequest extends Signed {
  readonly channel: string;
  /** 5 to 60; the first fifth at rest. */
  readonly seconds: number;
  /** Where the value should go: up is tension. */
  readonly expected: 'up' | 'down';
}

export interface ShuntRequest extends Signed {
  readonly channel: string;
  readonly how: 'commanded' | 'manual';
  readonly place: ShuntPlace;
  readonly arm: Arm;
  /** Ohm */
  readonly resistance: number;
  /** How long each level is read, 2 to 60. */
  readonly seconds: number;
  /** When the levels were read of a shunt laid by hand; null if commanded. */
  readonly read: {
    readonly before: TimeWindow;
    readonly during: TimeWindow;
  } | null;
}

/** Something that a person found out. */
export interface EnteredRequest extends Signed {
  readonly channel: string;
  readonly entered:
    | { readonly kind: 'insulation'; readonly resistance: number }
    /** null: what the calibration record states. */
    | {
        readonly kind: 'self-heating';
        readonly excitation: number | null;
        readonly grid: { readonly area: number; readonly on: HeatSink } | null;
      };
}

/** What is to be done or is being done during a step, and for how long, s. */
export const PHASES = ['rest', 'push', 'shunt-on', 'shunt-off', 'arriving'] as const;
export type Phase = (typeof PHASES)[number];

/** A line of a check (application/x-ndjson); the last one is the result, or why there is none. */
export type CheckLine =
  | {
      readonly kind: 'progress';
      readonly done: number;
      readonly of: number;
      /** The one just done, on record. */
      readonly channel: ChannelChecks;
    }
  | { readonly kind: 'phase'; readonly phase: Phase; readonly seconds: number }
  | { readonly kind: 'result'; readonly channels: readonly ChannelChecks[] }
  /** `byHand`: the same can be done by a person. */
  | { readonly kind: 'stopped'; readonly why: string; readonly byHand: boolean };

export interface ZerosRequest {
  readonly channels: readonly string[];
  /** The last so many, 2 to 600. */
  readonly seconds: number;
  readonly state: StructureState;
  readonly author: string;
  readonly reason: string;
  /** The revision that was looked at. */
  readonly basedOn: number;
}

export interface ZerosAnswer {
  readonly simulated: boolean;
  readonly at: number;
  readonly author: string;
  /** The set-up that stands now. */
  readonly revision: number;
  readonly zeroed: readonly {
    readonly channel: string;
    /** Id of the zero record. */
    readonly zero: string;
    /** By how much the channel's value changes, its SI unit. */
    readonly change: number;
    readonly samples: number;
    /** °C of the structure at the gauge; null: not known. */
    readonly temperature: number | null;
  }[];
  readonly refused: readonly { readonly channel: string; readonly refusal: Refusal }[];
  /** What could not be made sure of. */
  readonly cautions: readonly string[];
}
