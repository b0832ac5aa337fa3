import { describe, expect, test } from 'vitest';
import {
  correctionOf,
  freeId,
  isTaken,
  keepDraft,
  newRecord,
  readDraft,
  signed,
  withStep,
  type Draft,
} from '../../../client/state/set-up/draft.ts';

const RECORD = {
  ...{ id: 'g1-cal1', valid_from: '2026-05-06T07:30:00Z', author: 'A', reason: 'R' },
  ...{ recorded_at: '2026-05-06T08:00:00Z', corrects: 'g1-cal0' },
  ...{ signal: { kind: 'ratio' }, response: { kind: 'bridge', gauge_factor: 2.1 } },
};
const FIGURES = { signal: RECORD.signal, response: RECORD.response };

const memory = () => {
  const kept = new Map<string, string>();
  return () => ({
    getItem: (key: string) => kept.get(key) ?? null,
    setItem: (key: string, value: string) => void kept.set(key, value),
  });
};

const DRAFT: Draft = {
  ...{ basedOn: 3, base: { a: 1 }, document: { a: 2 } },
  ...{ author: 'B', reason: 'W', answered: ['x'] },
};

describe('a draft', () => {
  test('is kept in the tab and read again; taken away it is gone', () => {
    const tab = memory();
    expect(readDraft(tab)).toBeNull();
    expect(keepDraft(tab, DRAFT)).toBe(true);
    expect(readDraft(tab)).toEqual(DRAFT);
    keepDraft(tab, null);
    expect(readDraft(tab)).toBeNull();
  });
  test('that a browser does not keep is said to be unkept', () => {
    const full = () => {
      throw new DOMException('full', 'QuotaExceededError');
    };
    expect(keepDraft(full, DRAFT)).toBe(false);
    expect(readDraft(full)).toBeNull();
  });
  test('is taken once all it says stands, but for when records were added', () => {
    const stamped = { r: [{ id: 'a', recorded_at: '2026-05-06T08:00:00Z' }] };
    expect(isTaken({ r: [{ id: 'a' }] }, stamped)).toBe(true);
    expect(isTaken({ r: [{ id: 'b' }] }, stamped)).toBe(false);
  });
});

test('what is typed into one field in a row is one step back', () => {
  const one = withStep([], 'a', '/x');
  expect(withStep(one, 'ab', '/x')).toEqual(one);
  expect(withStep(one, 'ab', '/y')).toHaveLength(2);
  expect(withStep(withStep([], 'a', null), 'b', null)).toHaveLength(2);
});

describe('records are added', () => {
  const taken = new Set(['g1-cal1', 'g1-cal2']);
  test('with an id that is free in the site', () => {
    expect(freeId('g1-cal', taken)).toBe('g1-cal3');
  });
  test('a new one begins when it is said, with the figures of the last one', () => {
    expect(newRecord({ id: 'g1' }, RECORD, 1778060000.7, 'T', taken)).toEqual({
      ...{ id: 'g1-cal3', valid_from: '2026-05-06T09:33:20Z', author: 'T', reason: '' },
      ...FIGURES,
    });
  });
  test('a correction takes the place of the other over all of its time', () => {
    expect(correctionOf({ id: 'g1' }, RECORD, 'T', taken)).toEqual({
      ...{ id: 'g1-cal3', valid_from: RECORD.valid_from, author: 'T', reason: '' },
      ...{ corrects: 'g1-cal1', ...FIGURES },
    });
  });
});

test('a new record that says nothing of it is by who saves it, for the same reason', () => {
  const site = (...calibration: object[]) =>
    ({
      structures: [{ members: [{ stations: [{ channels: [{ id: 'g1', calibration }] }] }] }],
    }) as unknown as Draft['document'];
  const blank = { id: 'g1-cal2', author: '', reason: '  ' };
  const own = { id: 'g1-cal3', author: 'O', reason: 'own' };
  const draft = { ...DRAFT, base: site(RECORD), document: site(RECORD, blank, own) };
  expect(signed(draft)).toEqual(site(RECORD, { id: 'g1-cal2', author: 'B', reason: 'W' }, own));
  expect(signed({ ...draft, author: ' ', reason: '' })).toEqual(draft.document);
});
