import type { EpochSeconds, Seconds } from './units.ts';

/** What a node may send: RFC 8746 little-endian float32, float64, int16, int32. */
export type RawArray = Float32Array | Float64Array | Int16Array | Int32Array;

export interface InputBlock {
  /** The input's name on its node. */
  readonly input: string;
  /** As measured, in the unit that the site file declares for the input. */
  readonly samples: RawArray;
}

/**
 * A run of samples of one node, equally spaced in time.
 *
 * (node, boot, seq) names a frame for ever: the same three are the same frame.
 * A SenML reading has no sequence number; its boot is `senml/<input>` and its
 * seq the time in whole µs, so that the same holds, but nothing can be missed.
 */
export interface Frame {
  readonly node: string;
  /** New each time the node starts. */
  readonly boot: string;
  /** 0, 1, 2, … within a boot, for `sequenced` frames. */
  readonly seq: number;
  readonly sequenced: boolean;
  /** Time of the first sample by the node's clock. */
  readonly t0: EpochSeconds;
  /** Sample interval; 0 only for a frame of one sample. */
  readonly dt: Seconds;
  /** At least one; all of the same length. */
  readonly inputs: readonly InputBlock[];
}

export const sampleCount = (frame: Frame): number => frame.inputs[0]?.samples.length ?? 0;

/** Why something was refused, in words that let its sender mend it. */
export interface Refusal {
  readonly code: string;
  /** The field, as a path: `in.s1`, `t0`. */
  readonly field: string;
  readonly expected: string;
  readonly came: string;
}

export type Result<T> =
  { readonly ok: true; readonly value: T } | { readonly ok: false; readonly refusal: Refusal };

export const refuse = (
  code: string,
  field: string,
  expected: string,
  came: string,
): { readonly ok: false; readonly refusal: Refusal } => ({
  ok: false,
  refusal: { code, field, expected, came },
});

export const accept = <T>(value: T): { readonly ok: true; readonly value: T } => ({
  ok: true,
  value,
});
