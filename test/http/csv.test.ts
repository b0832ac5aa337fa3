import fc from 'fast-check';
import { expect, test } from 'vitest';
import { historyCsv, historyFileName } from '../../server/http/history-csv.ts';
import type { History } from '../../shared/protocol/http.ts';
import { START } from '../helpers/core.ts';
import { serve } from './serve.ts';

/** RFC 4180 §2 by its ABNF: records end in CRLF, quotes double inside quotes, nothing else is escaped. */
const parseCsv = (text: string): string[][] => {
  const record = /(?:"((?:[^"]|"")*)"|([^",\r\n]*))(,|\r\n)/y;
  const rows: string[][] = [];
  let row: string[] = [];
  while (record.lastIndex < text.length) {
    const at = record.lastIndex;
    const match = record.exec(text);
    if (!match) throw new Error(`no RFC 4180 at ${at}`);
    row.push(match[1]?.replaceAll('""', '"') ?? match[2] ?? '');
    if (match[3] === '\r\n') {
      rows.push(row);
      row = [];
    }
  }
  return rows;
};

test('history as CSV: units in the header, each line marked as simulated, gaps empty', async () => {
  const { ask } = await serve();
  const window = `from=${START}&to=${START + 2}`;
  const answer = await ask(`/api/history?channel=ratio&${window}&format=csv`);
  expect(answer.status).toBe(200);
  // RFC 4180 §3, RFC 6266 §4
  expect(answer.headers['content-type']).toMatch(/^text\/csv; charset=utf-8; header=present$/);
  expect(answer.headers['content-disposition']).toBe(
    'attachment; filename=SIMULATED_yard_ratio_20270115T080000Z_20270115T080002Z.csv',
  );
  expect(answer.headers['x-simulated']).toBe('yes');
  expect(parseCsv(answer.body)).toEqual([
    ['time_utc', 'min_microstrain', 'mean_microstrain', 'max_microstrain', 'channel', 'simulated'],
    ['2027-01-15T08:00:00.000000Z', '1.1', '1.2', '1.3', 'ratio', 'yes'],
    ['2027-01-15T08:00:00.500000Z', '', '', '', 'ratio', 'yes'],
    ['2027-01-15T08:00:01.000500Z', '-300', '0', '300000', 'ratio', 'yes'],
  ]);
});

const units = [
  ['volts', 'microstrain', 1e6],
  ['hook', 'kN', 1e-3],
  ['sag', 'mm', 1e3],
  ['steel', 'Cel', 1],
] as const;

test.each(units)('channel %s is in %s', async (channel, unit, factor) => {
  const { ask } = await serve();
  const answer = await ask(`/api/history?channel=${channel}&from=1&to=2&format=csv`);
  const [header = [], first = []] = parseCsv(answer.body);
  expect(header.slice(1, 4)).toEqual([`min_${unit}`, `mean_${unit}`, `max_${unit}`]);
  expect(Number(first[1])).toBeCloseTo(1.1e-6 * factor, 12);
});

const history: History = {
  ...{ channel: 'c', simulated: false, from: 0, to: 10, step: 1, derived: 'samples' },
  ...{ t: [], min: [], mean: [], max: [] },
};

test('a figure read back is the figure to 1 part in 10¹¹, and a time to the microsecond', () => {
  const figures = fc.double({ noNaN: true, noDefaultInfinity: true, min: -1e-1, max: 1e-1 });
  const times = fc.integer({ min: 0, max: 4_000_000_000_000_000 });
  fc.assert(
    fc.property(figures, times, (value, micros) => {
      const t = micros / 1e6;
      const one = { ...history, t: [t], min: [value], mean: [value], max: [value] };
      const [, [time = '', min = ''] = []] = parseCsv(historyCsv(one, 'strain'));
      expect(Math.abs(Number(min) / 1e6 - value)).toBeLessThanOrEqual(Math.abs(value) * 1e-11);
      // Date reads three digits of the fraction; the other three stand behind them.
      const read = Date.parse(time) * 1e3 + Number(time.slice(23, 26));
      expect(Math.abs(read - t * 1e6)).toBeLessThanOrEqual(1);
    }),
  );
});

test('names with commas, quotes and line ends stay one field; a file name takes no such sign', () => {
  const awkward = { ...history, channel: 'a,"b"\r\nc', t: [0], min: [0], mean: [0], max: [0] };
  expect(parseCsv(historyCsv(awkward, 'force'))[1]?.[4]).toBe('a,"b"\r\nc');
  expect(historyFileName(awkward, 'ya/rd:1')).toMatch(/^[A-Za-z0-9._-]+\.csv$/);
  expect(historyFileName(history, 's')).not.toContain('SIMULATED');
});
