/** Bodies of the channel checks and zeros: a value, or every fault at once. */
import { SHUNT_PLACES } from '../channel-check/shunt.ts';
import type { Band } from '../channel-check/verdict.ts';
import { HEAT_SINKS, type StructureState } from '../model/calibration.ts';
import { newton } from '../model/units.ts';
import type { Arm } from '../pipeline/2-ratio/shunt.ts';
import { Body, parsed } from './body.ts';
import type {
  CheckRequest,
  EnteredRequest,
  PushRequest,
  ShuntRequest,
  StatedLimits,
  TimeWindow,
  ZerosRequest,
} from './checks.ts';
import type { Parsed } from './parse.ts';

export const SAMPLE_SECONDS = [2, 600] as const;
export const USUAL_SECONDS = 20;
export const PUSH_SECONDS = [5, 60] as const;
export const LEVEL_SECONDS = [2, 60] as const;
export const SHUNT_OHM = [100, 1e8] as const;
const GREATEST_TIME = 253_402_300_799;
/** Up to what any insulation tester shows. */
const GREATEST_OHM = 1e15;
const ARMS: readonly Arm[] = [1, 2, 3, 4];
const STATED = ['offset', 'noise', 'drift'] as const;

const CHANNEL = 'the id of a channel';
const CHANNELS = 'an array of ids of channels, each once, at least one';
const AUTHOR = 'text: who checks';

const bandOf = (body: Body): Band | null => {
  const [good, bad] = [body.number('good', 0, 1e12), body.number('bad', 0, 1e12)];
  if (good === null || bad === null) return null;
  return good <= bad ? { good, bad } : body.fault('bad', `not below good (${good})`);
};

const limitsOf = (body: Body): StatedLimits => {
  if (!body.has('limits')) return {};
  const limits = body.inner('limits', STATED);
  return Object.fromEntries(
    STATED.flatMap((name) => {
      const band = limits.has(name) ? bandOf(limits.inner(name, ['good', 'bad'])) : null;
      return band ? [[name, band]] : [];
    }),
  );
};

const signed = (body: Body) => {
  const [author, note] = [body.text('author', AUTHOR), body.note('note')];
  return author === null || note === null ? null : { author, note };
};

export const parseCheckRequest = (value: unknown): Parsed<CheckRequest> => {
  const body = Body.of(value, ['channels', 'seconds', 'limits', 'author', 'note']);
  const channels = body.has('channels') ? body.words('channels', CHANNELS) : null;
  const seconds = body.has('seconds')
    ? body.number('seconds', ...SAMPLE_SECONDS, ' s')
    : USUAL_SECONDS;
  const limits = limitsOf(body);
  const who = signed(body);
  return parsed(body, who && seconds !== null ? { channels, seconds, limits, ...who } : null);
};

export const parsePushRequest = (value: unknown): Parsed<PushRequest> => {
  const body = Body.of(value, ['channel', 'seconds', 'expected', 'author', 'note']);
  const channel = body.text('channel', CHANNEL);
  const seconds = body.number('seconds', ...PUSH_SECONDS, ' s');
  const expected = body.word('expected', ['up', 'down'] as const);
  const who = signed(body);
  const whole = channel !== null && seconds !== null && expected !== null && who;
  return parsed(body, whole ? { channel, seconds, expected, ...who } : null);
};

const windowOf = (body: Body): TimeWindow | null => {
  const [from, to] = [body.number('from', 0, GREATEST_TIME), body.number('to', 0, GREATEST_TIME)];
  if (from === null || to === null) return null;
  const [, longest] = LEVEL_SECONDS;
  return to > from && to - from <= longest
    ? { from, to }
    : body.fault('to', `after from (${from}), by at most ${longest} s`);
};

const handReadings = (body: Body): ShuntRequest['read'] => {
  const read = body.inner('read', ['before', 'during']);
  const before = windowOf(read.inner('before', ['from', 'to']));
  const during = windowOf(read.inner('during', ['from', 'to']));
  if (!before || !during) return null;
  return during.from >= before.to
    ? { before, during }
    : read.fault('during', `after the level without the shunt (${before.to})`);
};

const SHUNT_FIELDS = ['channel', 'how', 'place', 'arm', 'resistance', 'seconds', 'read'];

export const parseShuntRequest = (value: unknown): Parsed<ShuntRequest> => {
  const body = Body.of(value, [...SHUNT_FIELDS, 'author', 'note']);
  const channel = body.text('channel', CHANNEL);
  const how = body.word('how', ['commanded', 'manual'] as const);
  const place = body.word('place', SHUNT_PLACES);
  const arm = body.has('arm') ? body.word('arm', ARMS) : 1;
  const resistance = body.number('resistance', ...SHUNT_OHM, ' Ω');
  const seconds = body.has('seconds') ? body.number('seconds', ...LEVEL_SECONDS, ' s') : 5;
  const read = how === 'manual' ? handReadings(body) : null;
  if (how === 'commanded' && body.has('read')) body.fault('read', 'nothing: the server reads');
  const who = signed(body);
  if (channel === null || how === null || place === null || !who)
    return parsed<ShuntRequest>(body, null);
  if (arm === null || resistance === null || seconds === null)
    return parsed<ShuntRequest>(body, null);
  return parsed(body, { channel, how, place, arm, resistance, seconds, read, ...who });
};

const heatingOf = (body: Body): EnteredRequest['entered'] | null => {
  const excitation = body.has('excitation') ? body.number('excitation', 0.01, 100, ' V') : null;
  if (!body.has('grid')) return { kind: 'self-heating', excitation, grid: null };
  const grid = body.inner('grid', ['area', 'on']);
  const [area, on] = [grid.number('area', 1e-9, 1e-2, ' m²'), grid.word('on', HEAT_SINKS)];
  return area === null || on === null
    ? null
    : { kind: 'self-heating', excitation, grid: { area, on } };
};

const enteredOf = (body: Body): EnteredRequest['entered'] | null => {
  const entered = body.inner('entered', ['kind', 'resistance', 'excitation', 'grid']);
  const kind = entered.word('kind', ['insulation', 'self-heating'] as const);
  if (kind === null) return null;
  if (kind === 'self-heating') return heatingOf(entered);
  const resistance = entered.number('resistance', 1, GREATEST_OHM, ' Ω');
  return resistance === null ? null : { kind, resistance };
};

export const parseEnteredRequest = (value: unknown): Parsed<EnteredRequest> => {
  const body = Body.of(value, ['channel', 'entered', 'author', 'note']);
  const [channel, entered, who] = [body.text('channel', CHANNEL), enteredOf(body), signed(body)];
  return parsed(body, channel !== null && entered && who ? { channel, entered, ...who } : null);
};

const stateOf = (body: Body): StructureState | null => {
  const state = body.inner('state', ['kind', 'load']);
  const kind = state.word('kind', ['unloaded', 'loaded'] as const);
  if (kind === null) return null;
  if (kind === 'unloaded') {
    return state.has('load') ? state.fault('load', 'no load on an unloaded structure') : { kind };
  }
  const load = state.number('load', -1e12, 1e12, ' N');
  return load === null ? null : { kind, load: newton(load) };
};

export const parseZerosRequest = (value: unknown): Parsed<ZerosRequest> => {
  const fields = ['channels', 'seconds', 'state', 'author', 'reason', 'basedOn'];
  const body = Body.of(value, fields);
  const channels = body.words('channels', CHANNELS);
  const seconds = body.has('seconds')
    ? body.number('seconds', ...SAMPLE_SECONDS, ' s')
    : USUAL_SECONDS;
  const state = stateOf(body);
  const author = body.text('author', 'text: who takes the zero');
  const reason = body.text('reason', 'text: why');
  const basedOn = body.whole('basedOn', 'the revision that was looked at');
  if (channels === null || seconds === null || !state) return parsed<ZerosRequest>(body, null);
  if (author === null || reason === null || basedOn === null)
    return parsed<ZerosRequest>(body, null);
  return parsed(body, { channels, seconds, state, author, reason, basedOn });
};
