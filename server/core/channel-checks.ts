import { checkChannel } from '../../shared/channel-check/channel.ts';
import { heatingCheck, insulationCheck } from '../../shared/channel-check/electrical.ts';
import { defaultLimits, type CheckLimits } from '../../shared/channel-check/limits.ts';
import { notJudged, type Check } from '../../shared/channel-check/verdict.ts';
import type { Fault } from '../../shared/model/fault.ts';
import { ohm } from '../../shared/model/units.ts';
import type { ChannelPlan } from '../../shared/pipeline/index.ts';
import type {
  ChannelChecks as Answered,
  CheckLine,
  CheckRecord,
  CheckRequest,
  ChecksAnswer,
  EnteredRequest,
  Given,
  PushRequest,
  ShuntRequest,
  StatedLimits,
  ZerosAnswer,
  ZerosRequest,
} from '../../shared/protocol/checks.ts';
import type {
  CheckDesk,
  CheckLines,
  Clock,
  NodeCommands,
  RecordStore,
  SampleStore,
  SiteFormat,
  ZerosOutcome,
} from '../ports.ts';
import { excitationOf, heatingOf, staleAfterOf, valueUnitOf } from './check-facts.ts';
import { CheckLog } from './check-log.ts';
import type { CurrentSite } from './current-site.ts';
import { nextTurn } from './next-turn.ts';
import { pushLines } from './push-check.ts';
import type { SetUp } from './set-up.ts';
import { shuntLines } from './shunt-check.ts';
import { noteFaults, textFaults } from './text-faults.ts';
import { watchChannel, type ChannelWindow } from './watching.ts';
import { takeZeros } from './zeroing.ts';

export interface CheckParts {
  readonly current: CurrentSite;
  readonly samples: SampleStore;
  readonly records: RecordStore;
  readonly commands: NodeCommands;
  readonly clock: Clock;
  readonly setUp: SetUp;
  readonly format: SiteFormat;
}

const refused = (faults: readonly Fault[]) => ({ ok: false, faults }) as const;

const signFaults = ({ author, note }: { readonly author: string; readonly note: string }) => [
  ...textFaults('/author', author),
  ...noteFaults('/note', note),
];

/** Made by people, not of samples: what says nothing does not stand over what was found before. */
const BY_PEOPLE: readonly string[] = ['sign', 'shunt', 'insulation', 'self-heating'];

/** Channel checks over the samples in store; see CheckDesk. */
export class ChannelChecks implements CheckDesk {
  readonly #parts: CheckParts;
  readonly #log: CheckLog;
  #zeros: ZerosAnswer | null = null;

  constructor(parts: CheckParts) {
    this.#parts = parts;
    this.#log = new CheckLog(parts.records);
  }

  async answer(): Promise<ChecksAnswer> {
    const { current, setUp } = this.#parts;
    const channels: Answered[] = [];
    for (const plan of current.measured) channels.push(await this.#log.of(plan));
    const { simulated } = current.site;
    return { simulated, revision: setUp.revision, channels, zeros: this.#zeros };
  }

  run(request: CheckRequest): CheckLines {
    const { current } = this.#parts;
    const wanted = request.channels;
    const plans = wanted ? wanted.map((id) => this.#planOf(id)) : current.measured;
    const faults = [
      ...plans.flatMap((plan, i) => (plan ? [] : this.#unknown(`/channels/${i}`, wanted?.[i]))),
      ...signFaults(request),
    ];
    if (faults.length > 0) return refused(faults);
    return {
      ok: true,
      lines: this.#run(
        plans.flatMap((plan) => plan ?? []),
        request,
      ),
    };
  }

  push(request: PushRequest): CheckLines {
    return this.#step(request, (plan, record) =>
      pushLines({ ...this.#stepParts(plan), request, record }),
    );
  }

  shunt(request: ShuntRequest): CheckLines {
    return this.#step(request, (plan, record) =>
      shuntLines({ ...this.#stepParts(plan), request, record, commands: this.#parts.commands }),
    );
  }

  async enter({ channel, entered, ...signed }: EnteredRequest) {
    const plan = this.#planOf(channel);
    const faults = [...(plan ? [] : this.#unknown('/channel', channel)), ...signFaults(signed)];
    if (!plan || faults.length > 0) return refused(faults);
    const now = this.#parts.clock.now();
    const window = await this.#watch(plan, { from: now - 20, to: now });
    const response = window?.conversion.record.response;
    if (!window || response?.kind !== 'bridge') {
      const expected = 'a channel with a bridge';
      return refused([{ path: '/channel', expected, came: channel }]);
    }
    if (entered.kind === 'insulation') {
      const limits = defaultLimits('bridge').insulation;
      const check = insulationCheck(response, ohm(entered.resistance), limits);
      return { ok: true, value: await this.#record(plan, [check], entered, signed) } as const;
    }
    const excitation = entered.excitation ?? excitationOf(window);
    const heating = heatingOf(response, excitation, entered.grid);
    if (!heating) {
      const missing = excitation === null ? 'excitation' : 'grid';
      const expected = 'a figure: the calibration record states none';
      return refused([{ path: `/entered/${missing}`, expected, came: 'nothing' }]);
    }
    const given = { kind: 'self-heating', ...heating } as const;
    const check = heatingCheck(response, heating);
    return { ok: true, value: await this.#record(plan, [check], given, signed) } as const;
  }

  async zero(request: ZerosRequest): Promise<ZerosOutcome> {
    const outcome = await takeZeros(this.#parts, request);
    if (outcome.kind === 'answered') this.#zeros = outcome.answer;
    return outcome;
  }

  #planOf(id: string): ChannelPlan | undefined {
    return this.#parts.current.measured.find(({ channel }) => channel.id === id);
  }

  #unknown(path: string, id = ''): Fault[] {
    const isVirtual = this.#parts.current.virtual.some(({ channel }) => channel.id === id);
    const came = isVirtual ? `${id}, which comes from other channels` : id;
    return [{ path, expected: 'a measured channel of the site', came }];
  }

  #watch(plan: ChannelPlan, window: { from: number; to: number }): Promise<ChannelWindow | null> {
    const { samples, current } = this.#parts;
    return watchChannel(samples, plan, window, staleAfterOf(current.site, plan.channel.node));
  }

  async #record(
    plan: ChannelPlan,
    checks: readonly Check[],
    given: Given,
    { author, note }: { readonly author: string; readonly note: string },
  ): Promise<Answered> {
    const { clock, setUp } = this.#parts;
    const head = { channel: plan.channel.id, at: clock.now(), revision: setUp.revision };
    await this.#log.add(
      checks.map((check): CheckRecord => ({ ...head, author, check, given, note })),
    );
    return this.#log.of(plan);
  }

  #stepParts(plan: ChannelPlan) {
    const { clock } = this.#parts;
    const watch = (window: { from: number; to: number }) => this.#watch(plan, window);
    return { plan, clock, watch, unit: valueUnitOf(plan.channel.measurand) };
  }

  #step<R extends PushRequest | ShuntRequest>(
    request: R,
    lines: (
      plan: ChannelPlan,
      record: (check: Check, given: Given) => Promise<Answered>,
    ) => CheckLines,
  ): CheckLines {
    const plan = this.#planOf(request.channel);
    const faults = [
      ...(plan ? [] : this.#unknown('/channel', request.channel)),
      ...signFaults(request),
    ];
    if (!plan || faults.length > 0) return refused(faults);
    return lines(plan, (check, given) => this.#record(plan, [check], given, request));
  }

  async *#run(plans: readonly ChannelPlan[], request: CheckRequest): AsyncGenerator<CheckLine> {
    const channels: Answered[] = [];
    for (const [i, plan] of plans.entries()) {
      // Frames go first: a check of many samples takes some tenths of a second.
      await nextTurn();
      const { checks, given } = await this.#check(plan, request);
      const channel = await this.#record(plan, checks, given, request);
      channels.push(channel);
      yield { kind: 'progress', done: i + 1, of: plans.length, channel };
    }
    yield { kind: 'result', channels };
  }

  async #check(
    plan: ChannelPlan,
    { seconds, limits }: CheckRequest,
  ): Promise<{ checks: readonly Check[]; given: Given }> {
    const to = this.#parts.clock.now();
    const asked = { from: to - seconds, to };
    const window = await this.#watch(plan, asked);
    const unit = valueUnitOf(plan.channel.measurand);
    if (!window || !unit) {
      const why = 'No calibration record is in force yet.';
      const given = { kind: 'samples', ...asked } as const;
      return { checks: [notJudged('alive', '1', why)], given };
    }
    const { record } = window.conversion;
    const { response } = record;
    const excitation = excitationOf(window);
    const heating = response.kind === 'bridge' ? heatingOf(response, excitation) : null;
    const facts = { unit, record, range: plan.range, insulation: null, push: null, heating };
    const judgedBy = limitsFor(defaultLimits(response.kind), limits);
    const checks = checkChannel(window.watched, facts, judgedBy).filter(
      ({ kind, verdict }) => !BY_PEOPLE.includes(kind) || verdict !== 'not-judged',
    );
    return { checks, given: { kind: 'samples', ...window.window } };
  }
}

const limitsFor = (usual: CheckLimits, stated: StatedLimits): CheckLimits => ({
  ...usual,
  ...stated,
});
