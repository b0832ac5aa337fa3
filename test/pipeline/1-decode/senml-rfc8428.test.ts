/** RFC 8428 §5.1 and §6: the examples as public copies of the RFC and its source have them. */
import { describe, expect, test } from 'vitest';
import { readCbor } from '../../../server/ingest/cbor.ts';
import { SENML_TAGS } from '../../../shared/pipeline/1-decode/tags.ts';
import { ARRIVED, readings } from './readings.ts';

describe('RFC 8428, its own examples', () => {
  const DEVICE = 'urn:dev:ow:10e2073a01080063';

  test('§5.1.1: one reading of now', () => {
    expect(readings([{ n: DEVICE, u: 'Cel', v: 23.1 }])).toEqual({
      values: [[DEVICE, ARRIVED, 23.1]],
      refusals: [],
    });
  });

  const CURRENTS = {
    values: [1.2, 1.3, 1.4, 1.5, 1.6]
      .map((v, i): [string, number, number] => ['current', 1276020076.001 - 5 + i, v])
      .concat([
        ['voltage', 1276020076.001, 120.1],
        ['current', 1276020076.001, 1.7],
      ]),
    refusals: [],
  };
  const named = (device: string) => ({
    ...CURRENTS,
    values: CURRENTS.values.map(([input, ...rest]) => [`${device}:${input}`, ...rest]),
  });

  test('§5.1.2: base name, time, unit and version; times before the base time', () => {
    const pack = [
      ...[
        {
          bn: `${DEVICE}:`,
          bt: 1.276020076001e9,
          bu: 'A',
          bver: 5,
          n: 'voltage',
          u: 'V',
          v: 120.1,
        },
      ],
      ...[1.2, 1.3, 1.4, 1.5, 1.6].map((v, i) => ({ n: 'current', t: i - 5, v })),
      { n: 'current', v: 1.7 },
    ];
    expect(readings(pack)).toEqual(named(DEVICE));
  });

  test('§6: the same in CBOR, byte for byte', () => {
    const bytes = Buffer.from(
      [
        '87a721781b75726e3a6465763a6f773a',
        '3130653230373361303130383030363a',
        '22fb41d303a15b001062236141200500',
        '67766f6c7461676501615602fb405e06',
        '6666666666a3006763757272656e7406',
        '2402fb3ff3333333333333a300676375',
        '7272656e74062302fb3ff4cccccccccc',
        'cda3006763757272656e74062202fb3f',
        'f6666666666666a3006763757272656e',
        '74062102f93e00a3006763757272656e',
        '74062002fb3ff999999999999aa30067',
        '63757272656e74060002fb3ffb333333',
        '333333',
      ].join(''),
      'hex',
    );
    const read = readCbor(bytes, SENML_TAGS);
    expect(readings(read.ok ? read.value : null, { form: 'cbor' })).toEqual(
      named('urn:dev:ow:10e2073a0108006'),
    );
  });

  test('§5.1.3 and §5.1.4: several measurements of one name are told apart by their units', () => {
    const pack = [
      { bn: DEVICE, bt: 1.320067464e9, bu: '%RH', v: 20 },
      { u: 'lon', v: 24.30621 },
      { u: '%EL', t: 150, v: 98 },
      { t: 60, v: 20.3 },
    ];
    expect(readings(pack)).toMatchObject({
      values: [
        [DEVICE, 1320067464, 20],
        [DEVICE, 1320067464, 24.30621],
        [DEVICE, 1320067524, 20.3],
        [DEVICE, 1320067614, 98],
      ],
    });
  });

  test('§5.1.5: of several data types the number is the measurement', () => {
    const pack = [
      { bn: `${DEVICE}:`, n: 'temp', u: 'Cel', v: 23.1 },
      { n: 'label', vs: 'Machine Room' },
      { n: 'open', vb: false },
      { n: 'nfc-reader', vd: 'aGkgCg' },
    ];
    expect(readings(pack)).toMatchObject({
      values: [[`${DEVICE}:temp`, ARRIVED, 23.1]],
      refusals: [{ came: 'vs' }, { came: 'vb' }, { came: 'vd' }],
    });
  });
});
