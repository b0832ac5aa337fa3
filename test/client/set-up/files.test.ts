import { readFileSync } from 'node:fs';
import * as fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  channelListCsv,
  COLUMNS,
  withChannelList,
} from '../../../client/state/set-up/channel-list.ts';
import { csvText, parseCsv } from '../../../client/state/set-up/csv.ts';
import { siteFromText, siteText } from '../../../client/state/set-up/site-text.ts';
import { valueAt, type Json } from '../../../client/state/set-up/tree.ts';

const DEMO = JSON.parse(
  readFileSync(new URL('../../../server/demo/site.json', import.meta.url), 'utf8'),
) as Json;

const fieldsOf = (text: string) => {
  const parsed = parseCsv(text);
  return parsed.ok ? parsed.rows.map(({ fields }) => fields) : parsed;
};

describe('RFC 4180 §2', () => {
  test.each([
    [
      '1: lines end in CRLF',
      'aaa,bbb,ccc\r\nzzz,yyy,xxx\r\n',
      [
        ['aaa', 'bbb', 'ccc'],
        ['zzz', 'yyy', 'xxx'],
      ],
    ],
    [
      '2: the last may have no end',
      'aaa,bbb,ccc\r\nzzz,yyy,xxx',
      [
        ['aaa', 'bbb', 'ccc'],
        ['zzz', 'yyy', 'xxx'],
      ],
    ],
    ['4: blanks are part of a field', 'a , b', [['a ', ' b']]],
    [
      '5: fields may be in quotes',
      '"aaa","bbb","ccc"\r\nzzz,yyy,xxx',
      [
        ['aaa', 'bbb', 'ccc'],
        ['zzz', 'yyy', 'xxx'],
      ],
    ],
    ['6: line ends and commas in quotes', '"aaa","b\r\nb,b","ccc"', [['aaa', 'b\r\nb,b', 'ccc']]],
    ['7: quotes in quotes are doubled', '"aaa","b""bb","ccc"', [['aaa', 'b"bb', 'ccc']]],
    ['an empty field', 'a,,\r\n', [['a', '', '']]],
  ])('%s', (_, text, rows) => {
    expect(fieldsOf(text)).toEqual(rows);
  });

  test('quotes that are not closed are told by their line', () => {
    expect(parseCsv('a,b\r\n"c\r\nd,e')).toMatchObject({ ok: false, line: 2 });
    expect(parseCsv('a,b"c')).toMatchObject({ ok: false, line: 1 });
  });

  test('what is written is read as it was', () => {
    const rows = fc.array(fc.array(fc.string(), { minLength: 2, maxLength: 5 }), { maxLength: 5 });
    fc.assert(
      fc.property(rows, (table) => {
        expect(fieldsOf(csvText(table))).toEqual(table);
      }),
    );
  });
});

describe('the site file', () => {
  test('exported and imported is the same, key by key', () => {
    const read = siteFromText(siteText(DEMO));
    expect(read.ok && JSON.stringify(read.document)).toBe(JSON.stringify(DEMO));
  });
  test('what is no JSON is told', () => {
    expect(siteFromText('{ "a": 1,\n  b: 2 }')).toMatchObject({
      ok: false,
      fault: { path: 'line 2, column 3', expected: 'JSON (RFC 8259)' },
    });
    expect(siteFromText('[1]')).toMatchObject({ ok: false, fault: { came: '[1]' } });
  });
});

describe('the channel list', () => {
  test('has a line a channel, units in its heading, and changes nothing when it comes back', () => {
    const text = channelListCsv(DEMO);
    const rows = fieldsOf(text) as string[][];
    expect(rows[0]).toEqual([...COLUMNS]);
    const at = (column: (typeof COLUMNS)[number]) => COLUMNS.indexOf(column);
    const first = rows.find((row) => row[at('channel')] === 'B1-third1-bending');
    expect(first?.[at('gauge resistance [Ohm]')]).toBe('350');
    expect(first?.[at('zero [mV/V]')]).toBe('0.31');
    expect(withChannelList(DEMO, text)).toEqual({ ok: true, document: DEMO, changed: 0 });
  });

  test('brings names and inputs in', () => {
    const text = 'input,channel,node,name\r\nex,B1-end-web-0,n1,"Web, ""0°"""\r\n';
    const read = withChannelList(DEMO, text);
    expect(read).toMatchObject({ ok: true, changed: 1 });
    const path = '/structures/0/members/0/stations/0/channels/0'.split('/').slice(1);
    expect(read.ok && valueAt(read.document, path)).toMatchObject({
      ...{ name: 'Web, "0°"', node: 'n1', input: 'ex', measurand: 'strain' },
    });
  });

  test('tells every fault by its line', () => {
    const text = [
      'channel,name,node,input',
      'no-such,x,n1,s1',
      'B1-end-web-0,"two',
      'lines",n1,s99',
      'B1-end-web-45,,n9,s2',
      'B1-end-web-45,x,n1,s2',
      'B1-end-web-90,x,n1',
    ].join('\r\n');
    const read = withChannelList(DEMO, text);
    expect(read.ok ? [] : read.faults.map(({ path, came }) => [path, came])).toEqual([
      ['line 2', 'no-such'],
      ['line 3', 's99'],
      ['line 5', 'nothing'],
      ['line 5', 'n9'],
      ['line 6', 'B1-end-web-45'],
      ['line 7', '3'],
    ]);
    expect(withChannelList(DEMO, 'channel,name\r\n')).toMatchObject({
      ok: false,
      faults: [{ path: 'line 1', came: 'none named node, input' }],
    });
  });
});
