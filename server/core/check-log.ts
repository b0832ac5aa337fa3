import { channelVerdict } from '../../shared/channel-check/channel.ts';
import { heatingCheck, insulationCheck } from '../../shared/channel-check/electrical.ts';
import { defaultLimits } from '../../shared/channel-check/limits.ts';
import {
  CHECK_KINDS,
  notJudged,
  type Check,
  type CheckKind,
} from '../../shared/channel-check/verdict.ts';
import type { ChannelPlan } from '../../shared/pipeline/index.ts';
import type { ChannelChecks, CheckRecord } from '../../shared/protocol/checks.ts';
import type { RecordStore } from '../ports.ts';

/** What stands where a check has never been made. */
const neverMade = (kind: CheckKind, plan: ChannelPlan): Check => {
  const response = plan.conversions.at(-1)?.record.response;
  if (response && kind === 'insulation') {
    return insulationCheck(response, null, defaultLimits(response.kind).insulation);
  }
  if (response && kind === 'self-heating') return heatingCheck(response, null);
  if (kind === 'sign') return notJudged(kind, '1', 'Nobody has pushed yet.');
  if (kind === 'shunt') {
    return response?.kind === 'bridge'
      ? notJudged(kind, '1', 'No shunt has been laid yet.')
      : notJudged(kind, '1', 'A transducer states no gauge to lay a shunt across.');
  }
  return notJudged(kind, '1', 'Not checked yet.');
};

/** Checks on record, the latest of each kind at hand. */
export class CheckLog {
  readonly #records: RecordStore;
  #known: Promise<Map<string, CheckRecord>> | null = null;

  constructor(records: RecordStore) {
    this.#records = records;
  }

  /** Durable when it resolves. */
  async add(records: readonly CheckRecord[]): Promise<void> {
    await this.#records.addCheckRecords(records);
    const known = await this.#latest();
    for (const record of records) known.set(`${record.channel} ${record.check.kind}`, record);
  }

  async of(plan: ChannelPlan): Promise<ChannelChecks> {
    const known = await this.#latest();
    const { id } = plan.channel;
    const checks = CHECK_KINDS.map((kind): ChannelChecks['checks'][number] => {
      const found = known.get(`${id} ${kind}`);
      if (!found) return { check: neverMade(kind, plan), record: null };
      const { channel: _, check, ...record } = found;
      return { check, record };
    });
    return { channel: id, verdict: channelVerdict(checks.map(({ check }) => check)), checks };
  }

  #latest(): Promise<Map<string, CheckRecord>> {
    this.#known ??= this.#records
      .lastCheckRecords()
      .then((records) => new Map(records.map((r) => [`${r.channel} ${r.check.kind}`, r])));
    return this.#known;
  }
}
