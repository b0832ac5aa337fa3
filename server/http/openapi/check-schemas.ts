import { SHUNT_PLACES } from '../../../shared/channel-check/shunt.ts';
import { CHECK_KINDS } from '../../../shared/channel-check/verdict.ts';
import { HEAT_SINKS } from '../../../shared/model/calibration.ts';
import { PHASES } from '../../../shared/protocol/checks.ts';
import {
  count,
  exactly,
  figure,
  flag,
  list,
  map,
  oneOf,
  orNull,
  ref,
  text,
  time,
  word,
  type Schema,
} from './schema.ts';

/** As `map`, of fields that may be left out. */
const some = (description: string, properties: Readonly<Record<string, Schema>>): Schema => ({
  ...{ type: 'object', description, additionalProperties: false, properties },
});

const VERDICT = word('not-judged: something is missing', 'pass', 'doubtful', 'fail', 'not-judged');
const BAND = map('Up to good it passes, beyond bad it fails; good above bad: more is better', {
  good: figure("In the figure's unit"),
  bad: figure("In the figure's unit"),
});
const WINDOW = map('A stretch of time', { from: time('Begin'), to: time('End, not included') });
const PLACE = word('Where the shunt lies', ...SHUNT_PLACES);
const ARM: Schema = { type: 'integer', enum: [1, 2, 3, 4], description: 'Arm, round the ring' };
const HOW = word('By the node on command, or by hand', 'commanded', 'manual');
const EXPECTED = word('Where the value should go; up is tension', 'up', 'down');
const SINK = word('What the gauge sits on', ...HEAT_SINKS);
const SIGNED = { author: text('Who'), note: text('May be left out') };
const SECONDS = (range: string) => figure(`s, ${range}`);

const request = (
  description: string,
  properties: Readonly<Record<string, Schema>>,
  ...optional: readonly string[]
): Schema => {
  const whole = map(description, properties);
  const required = Object.keys(properties).filter((name) => !optional.includes(name));
  return { ...whole, required };
};

export const CHECK_SCHEMAS: Readonly<Record<string, Schema>> = {
  Check: map('What was judged, and how', {
    kind: word('Which check', ...CHECK_KINDS),
    verdict: VERDICT,
    figure: orNull(figure('What was judged'), 'null: not found'),
    unit: text('SI unit of the figure'),
    why: text('In words'),
    limits: orNull(BAND, 'null: judged by none'),
    also: list(
      map('Another figure', { name: text('Which'), value: figure('SI'), unit: text('SI unit') }),
    ),
  }),
  CheckGiven: oneOf(
    'What a check was judged from',
    map('Samples', { kind: exactly('samples'), from: time('Begin'), to: time('End') }),
    map('A push by hand', {
      kind: exactly('push'),
      expected: EXPECTED,
      from: time('Begin'),
      to: time('End'),
    }),
    map('A shunt', {
      kind: exactly('shunt'),
      how: HOW,
      place: PLACE,
      arm: ARM,
      resistance: figure('Ohm'),
      before: WINDOW,
      during: WINDOW,
      after: orNull(WINDOW, 'null: not read again'),
    }),
    map('Insulation', { kind: exactly('insulation'), resistance: figure('Ohm') }),
    map('Self-heating', {
      kind: exactly('self-heating'),
      excitation: figure('V'),
      gridArea: figure('m²'),
      on: SINK,
    }),
  ),
  ChannelChecks: map('The latest of each check of a channel', {
    channel: text('Id'),
    verdict: VERDICT,
    checks: list(
      map('A check and its record', {
        check: ref('Check'),
        record: orNull(
          map('When, who, by which set-up', {
            at: time('When'),
            author: text('Who'),
            revision: count('Of the set-up that it was judged by'),
            given: ref('CheckGiven'),
            note: text('May be empty'),
          }),
          'null: never made',
        ),
      }),
    ),
  }),
  ChecksAnswer: map('Where the checks stand', {
    simulated: flag('true: the site is simulated'),
    revision: count('Of the set-up that stands'),
    channels: list(ref('ChannelChecks'), 'Measured channels in site order'),
    zeros: orNull(ref('ZerosAnswer'), 'null: none taken since the server started'),
  }),
  CheckLine: oneOf(
    'A line of a check',
    map('A channel is done', {
      kind: exactly('progress'),
      done: count('Channels done'),
      of: count('Channels in all'),
      channel: ref('ChannelChecks'),
    }),
    map('What goes on', {
      kind: exactly('phase'),
      phase: word('What', ...PHASES),
      seconds: figure('For how long, s'),
    }),
    map('The end of it', { kind: exactly('result'), channels: list(ref('ChannelChecks')) }),
    map('There is no result', {
      kind: exactly('stopped'),
      why: text('In words'),
      byHand: flag('true: a person can do the same'),
    }),
  ),
  CheckRequest: request(
    'Checks of the samples that have come',
    {
      channels: orNull(list(text('Id')), 'null or left out: all measured ones'),
      seconds: SECONDS('2 to 600; usually 20'),
      limits: some('In place of the usual ones, SI', { offset: BAND, noise: BAND, drift: BAND }),
      ...SIGNED,
    },
    ...['channels', 'seconds', 'limits', 'note'],
  ),
  PushRequest: request(
    'A push by hand',
    { channel: text('Id'), seconds: SECONDS('5 to 60'), expected: EXPECTED, ...SIGNED },
    'note',
  ),
  ShuntRequest: request(
    'A shunt check',
    {
      channel: text('Id'),
      how: HOW,
      place: PLACE,
      arm: ARM,
      resistance: figure('Ohm'),
      seconds: SECONDS('2 to 60: how long each level is read'),
      read: map('When the levels were read; only of a shunt laid by hand', {
        before: WINDOW,
        during: WINDOW,
      }),
      ...SIGNED,
    },
    ...['arm', 'seconds', 'read', 'note'],
  ),
  EnteredRequest: request(
    'What a person found out',
    {
      channel: text('Id'),
      entered: oneOf(
        'A measured figure',
        map('To ground', { kind: exactly('insulation'), resistance: figure('Ohm') }),
        request(
          'Self-heating; what is left out is taken from the calibration record',
          {
            kind: exactly('self-heating'),
            excitation: orNull(figure('V'), 'null: as recorded'),
            grid: orNull(map('Grid', { area: figure('m²'), on: SINK }), 'null: as recorded'),
          },
          ...['excitation', 'grid'],
        ),
      ),
      ...SIGNED,
    },
    'note',
  ),
  ZerosRequest: request(
    'Zeros to be read now',
    {
      channels: list(text('Id')),
      seconds: SECONDS('2 to 600; usually 20'),
      state: oneOf(
        'What is on the structure',
        map('Nothing', { kind: exactly('unloaded') }),
        map('A load', { kind: exactly('loaded'), load: figure('N') }),
      ),
      author: text('Who'),
      reason: text('Why'),
      basedOn: count('The revision that was looked at'),
    },
    'seconds',
  ),
  ZerosAnswer: map('What was zeroed and what not', {
    simulated: flag('true: the site is simulated'),
    at: time('When'),
    author: text('Who'),
    revision: count('The set-up that stands now'),
    zeroed: list(
      map('A zero', {
        channel: text('Id'),
        zero: text('Id of its record'),
        change: figure("Of the channel's value, its SI unit"),
        samples: count('Read'),
        temperature: orNull(figure('°C'), 'null: not known'),
      }),
    ),
    refused: list(
      map('A channel that was not zeroed', {
        channel: text('Id'),
        refusal: map('Why', {
          code: text('In a word'),
          field: text('Of what'),
          expected: text('In words'),
          came: text('In words'),
        }),
      }),
    ),
    cautions: list(text('What could not be made sure of')),
  }),
};
