import { signCheck } from '../../shared/channel-check/push.ts';
import { seriesOf } from '../../shared/channel-check/series.ts';
import type { Check, ValueUnit } from '../../shared/channel-check/verdict.ts';
import type { ChannelPlan } from '../../shared/pipeline/index.ts';
import type {
  ChannelChecks,
  CheckLine,
  Given,
  PushRequest,
  TimeWindow,
} from '../../shared/protocol/checks.ts';
import type { CheckLines, Clock } from '../ports.ts';
import type { ChannelWindow } from './watching.ts';

/** What the steps that take their time share. */
export interface StepParts {
  readonly plan: ChannelPlan;
  readonly unit: ValueUnit | null;
  readonly clock: Clock;
  readonly watch: (window: TimeWindow) => Promise<ChannelWindow | null>;
  readonly record: (check: Check, given: Given) => Promise<ChannelChecks>;
}

/** The last frames of a window are in store so long after its end, s. */
export const ARRIVAL = 1;

export const pause = (clock: Clock, seconds: number): Promise<void> =>
  new Promise((resolve) => {
    clock.after(seconds, resolve);
  });

/** As `signCheck`: the first fifth at rest. */
const REST_SHARE = 0.2;
/** Common practice, no source. */
const TIMES_NOISE = 5;

export const pushLines = (parts: StepParts & { readonly request: PushRequest }): CheckLines => {
  const { plan, unit, request } = parts;
  if (unit === null || plan.channel.measurand === 'temperature') {
    const came = `${plan.channel.id}, a temperature`;
    return {
      ok: false,
      faults: [{ path: '/channel', expected: 'a channel that a push can move', came }],
    };
  }
  return { ok: true, lines: watchPush(parts, unit, request) };
};

async function* watchPush(
  { clock, watch, record }: StepParts,
  unit: ValueUnit,
  { seconds, expected }: PushRequest,
): AsyncGenerator<CheckLine> {
  const from = clock.now();
  yield { kind: 'phase', phase: 'rest', seconds: seconds * REST_SHARE };
  await pause(clock, seconds * REST_SHARE);
  yield { kind: 'phase', phase: 'push', seconds: seconds * (1 - REST_SHARE) };
  await pause(clock, seconds * (1 - REST_SHARE));
  yield { kind: 'phase', phase: 'arriving', seconds: ARRIVAL };
  await pause(clock, ARRIVAL);
  const window = { from, to: from + seconds };
  const watched = await watch(window);
  if (!watched) {
    yield { kind: 'stopped', why: 'No calibration record is in force.', byHand: false };
    return;
  }
  const series = seriesOf(watched.watched);
  const push = { series, expected: expected === 'up' ? 1 : -1, timesNoise: TIMES_NOISE } as const;
  const channel = await record(signCheck(push, unit), { kind: 'push', expected, ...window });
  yield { kind: 'result', channels: [channel] };
}
