import { MEASURAND_UNITS, MEASURANDS } from '../../../shared/model/site.ts';
import { QUALITIES } from '../../../shared/model/block.ts';
import { LIMIT_BASES, LIMIT_LEVELS } from '../../../shared/protocol/parse.ts';
import {
  count,
  figure,
  flag,
  list,
  map,
  orNull,
  ref,
  text,
  time,
  word,
  type Schema,
} from './schema.ts';

const SIMULATED = flag('true: the nodes are simulated, and so is every figure');
const SI = "in the channel's SI unit";
const column = (description: string): Schema =>
  list(orNull(figure(description), `${description}; null where samples are not to be believed`));

/** What answers are made of while the server runs; shared/protocol/http.ts in JSON Schema. */
export const LIVE_SCHEMAS: Readonly<Record<string, Schema>> = {
  Fault: map('One thing wrong with a request', {
    path: text('Where: a parameter, a header or a JSON pointer into the body'),
    expected: text('What would have been right'),
    came: text('What came'),
  }),
  Problem: map('Body of every answer that is not 2xx', {
    error: text('What is wrong, in a sentence'),
    faults: list(ref('Fault'), 'Every fault at once'),
  }),
  Health: map('Is everything in order?', {
    ok: flag('Broker in reach and store writing'),
    simulated: SIMULATED,
    version: text('Version of Yieldward'),
    upSince: time('Start of the server'),
    broker: map('The MQTT broker', {
      connected: flag('In reach now'),
      description: text('Which one'),
    }),
    store: map('The store of samples', {
      ok: flag('The last write went well'),
      description: text('Which one, or why it does not write'),
    }),
  }),
  CurrentValue: map('The last word of a channel', {
    channel: text('Id of the channel'),
    value: orNull(figure(SI), `Last believed sample, ${SI}; null if there has been none`),
    at: orNull(time('Its time'), 'Time of that sample, UTC seconds; null if there has been none'),
    quality: word('Of what came last; none: nothing ever', ...QUALITIES, 'stale', 'none'),
  }),
  Limit: map('A limit as it was stated', {
    level: word('Caution or stop', ...LIMIT_LEVELS),
    basis: word(
      'strain: m/m; stress: Pa; share: of yield; value: N, m or °C of a transducer',
      ...LIMIT_BASES,
    ),
    value: { ...figure('Magnitude, on both sides of zero'), exclusiveMinimum: 0 },
    deadband: { ...figure('Returns to normal below value − deadband'), minimum: 0 },
    onDelay: {
      ...figure('s that the value has to stay beyond the limit'),
      minimum: 0,
      maximum: 3600,
    },
  }),
  LimitsRequest: map('The limits of a channel from now on, in place of those in force', {
    limits: {
      type: 'array',
      items: ref('Limit'),
      maxItems: 2,
      description: 'Each level at most once',
    },
    author: { ...text('Who changes them'), minLength: 1, maxLength: 500 },
    reason: { ...text('Why'), minLength: 1, maxLength: 500 },
  }),
  ChannelReport: map('A channel, where it sits and what it reads', {
    id: text('Unique in the site'),
    name: text('As people say it'),
    structure: text('Id of its structure'),
    member: text('Id of its member'),
    station: text('Id of its station'),
    measurand: ref('Measurand'),
    unit: word('SI unit of its figures', ...new Set(Object.values(MEASURAND_UNITS))),
    node: orNull(text('Id of the node that measures it'), 'null: virtual'),
    input: orNull(text('Name of the input on that node'), 'null: virtual'),
    limits: list(ref('Limit'), 'In force now'),
    current: ref('CurrentValue'),
  }),
  ChannelAnswer: map('One channel', { simulated: SIMULATED, channel: ref('ChannelReport') }),
  ChannelsAnswer: map('All channels in site order', {
    simulated: SIMULATED,
    channels: list(ref('ChannelReport')),
  }),
  History: map('Columns of equal length, ascending in time; min ≤ mean ≤ max', {
    channel: text('Id of the channel'),
    simulated: SIMULATED,
    from: time('Begin of the window'),
    to: time('End of the window, not included'),
    step: { ...figure('Width of a point, s'), exclusiveMinimum: 0 },
    derived: word(
      'means: of a virtual channel over a long window, worked out of the means of its sources',
      'samples',
      'means',
    ),
    t: list(time('Begin of a point')),
    min: column(`Lowest sample, ${SI}`),
    mean: column(`Mean of the samples, ${SI}`),
    max: column(`Highest sample, ${SI}`),
  }),
  AlarmEvent: map('A limit was passed, or the value returned', {
    id: text('channel/level/kind/time in µs'),
    channel: text('Id of the channel'),
    level: word('Caution or stop', ...LIMIT_LEVELS),
    kind: word('What happened', 'raised', 'returned'),
    at: time('Of the sample that brought it about'),
    value: figure(`The sample, ${SI}`),
    threshold: figure(`What it was compared with, ${SI}, signed to the side crossed`),
    late: flag('Of a frame that came late: nothing stands or ends by it now'),
  }),
  ActiveAlarm: map('An alarm that has not returned', {
    channel: text('Id of the channel'),
    level: word('Caution or stop', ...LIMIT_LEVELS),
    raised: ref('AlarmEvent'),
  }),
  AlarmsAnswer: map('Alarms now and before', {
    simulated: SIMULATED,
    active: list(ref('ActiveAlarm'), 'Stop first, then newest first'),
    recent: list(ref('AlarmEvent'), 'Newest first'),
  }),
  RefusalCount: map('A reason for which messages were refused', {
    code: text('The reason, in a word'),
    field: text('Where in the message'),
    expected: text('What would have been right'),
    came: text('What came the last time'),
    count: count('How often, since start'),
    lastAt: time('The last time'),
  }),
  NodeTally: map('Frames of one node', {
    node: text('Id of the node'),
    known: flag('false: the site file does not have it'),
    status: word('As the node says', 'online', 'offline', 'unknown'),
    boot: orNull(text('Boot id'), 'The boot whose frames are newest; null before the first'),
    lastFrameAt: orNull(time('Arrival'), 'Arrival of the last frame, UTC seconds; null: none'),
    stale: flag('No frame within the time that the site file allows'),
    received: count('Frames that came, since start'),
    stored: count('Frames in store, since the store began'),
    duplicate: count('Frames that came again, since start'),
    missing: count('Gaps in the sequence numbers, since the store began'),
    refused: count('Frames and readings refused, since start'),
    refusals: list(ref('RefusalCount'), 'By reason'),
    unassigned: list(text('An input'), 'Inputs that came but belong to no channel'),
  }),
  TallyAnswer: map('Frames of every node', { simulated: SIMULATED, nodes: list(ref('NodeTally')) }),
  Measurand: word('What is measured', ...MEASURANDS),
  OpenApi: { type: 'object', required: ['openapi', 'info', 'paths'] },
};
