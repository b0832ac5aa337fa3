/** The core's port as a plain object over a small site that has one of every kind of channel. */
import type { CheckDesk, Core, SetUpDesk } from '../../server/ports.ts';
import type { CalibrationRecord, Leads, Signal } from '../../shared/model/calibration.ts';
import { accept } from '../../shared/model/frame.ts';
import type { AlarmEvent, Limit } from '../../shared/model/limit.ts';
import type { Measurand, MeasuredChannel, Site } from '../../shared/model/site.ts';
import {
  cubicMetre,
  epochSeconds,
  metre,
  newton,
  ohm,
  pascal,
  quarticMetre,
  ratio,
  seconds,
  share,
  squareMetre,
  volt,
} from '../../shared/model/units.ts';
import type { ChannelChecks, ZerosAnswer } from '../../shared/protocol/checks.ts';
import type { CurrentValue, Health, NodeTally } from '../../shared/protocol/http.ts';
import { PLAIN_GAUGE } from './plain-gauge.ts';

export const START = 1_800_000_000;

const record = (signal: Signal, response: CalibrationRecord['response']): CalibrationRecord => ({
  id: 'cal1',
  validFrom: epochSeconds(1_700_000_000),
  author: 'Simulated technician',
  reason: 'Gauge data off the packet',
  recordedAt: null,
  corrects: null,
  signal,
  response,
});

const bridge = (leads: Leads): CalibrationRecord['response'] => ({
  kind: 'bridge',
  circuit: 'quarter',
  gaugeFactor: 2.11,
  gaugeResistance: ohm(350),
  poisson: 0.3,
  leads,
  zero: ratio(1.2e-4),
  ...PLAIN_GAUGE,
});

const linear: CalibrationRecord['response'] = { kind: 'linear', perUnit: 0.02, zero: 0.1 };

const channel = (
  id: string,
  measurand: Measurand,
  signal: Signal,
  response: CalibrationRecord['response'],
  limits: readonly Limit[] = [],
): MeasuredChannel => ({
  kind: 'measured',
  ...{ id, name: `Channel ${id}`, measurand, node: 'n1', input: id },
  ...{ calibration: [record(signal, response)], zeros: [], limits },
});

export const CAUTION: Limit = {
  level: 'caution',
  basis: 'share',
  value: 0.6,
  deadband: 0.02,
  onDelay: seconds(0.2),
};

const leads = (kind: 'three-wire' | 'excitation'): Leads => ({ kind, resistance: ohm(0.9) });
const stated = { kind: 'stated', volts: volt(5) } as const;
const measured = { kind: 'measured', input: 'ex' } as const;

const CHANNELS: readonly MeasuredChannel[] = [
  channel('ratio', 'strain', { kind: 'ratio' }, bridge(leads('three-wire')), [CAUTION]),
  channel(
    'volts',
    'shear',
    { kind: 'volts', excitation: stated },
    bridge({ kind: 'two-wire', resistance: ohm(0.9), trimmed: true }),
  ),
  channel(
    'counts',
    'strain',
    { kind: 'counts', as: 'ratio', perCount: 1e-9, zeroCount: 12 },
    bridge({ kind: 'none' }),
  ),
  channel(
    'count-volts',
    'strain',
    { kind: 'counts', as: 'volts', perCount: 1e-9, zeroCount: 12, excitation: measured },
    bridge(leads('excitation')),
  ),
  channel('hook', 'force', { kind: 'direct' }, linear),
  channel('sag', 'displacement', { kind: 'direct' }, linear),
  channel('steel', 'temperature', { kind: 'direct' }, linear),
];

export const SITE: Site = {
  id: 'yard',
  name: 'Yard',
  simulated: true,
  highestLimit: share(0.8),
  structures: [
    {
      id: 'lift',
      name: 'Lift',
      members: [
        {
          id: 'B1',
          name: 'Beam 1',
          section: {
            designation: 'HE 300 B',
            source: 'EN 10365',
            height: metre(0.3),
            width: metre(0.3),
            area: squareMetre(0.01491),
            inertiaY: quarticMetre(251.7e-6),
            inertiaZ: quarticMetre(85.63e-6),
            modulusY: cubicMetre(1.678e-3),
            modulusZ: cubicMetre(570.9e-6),
            thickness: metre(0.019),
          },
          material: {
            designation: 'S275',
            source: 'EN 10025-2',
            youngsModulus: pascal(210e9),
            poisson: 0.3,
            expansion: 12e-6,
            yieldStrength: pascal(265e6),
          },
          from: [metre(0), metre(0), metre(4)],
          to: [metre(6), metre(0), metre(4)],
          stations: [{ id: 'mid', at: metre(3), channels: CHANNELS }],
        },
      ],
      elevations: [{ name: 'Along the slipway', right: '-x', members: ['B1'] }],
      loadChannel: 'hook',
      safeWorkingLoad: newton(100e3),
    },
  ],
  nodes: [
    {
      id: 'n1',
      name: 'Node 1',
      inputs: [
        { name: 'ratio', unit: '/', range: [-0.004, 0.004] },
        { name: 'steel', unit: 'Cel', range: null },
      ],
      staleAfter: seconds(3),
    },
  ],
};

export const RAISED: AlarmEvent = {
  ...{ id: 'ratio/caution/raised/1800000000500000', channel: 'ratio', level: 'caution' },
  ...{ kind: 'raised', at: epochSeconds(START + 0.5), value: 7.7e-4, threshold: 7.57e-4 },
  late: false,
};

const HEALTH: Health = {
  ok: true,
  simulated: true,
  version: '0.1.0',
  upSince: START,
  broker: { connected: true, description: 'embedded' },
  store: { ok: false, description: 'disk full' },
};

const TALLY: NodeTally = {
  node: 'n1',
  known: true,
  status: 'online',
  boot: 'b1',
  lastFrameAt: START,
  stale: false,
  received: 12,
  stored: 9,
  duplicate: 2,
  missing: 3,
  refused: 1,
  refusals: [
    { code: 'type', field: 't0', expected: 'a number', came: '"x"', count: 1, lastAt: START },
  ],
  unassigned: ['s9'],
};

const VALUES: readonly CurrentValue[] = CHANNELS.map(({ id }, i) =>
  i === 6
    ? { channel: id, value: null, at: null, quality: 'none' }
    : { channel: id, value: i * 1e-4, at: START, quality: i === 1 ? 'over-range' : 'good' },
);

/** `over`: what a test wants otherwise. */
export const plainCore = (over: Partial<Core> = {}): Core => {
  const alarms = {
    active: [{ channel: 'ratio', level: 'caution', raised: RAISED }],
    recent: [RAISED],
  } as const;
  const limits = { ratio: [CAUTION] };
  return {
    site: () => SITE,
    health: () => HEALTH,
    values: () => VALUES,
    alarms: () => alarms,
    tally: () => [TALLY, { ...TALLY, node: 'stranger "x"\\', known: false, boot: null }],
    limits: () => limits,
    setLimits: async () => [],
    snapshot: () => ({
      revision: 1,
      now: START,
      health: HEALTH,
      values: VALUES,
      alarms,
      nodes: [TALLY],
      limits,
    }),
    history: async (channel, from, to) =>
      accept({
        ...{ channel, simulated: true, from, to, step: 0.5, derived: 'samples' },
        t: [from, from + 0.5, from + 1.0005],
        min: [1.1e-6, null, -3e-4],
        mean: [1.2e-6, null, 0],
        max: [1.3e-6, null, 0.1 + 0.2],
      }),
    ...over,
  };
};

/** A desk that takes every change; `over`: what a test wants otherwise. */
export const plainDesk = (over: Partial<SetUpDesk> = {}): SetUpDesk => {
  const head = { revision: 1, at: START, author: 'A', reason: 'R', origin: 'file' } as const;
  return {
    answer: () => ({ simulated: true, ...head, document: { format: 1 } }),
    revisions: async () => ({ simulated: true, revisions: [head] }),
    preview: () => ({
      ok: true,
      lines: (async function* () {
        yield { kind: 'progress', done: 1, of: 1 } as const;
        yield { kind: 'result', channels: [] } as const;
      })(),
    }),
    change: async () => ({ kind: 'changed', revision: 2 }),
    ...over,
  };
};

const CHECKED: ChannelChecks = {
  channel: 'ratio',
  verdict: 'pass',
  checks: [
    {
      check: {
        ...{ kind: 'noise', verdict: 'pass', figure: 8e-7, unit: 'm/m', why: 'Quiet.' },
        ...{ limits: { good: 2e-6, bad: 1e-5 }, also: [] },
      },
      record: {
        ...{ at: START, author: 'A', revision: 1, note: '' },
        given: { kind: 'samples', from: START - 20, to: START },
      },
    },
  ],
};

const ZEROS: ZerosAnswer = {
  ...{
    simulated: true,
    at: START,
    author: 'A',
    revision: 2,
    zeroed: [],
    cautions: ['No load cell.'],
  },
  refused: [
    {
      channel: 'ratio',
      refusal: { code: 'noisy', field: 'noise', expected: '10 µε', came: '40 µε' },
    },
  ],
};

const checkedLines = () => ({
  ok: true as const,
  lines: (async function* () {
    yield { kind: 'phase', phase: 'rest', seconds: 2 } as const;
    yield { kind: 'progress', done: 1, of: 1, channel: CHECKED } as const;
    yield { kind: 'result', channels: [CHECKED] } as const;
  })(),
});

/** A desk by which every check passes; `over`: what a test wants otherwise. */
export const plainChecks = (over: Partial<CheckDesk> = {}): CheckDesk => ({
  answer: async () => ({ simulated: true, revision: 1, channels: [CHECKED], zeros: ZEROS }),
  run: checkedLines,
  push: checkedLines,
  shunt: checkedLines,
  enter: async () => ({ ok: true, value: CHECKED }),
  zero: async () => ({
    kind: 'answered',
    answer: ZEROS,
  }),
  ...over,
});
