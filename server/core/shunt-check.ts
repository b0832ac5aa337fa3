import { defaultLimits } from '../../shared/channel-check/limits.ts';
import { placedShunt, shuntCheck } from '../../shared/channel-check/shunt.ts';
import type { Shunt } from '../../shared/pipeline/2-ratio/shunt.ts';
import { ohm } from '../../shared/model/units.ts';
import type { CheckLine, Given, ShuntRequest, TimeWindow } from '../../shared/protocol/checks.ts';
import type { CheckLines, NodeCommands } from '../ports.ts';
import { ARRIVAL, pause, type StepParts } from './push-check.ts';

/** Filters settle and clocks differ: nothing is read so near to a change of the shunt, s. */
const SETTLING = 0.5;
/** The node lets go by itself so much later than it is read, s. */
const SPARE = 5;

type ShuntParts = StepParts & {
  readonly request: ShuntRequest;
  readonly commands: NodeCommands;
};

type Read = Pick<Extract<Given, { kind: 'shunt' }>, 'before' | 'during' | 'after'>;

export const shuntLines = (parts: ShuntParts): CheckLines => {
  const { plan, request } = parts;
  const response = plan.conversions.at(-1)?.record.response;
  if (response?.kind !== 'bridge') {
    const fault = { path: '/channel', expected: 'a channel with a bridge', came: plan.channel.id };
    return { ok: false, faults: [fault] };
  }
  const placed = placedShunt(response, request.place, request.arm, ohm(request.resistance));
  if (!placed.ok) {
    const { expected, came } = placed;
    return { ok: false, faults: [{ path: '/place', expected, came }] };
  }
  const { read } = request;
  return {
    ok: true,
    lines: read
      ? judged(parts, placed.shunt, { ...read, after: null })
      : commanded(parts, placed.shunt),
  };
};

const ending = (from: number, seconds: number): TimeWindow => ({ from, to: from + seconds });

async function* commanded(parts: ShuntParts, shunt: Shunt): AsyncGenerator<CheckLine> {
  const { clock, commands, plan, request } = parts;
  const { seconds } = request;
  const { node, input } = plan.channel;
  const tell = (on: boolean) =>
    commands.command(node, { kind: 'shunt', input, on, seconds: seconds + SPARE });
  const asked = clock.now();
  const before = ending(asked - SETTLING - seconds, seconds);
  const outcome = await tell(true);
  if (!outcome.ok) {
    yield { kind: 'stopped', why: outcome.why, byHand: true };
    return;
  }
  const laid = SETTLING + seconds + SETTLING;
  yield { kind: 'phase', phase: 'shunt-on', seconds: laid };
  const during = ending(clock.now() + SETTLING, seconds);
  await pause(clock, laid);
  const off = await tell(false);
  // Not acknowledged: it lets go by itself.
  const rest = off.ok ? SETTLING : SPARE + SETTLING;
  yield { kind: 'phase', phase: 'shunt-off', seconds: rest + seconds };
  const after = ending(clock.now() + rest, seconds);
  await pause(clock, rest + seconds);
  yield* judged(parts, shunt, { before, during, after });
}

async function* judged(
  { clock, watch, record, request }: ShuntParts,
  shunt: Shunt,
  read: Read,
): AsyncGenerator<CheckLine> {
  const latest = (read.after ?? read.during).to;
  const wait = latest + ARRIVAL - clock.now();
  if (wait > 0) {
    yield { kind: 'phase', phase: 'arriving', seconds: wait };
    await pause(clock, wait);
  }
  const [before, during] = [await watch(read.before), await watch(read.during)];
  const after = read.after && (await watch(read.after));
  if (!before || !during) {
    const why = 'No calibration record was in force then.';
    yield { kind: 'stopped', why, byHand: false };
    return;
  }
  const check = shuntCheck(
    {
      ...{ before: before.watched.raw, during: during.watched.raw },
      after: after && after.watched.raw,
    },
    during.conversion.record,
    shunt,
    defaultLimits('bridge').shunt,
  );
  const { how, place, resistance } = request;
  const given: Given = { kind: 'shunt', how, place, arm: shunt.arm, resistance, ...read };
  yield { kind: 'result', channels: [await record(check, given)] };
}
