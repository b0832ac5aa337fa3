/** One thing wrong with what somebody gave; all of them are listed at once. */
export interface Fault {
  /** Where, as a JSON pointer or parameter name. */
  readonly path: string;
  readonly expected: string;
  readonly came: string;
}
