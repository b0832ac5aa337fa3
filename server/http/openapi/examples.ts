/** Figures of the demo, Saltmarsh Boatyard's travelling lift under its proof load. Simulated. */
import type {
  AlarmsAnswer,
  ChannelAnswer,
  Health,
  History,
  LimitsRequest,
  Problem,
  TallyAnswer,
} from '../../../shared/protocol/http.ts';
import type { AlarmEvent, Limit } from '../../../shared/model/limit.ts';
import { epochSeconds, seconds } from '../../../shared/model/units.ts';

const NOON = Date.UTC(2026, 4, 12, 12) / 1e3;
const CHANNEL = 'B1-mid-bottom-left';

const CAUTION: Limit = {
  level: 'caution',
  basis: 'share',
  value: 0.6,
  deadband: 0.02,
  onDelay: seconds(0.2),
};
const STOP: Limit = { ...CAUTION, level: 'stop', value: 0.75 };

const RAISED: AlarmEvent = {
  id: `${CHANNEL}/caution/raised/${(NOON + 2.4) * 1e6}`,
  channel: CHANNEL,
  level: 'caution',
  kind: 'raised',
  at: epochSeconds(NOON + 2.4),
  value: 771.2e-6,
  threshold: 757.1e-6,
  late: false,
};

const health: Health = {
  ok: true,
  simulated: true,
  version: '0.1.0',
  upSince: NOON - 3600,
  broker: { connected: true, description: 'embedded broker, port 1883' },
  store: { ok: true, description: 'SQLite in data/demo' },
};

const channel: ChannelAnswer = {
  simulated: true,
  channel: {
    id: CHANNEL,
    name: 'B1 midspan, bottom flange, left tip',
    structure: 'lift',
    member: 'B1',
    station: 'B1-mid',
    measurand: 'strain',
    unit: 'm/m',
    node: 'n1',
    input: 's7',
    limits: [CAUTION, STOP],
    current: { channel: CHANNEL, value: 771.2e-6, at: NOON + 2.4, quality: 'good' },
  },
};

const history: History = {
  channel: CHANNEL,
  simulated: true,
  from: NOON,
  to: NOON + 3,
  derived: 'samples',
  step: 1,
  t: [NOON, NOON + 1, NOON + 2],
  min: [512.4e-6, null, 748.8e-6],
  mean: [530.9e-6, null, 760.3e-6],
  max: [551.7e-6, null, 771.2e-6],
};

const alarms: AlarmsAnswer = {
  simulated: true,
  active: [{ channel: CHANNEL, level: 'caution', raised: RAISED }],
  recent: [RAISED],
};

const tally: TallyAnswer = {
  simulated: true,
  nodes: [
    {
      node: 'n1',
      known: true,
      status: 'online',
      boot: '5f0c2ab1',
      lastFrameAt: NOON + 2.5,
      stale: false,
      received: 36_025,
      stored: 36_024,
      duplicate: 1,
      missing: 0,
      refused: 1,
      refusals: [
        {
          code: 'type',
          field: 't0',
          expected: 'UTC seconds',
          came: '"noon"',
          count: 1,
          lastAt: NOON - 60,
        },
      ],
      unassigned: [],
    },
  ],
};

const limitsRequest: LimitsRequest = {
  limits: [{ ...CAUTION, value: 0.5 }, STOP],
  author: 'A. Marsh, test engineer',
  reason: 'Caution brought down for the second run',
};

const refusedLimits: Problem = {
  error: 'These limits are refused.',
  faults: [{ path: '/limits/1/value', expected: 'below yield', came: '105 % of yield' }],
};

const refusedQuery: Problem = {
  error: 'The query cannot be answered.',
  faults: [
    { path: 'from', expected: 'UTC seconds since 1970, or ISO 8601', came: '"yesterday"' },
    { path: 'points', expected: 'a whole number, 1 to 20000', came: '"0"' },
  ],
};

const CSV = [
  'time_utc,min_microstrain,mean_microstrain,max_microstrain,channel,simulated',
  `2026-05-12T12:00:00.000000Z,512.4,530.9,551.7,${CHANNEL},yes`,
  `2026-05-12T12:00:01.000000Z,,,,${CHANNEL},yes`,
  '',
].join('\r\n');

const setUpRequest = {
  document: { format: 1, id: 'saltmarsh-boatyard', simulated: true },
  basedOn: 3,
  author: 'Test engineer',
  reason: 'Gauge factor off the packet was typed wrongly',
};

const setUpPreview = { document: setUpRequest.document };

export const EXAMPLES = {
  setUpRequest,
  setUpPreview,
  health,
  channel,
  channels: { simulated: true, channels: [channel.channel] },
  history,
  csv: CSV,
  alarms,
  tally,
  limitsRequest,
  refusedLimits,
  refusedQuery,
} as const;
