import { finiteOf, median, seriesOf } from '../../shared/channel-check/series.ts';
import { zeroLimits } from '../../shared/channel-check/zero-limits.ts';
import { zeroOf, type ZeroReading } from '../../shared/channel-check/zero.ts';
import type { StructureState, ZeroRecord } from '../../shared/model/calibration.ts';
import type { Fault } from '../../shared/model/fault.ts';
import { apply } from '../../shared/model/fractional-linear.ts';
import { refuse, type Refusal, type Result } from '../../shared/model/frame.ts';
import type { Structure } from '../../shared/model/site.ts';
import { celsius, newton, newtonToKilonewton, type Celsius } from '../../shared/model/units.ts';
import type { ChannelPlan } from '../../shared/pipeline/index.ts';
import type { TimeWindow, ZerosAnswer, ZerosRequest } from '../../shared/protocol/checks.ts';
import type { Clock, SampleStore, SiteFormat, ZerosOutcome } from '../ports.ts';
import { staleAfterOf, structureOf, valueUnitOf } from './check-facts.ts';
import type { CurrentSite } from './current-site.ts';
import { nextTurn } from './next-turn.ts';
import type { SetUp } from './set-up.ts';
import { textFaults } from './text-faults.ts';
import { watchChannel } from './watching.ts';

export interface ZeroParts {
  readonly current: CurrentSite;
  readonly samples: SampleStore;
  readonly clock: Clock;
  readonly setUp: SetUp;
  readonly format: SiteFormat;
}

/** More load than this share of the safe working load is no unloaded structure. No source. */
const UNLOADED_SHARE = 0.02;
/** A slow sensor's last readings are looked for over so many times its node's silence. */
const SLOW_WINDOWS = 4;

type Watching = (plan: ChannelPlan, window: TimeWindow) => ReturnType<typeof watchChannel>;

const watching =
  ({ samples, current }: ZeroParts): Watching =>
  (plan, window) =>
    watchChannel(samples, plan, window, staleAfterOf(current.site, plan.channel.node));

/** The middle of what a channel read, SI; null where nothing is believed. */
const reads = async (
  watch: Watching,
  plan: ChannelPlan | undefined,
  window: TimeWindow,
): Promise<number | null> => {
  const watched = plan && (await watch(plan, window));
  const value = watched ? median(seriesOf(watched.watched).values) : NaN;
  return Number.isNaN(value) ? null : value;
};

/** Where a structure says that it is loaded, or cannot say: faults and cautions. */
const loadOn = async (
  parts: ZeroParts,
  watch: Watching,
  structures: readonly Structure[],
  window: TimeWindow,
): Promise<{ faults: Fault[]; cautions: string[] }> => {
  const [faults, cautions]: [Fault[], string[]] = [[], []];
  for (const { name, loadChannel, safeWorkingLoad } of structures) {
    if (loadChannel === null || safeWorkingLoad === null) {
      cautions.push(`${name}: no load channel with a safe working load; nothing shows its load.`);
      continue;
    }
    const plan = parts.current.measured.find(({ channel }) => channel.id === loadChannel);
    const load = await reads(watch, plan, window);
    if (load === null) {
      cautions.push(`${name}: ${loadChannel} does not read; nothing shows its load.`);
    } else if (Math.abs(load) > UNLOADED_SHARE * safeWorkingLoad) {
      const most = newtonToKilonewton(newton(UNLOADED_SHARE * safeWorkingLoad));
      faults.push({
        path: '/state',
        expected: `${name} unloaded: at most ${most} kN at ${loadChannel}, 2 % of the safe working load`,
        came: `${newtonToKilonewton(newton(load)).toFixed(1)} kN`,
      });
    }
  }
  return { faults, cautions };
};

/** The channel that says how warm the steel at a gauge is: its record's, else its member's own. */
const temperatureChannelOf = (
  { current }: ZeroParts,
  plan: ChannelPlan,
): ChannelPlan | undefined => {
  const response = plan.conversions.at(-1)?.record.response;
  const stated = response?.kind === 'bridge' ? response.temperature?.channel : undefined;
  return current.measured.find(({ channel: { id, name, measurand }, member }) =>
    stated === undefined
      ? member.id === plan.member.id && measurand === 'temperature' && /steel/i.test(name)
      : id === stated,
  );
};

interface Taken {
  readonly plan: ChannelPlan;
  readonly reading: ZeroReading;
  /** SI */
  readonly change: number;
  readonly temperature: Celsius | null;
}

/** One channel's zero, without its head. */
const takeOne = async (
  parts: ZeroParts,
  watch: Watching,
  plan: ChannelPlan,
  window: TimeWindow,
): Promise<Result<Taken>> => {
  const { id, measurand, node } = plan.channel;
  const unit = valueUnitOf(measurand);
  const structure = structureOf(parts.current.site, plan.member.id);
  const limits = unit && zeroLimits(unit, structure?.safeWorkingLoad ?? null);
  if (!unit || !limits) {
    const expected =
      unit === 'N'
        ? 'a structure with a safe working load, by which the zero of a load is judged'
        : 'a channel whose zero is taken on the structure';
    return refuse('no-zero', 'channel', expected, `${id}, ${measurand}`);
  }
  const watched = await watch(plan, window);
  if (!watched) {
    return refuse('uncalibrated', 'channel', 'a calibration record in force', 'none');
  }
  if (finiteOf(watched.watched.raw).length === 0) {
    return refuse('not-arriving', 'samples', `samples of ${node} that can be believed`, 'none');
  }
  const reading = zeroOf(watched.watched, unit, limits);
  if (!reading.ok) return reading;
  const sensor = temperatureChannelOf(parts, plan);
  const span = SLOW_WINDOWS * staleAfterOf(parts.current.site, sensor?.channel.node ?? '');
  const from = Math.min(window.from, window.to - span);
  const warmth = await reads(watch, sensor, { from, to: window.to });
  const temperature = warmth === null ? null : celsius(warmth);
  const change = -apply(watched.conversion.map, reading.value.mean);
  return { ok: true, value: { plan, reading: reading.value, change, temperature } };
};

const recordOf = (
  { plan, reading, temperature }: Taken,
  at: ZeroRecord['validFrom'],
  state: StructureState,
  { author, reason }: ZerosRequest,
): ZeroRecord => ({
  id: `${plan.channel.id}-zero-${Math.round(at * 1e3)}`,
  ...{ validFrom: at, author, reason, recordedAt: null, corrects: null },
  ...{ raw: reading.mean, noise: reading.deviation, samples: reading.samples, temperature, state },
});

/**
 * Reads zeros of some channels and puts them in force as one revision of the set-up: a channel that
 * drifts, is noisy or does not arrive is refused while the others are zeroed.
 */
export const takeZeros = async (parts: ZeroParts, request: ZerosRequest): Promise<ZerosOutcome> => {
  const { current, clock, setUp, format } = parts;
  const { channels, seconds, state, author, reason, basedOn } = request;
  const plans = channels.map((id) => current.measured.find(({ channel }) => channel.id === id));
  const unknown = plans.flatMap((plan, i): Fault[] =>
    plan
      ? []
      : [
          {
            path: `/channels/${i}`,
            expected: 'a measured channel of the site',
            came: channels[i] ?? '',
          },
        ],
  );
  const known = plans.flatMap((plan) => plan ?? []);
  const words = [...textFaults('/author', author), ...textFaults('/reason', reason)];
  if (unknown.length > 0 || words.length > 0) {
    return { kind: 'refused', faults: [...unknown, ...words] };
  }
  const at = clock.now();
  const window = { from: at - seconds, to: at };
  const watch = watching(parts);
  const structures = new Set(
    known.flatMap((plan) => structureOf(current.site, plan.member.id) ?? []),
  );
  const { faults, cautions } =
    state.kind === 'unloaded'
      ? await loadOn(parts, watch, [...structures], window)
      : { faults: [], cautions: [] };
  if (faults.length > 0) return { kind: 'refused', faults };

  const zeroed: Taken[] = [];
  const refused: { channel: string; refusal: Refusal }[] = [];
  for (const plan of known) {
    await nextTurn();
    const taken = await takeOne(parts, watch, plan, window);
    if (taken.ok) zeroed.push(taken.value);
    else refused.push({ channel: plan.channel.id, refusal: taken.refusal });
  }
  const { simulated } = current.site;
  const answer = (revision: number, done: ZerosAnswer['zeroed']): ZerosOutcome => ({
    kind: 'answered',
    answer: { simulated, at, author, revision, zeroed: done, refused, cautions },
  });
  if (zeroed.length === 0) return answer(setUp.revision, []);

  const records = zeroed.map((taken) => recordOf(taken, at, state, request));
  let { text } = setUp;
  for (const [i, zero] of records.entries()) {
    await nextTurn();
    text = format.withZero(text, zeroed[i]?.plan.channel.id ?? '', zero);
  }
  const document: unknown = JSON.parse(text);
  const outcome = await setUp.change({ document, basedOn, author, reason });
  if (outcome.kind !== 'changed') return outcome;
  return answer(
    outcome.revision,
    zeroed.map(({ plan, reading, change, temperature }, i) => ({
      ...{ channel: plan.channel.id, zero: records[i]?.id ?? '' },
      ...{ change, samples: reading.samples, temperature },
    })),
  );
};
