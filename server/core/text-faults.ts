import type { Fault } from '../../shared/model/fault.ts';

const LONGEST_TEXT = 500;

/** Who and why have to be said, in not too many words. */
export const textFaults = (path: string, text: string): Fault[] =>
  text.trim() !== '' && text.length <= LONGEST_TEXT
    ? []
    : [{ path, expected: `1 to ${LONGEST_TEXT} characters`, came: `${text.length}` }];

/** A note may be left out. */
export const noteFaults = (path: string, text: string): Fault[] =>
  text === '' ? [] : textFaults(path, text);
