/** The border of the server: what flow.ts needs of the world, each with siblings that provide it. */
import type { Frame, InputBlock, Refusal, Result } from '../shared/model/frame.ts';
import type { ZeroRecord } from '../shared/model/calibration.ts';
import type { AlarmEvent, Limit } from '../shared/model/limit.ts';
import type { Site } from '../shared/model/site.ts';
import type { EpochSeconds } from '../shared/model/units.ts';
import type {
  AlarmList,
  CurrentValue,
  Fault,
  Health,
  History,
  LimitsRequest,
  NodeTally,
  PreviewLine,
  RevisionsAnswer,
  SetUpAnswer,
  SetUpRequest,
} from '../shared/protocol/http.ts';
import type {
  ChannelChecks,
  CheckLine,
  CheckRecord,
  CheckRequest,
  ChecksAnswer,
  EnteredRequest,
  PushRequest,
  ShuntRequest,
  ZerosAnswer,
  ZerosRequest,
} from '../shared/protocol/checks.ts';
import type { LiveValue, Snapshot } from '../shared/protocol/socket.ts';

/** A message as a node published it. */
export interface Delivery {
  readonly topic: string;
  readonly payload: Uint8Array;
  readonly retained: boolean;
  readonly arrived: EpochSeconds;
  /** Sends the acknowledgement (QoS 1). Called once: the content is durable, or refused for good. */
  readonly acknowledge: () => void;
}

/** What a delivery turned out to be. `node` is the one its topic names. */
export type Message =
  | {
      readonly kind: 'samples';
      readonly node: string;
      readonly frames: readonly Frame[];
      /** Of single readings; the others of the same message stand. */
      readonly refusals: readonly Refusal[];
    }
  | { readonly kind: 'status'; readonly node: string; readonly online: boolean }
  | { readonly kind: 'refused'; readonly node: string; readonly refusal: Refusal }
  /** Not for us: another topic below our root. */
  | { readonly kind: 'other' };

export type Decode = (delivery: Delivery) => Message;

/** Where deliveries come from: the embedded broker, or a client of another. */
export interface FrameSource {
  /** Resolves once messages can arrive. */
  start(receive: (delivery: Delivery) => void): Promise<void>;
  stop(): Promise<void>;
  /** Is the broker in reach now? */
  connected(): boolean;
  /** `mqtt://host:port` for nodes, once started; no password. */
  address(): string;
  /** For people: what it is and where. */
  description(): string;
}

/** What a node may be told to do. */
export interface NodeCommand {
  /** Lays its own shunt across an input's bridge, or takes it off. */
  readonly kind: 'shunt';
  readonly input: string;
  readonly on: boolean;
  /** It takes the shunt off by itself after so long. */
  readonly seconds: number;
}

export type CommandOutcome =
  | { readonly ok: true }
  /** `answered`: the node said no; else nothing came of it. */
  | { readonly ok: false; readonly answered: boolean; readonly why: string };

/** Commands to nodes, by the broker that their frames come from. */
export interface NodeCommands {
  /** Resolves when the node has acknowledged, or will no longer; never rejects. */
  command(node: string, command: NodeCommand): Promise<CommandOutcome>;
}

export interface StoredFrame {
  readonly frame: Frame;
  readonly arrived: EpochSeconds;
}

/** stored: durable now and was not there before. duplicate: was durable already. */
export type Stored = 'stored' | 'duplicate';

/** What a node's boot has in store: `ranges` of sequence numbers, ends included, ascending, apart. */
export interface BootTally {
  readonly node: string;
  readonly boot: string;
  readonly sequenced: boolean;
  readonly ranges: readonly (readonly [first: number, last: number])[];
  readonly frames: number;
  readonly samples: number;
  readonly firstArrived: EpochSeconds;
  readonly lastArrived: EpochSeconds;
}

/**
 * A series of raw figures in store: an input, or an input divided sample by
 * sample by the input that measures its excitation.
 */
export interface SeriesKey {
  readonly node: string;
  readonly input: string;
  readonly over: string | null;
}

/** Inputs that are read over the one which measures their excitation, by node. */
export type ExcitationPairs = Readonly<
  Record<string, readonly { readonly input: string; readonly over: string }[]>
>;

export interface EnvelopeQuery {
  readonly series: SeriesKey;
  readonly from: EpochSeconds;
  /** Not included. */
  readonly to: EpochSeconds;
  /** At least 1; at most one more than so many come back, since points lie on a fixed grid. */
  readonly points: number;
}

/**
 * Raw envelope over the finite samples of [from, to): equal-length columns,
 * ascending in time; a stretch without samples has no point. Points lie on whole
 * multiples of `step`, which does not depend on where the window begins, and each
 * is exact for its own stretch within the window.
 */
export interface Envelope {
  /** Where each point begins, s: a multiple of `step`, or the window's own begin. */
  readonly t: Float64Array;
  readonly min: Float64Array;
  readonly mean: Float64Array;
  readonly max: Float64Array;
  readonly count: Float64Array;
  /** Width of a point, s. */
  readonly step: number;
}

export interface RawRun extends InputBlock {
  readonly boot: string;
  readonly t0: EpochSeconds;
  readonly dt: number;
}

export interface SampleQuery {
  readonly node: string;
  readonly input: string;
  readonly from: EpochSeconds;
  readonly to: EpochSeconds;
  /** Throws RangeError past so many samples, before reading them. */
  readonly atMost: number;
}

/** Raw samples as measured, and what is derived of them. Nothing in it knows of strain. */
export interface SampleStore {
  /** Durable when it resolves: all of the frames, or on rejection none counted. Answers in order. */
  commit(frames: readonly StoredFrame[]): Promise<readonly Stored[]>;
  /** Keeps series of these pairs, and of no others, from the next frame on. */
  follow(pairs: ExcitationPairs): Promise<void>;
  has(node: string, boot: string, seq: number): Promise<boolean>;
  tally(): Promise<readonly BootTally[]>;
  envelope(query: EnvelopeQuery): Promise<Envelope>;
  /** Runs whose samples touch [from, to), whole, ascending by t0, then boot. */
  samples(query: SampleQuery): Promise<readonly RawRun[]>;
  close(): Promise<void>;
}

export interface LimitChange {
  readonly channel: string;
  readonly limits: readonly Limit[];
  readonly at: EpochSeconds;
  readonly author: string;
  readonly reason: string;
}

/** The site file as it was from `at` on. Revisions are added, never edited. */
export interface SiteRevision {
  /** 1, 2, 3, … */
  readonly revision: number;
  readonly at: EpochSeconds;
  readonly author: string;
  readonly reason: string;
  /** file: read at start; screen: changed while running. */
  readonly origin: 'file' | 'screen';
  /** The site file, JSON. */
  readonly text: string;
}

/** What people and alarms wrote: small, kept for ever, added to only. */
export interface RecordStore {
  /** Durable when it resolves; an event whose id is there already is left as it is. */
  addAlarmEvents(events: readonly AlarmEvent[]): Promise<void>;
  /** Newest first. */
  alarmEvents(atMost: number): Promise<readonly AlarmEvent[]>;
  /** The last event of each channel and level, late ones left out. */
  lastAlarmEvents(): Promise<readonly AlarmEvent[]>;
  addLimitChange(change: LimitChange): Promise<void>;
  /** The last change of each channel. */
  limitsInForce(): Promise<readonly LimitChange[]>;
  /** Both durable when it resolves, or neither; rejects for a revision that is there already. */
  addSiteRevision(revision: SiteRevision, limits: readonly LimitChange[]): Promise<void>;
  /** The newest; null before the first. */
  siteRevision(): Promise<SiteRevision | null>;
  /** Newest first, without their text. */
  siteRevisions(atMost: number): Promise<readonly Omit<SiteRevision, 'text'>[]>;
  /** All of them durable when it resolves, or none. */
  addCheckRecords(records: readonly CheckRecord[]): Promise<void>;
  /** The last of each channel and kind of check. */
  lastCheckRecords(): Promise<readonly CheckRecord[]>;
  close(): Promise<void>;
}

export type SiteReading =
  | { readonly ok: true; readonly site: Site }
  | { readonly ok: false; readonly faults: readonly Fault[] };

/** The site file as a format: what it says, and the changes that Yieldward itself makes in one. */
export interface SiteFormat {
  /** A checked site, or everything that is wrong with the text at once. */
  read(text: string): SiteReading;
  /** With these limits, by channel id, in each channel that states others. */
  withLimits(text: string, limits: ReadonlyMap<string, readonly Limit[]>): string;
  /** With `recorded_at` on each record that has none and that `before` does not have. */
  stamped(text: string, before: string, at: EpochSeconds): string;
  /** With a zero added to its channel. */
  withZero(text: string, channel: string, zero: ZeroRecord): string;
}

export interface Clock {
  now(): EpochSeconds;
  /** Calls back after `seconds`; the returned function cancels. */
  after(seconds: number, call: () => void): () => void;
}

export type SetUpOutcome =
  | { readonly kind: 'changed'; readonly revision: number }
  | { readonly kind: 'refused'; readonly faults: readonly Fault[] }
  /** Somebody else changed it first: what stands now, and whose it is. */
  | {
      readonly kind: 'conflict';
      readonly revision: number;
      readonly at: EpochSeconds;
      readonly author: string;
      readonly reason: string;
    };

/** The set-up of the site, read and changed while everything runs. */
export interface SetUpDesk {
  answer(): SetUpAnswer;
  revisions(): Promise<RevisionsAnswer>;
  /** What a change would do to the past, line by line; faults instead, if it may not be. */
  preview(
    document: unknown,
  ):
    | { readonly ok: true; readonly lines: AsyncGenerator<PreviewLine> }
    | { readonly ok: false; readonly faults: readonly Fault[] };
  change(request: SetUpRequest): Promise<SetUpOutcome>;
}

type Faulty = { readonly ok: false; readonly faults: readonly Fault[] };

export type CheckLines = { readonly ok: true; readonly lines: AsyncGenerator<CheckLine> } | Faulty;

/** Of zeros: `kind` as of any change of the set-up. Nothing zeroed is no change. */
export type ZerosOutcome =
  | { readonly kind: 'answered'; readonly answer: ZerosAnswer }
  | Exclude<SetUpOutcome, { kind: 'changed' }>;

/** Channel checks before anybody loads anything, and zeros. Whatever is judged is put on record. */
export interface CheckDesk {
  answer(): Promise<ChecksAnswer>;
  /** Of the samples that have come, channel by channel. */
  run(request: CheckRequest): CheckLines;
  /** Watches the channel while somebody pushes. */
  push(request: PushRequest): CheckLines;
  shunt(request: ShuntRequest): CheckLines;
  enter(
    request: EnteredRequest,
  ): Promise<{ readonly ok: true; readonly value: ChannelChecks } | Faulty>;
  zero(request: ZerosRequest): Promise<ZerosOutcome>;
}

/** What screens and scripts may ask of the running core, and what they may change. */
export interface Core {
  site(): Site;
  health(): Health;
  snapshot(): Snapshot;
  values(): readonly CurrentValue[];
  alarms(): AlarmList;
  tally(): readonly NodeTally[];
  /** Refused for an unknown channel; `to` is not included; 1 ≤ points ≤ 20,000. */
  history(
    channel: string,
    from: EpochSeconds,
    to: EpochSeconds,
    points: number,
  ): Promise<Result<History>>;
  limits(): Readonly<Record<string, readonly Limit[]>>;
  /** Every fault at once; none means that the change is durable and in force. */
  setLimits(channel: string, request: LimitsRequest): Promise<readonly Fault[]>;
}

/** Browsers, as the core sees them: told, never waited for. */
export interface Feed {
  live(values: readonly LiveValue[]): void;
  alarms(list: AlarmList): void;
  nodes(nodes: readonly NodeTally[]): void;
  limits(channel: string, limits: readonly Limit[]): void;
  health(health: Health): void;
  /** The set-up is another one from now on. */
  revision(revision: number): void;
}
