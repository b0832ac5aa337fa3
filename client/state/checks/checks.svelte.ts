import { createContext } from 'svelte';
import type { Fault } from '../../../shared/model/fault.ts';
import type {
  ChannelChecks,
  ChecksAnswer,
  CheckLine,
  EnteredRequest,
  Phase,
  StatedLimits,
  ZerosRequest,
} from '../../../shared/protocol/checks.ts';
import type { Problem } from '../../../shared/protocol/http.ts';
import {
  enterCheck,
  fetchChecks,
  makeCheck,
  takeZeros,
  type LongCheck,
} from '../../feed/checks.ts';
import { isCheckedBy } from './words.ts';

/** What is going on, one thing at a time. */
export interface Work {
  /** A channel's id, or null: of several. */
  readonly channel: string | null;
  readonly done: number;
  readonly of: number;
  /** null: nothing to be told but that it goes on. */
  readonly phase: {
    readonly phase: Phase;
    readonly seconds: number;
    readonly since: number;
  } | null;
}

const AUTHOR = 'yieldward-checks-author';

export const SECONDS = [20, 60, 180, 600] as const;

/** Channel checks as the server has them on record, and the making of new ones. */
export class ChecksState {
  answer = $state.raw<ChecksAnswer | null>(null);
  /** Why there is no answer. */
  trouble = $state<string | null>(null);
  #author = $state(sessionStorage.getItem(AUTHOR) ?? '');
  note = $state('');
  seconds = $state<number>(20);
  work = $state.raw<Work | null>(null);
  /** What came of the last thing asked for. */
  said = $state('');
  /** Whose it was; null: of several channels. */
  saidOf = $state<string | null>(null);
  faults = $state.raw<readonly Fault[]>([]);
  /** Of the last attempt to take zeros. */
  zeroFaults = $state.raw<readonly Fault[]>([]);
  /** The channel whose node did not lay its shunt: it can be laid by hand. */
  byHand = $state<string | null>(null);
  #ending: AbortController | null = null;

  /** Those not checked yet under the set-up that stands. */
  readonly left: readonly string[] = $derived.by(() => {
    const { answer } = this;
    if (!answer) return [];
    return answer.channels
      .filter((channel) => !isCheckedBy(channel, answer.revision))
      .map(({ channel }) => channel);
  });

  /** Kept over a reload, which a zero brings about in every browser. */
  get author(): string {
    return this.#author;
  }

  set author(name: string) {
    this.#author = name;
    sessionStorage.setItem(AUTHOR, name);
  }

  async load(): Promise<void> {
    const answer = await fetchChecks();
    if (answer.ok) this.answer = answer.value;
    this.trouble = answer.ok ? null : answer.problem.error;
  }

  /** null: all channels. */
  run(channels: readonly string[] | null, limits: StatedLimits): Promise<void> {
    const { author, note, seconds } = this;
    const of = channels?.length ?? this.answer?.channels.length ?? 0;
    const one = channels?.length === 1 ? (channels[0] ?? null) : null;
    const request = { channels, seconds, limits, author, note };
    return this.#make({ path: 'checks', request }, one, of);
  }

  make(check: Exclude<LongCheck, { path: 'checks' }>): Promise<void> {
    return this.#make(check, check.request.channel, 1);
  }

  async enter(channel: string, entered: EnteredRequest['entered']): Promise<void> {
    const { author, note } = this;
    this.#say('', channel);
    const answer = await enterCheck({ channel, entered, author, note });
    if (!answer.ok) return this.#refused(answer.problem);
    this.#take(answer.value);
    this.#say('On record.', channel);
  }

  async zero(request: Omit<ZerosRequest, 'author' | 'basedOn'>): Promise<void> {
    if (!this.answer) return;
    this.#say('', null);
    this.work = { channel: null, done: 0, of: request.channels.length, phase: null };
    const { author } = this;
    const answer = await takeZeros({ ...request, author, basedOn: this.answer.revision });
    this.work = null;
    this.zeroFaults = answer.ok ? [] : answer.problem.faults;
    if (answer.ok) this.said = 'Zeros taken: see below.';
    else this.#refused(answer.problem);
    await this.load();
  }

  stop(): void {
    this.#ending?.abort();
  }

  async #make(check: LongCheck, channel: string | null, of: number): Promise<void> {
    if (this.work) return;
    const ending = new AbortController();
    this.#ending = ending;
    this.byHand = null;
    this.#say('', channel);
    this.work = { channel, done: 0, of, phase: null };
    let isWhole = false;
    const answer = await makeCheck(
      check,
      (line) => {
        isWhole ||= this.#hear(line);
      },
      ending.signal,
    );
    this.work = null;
    this.#ending = null;
    if (!answer.ok) return this.#refused(answer.problem);
    if (!isWhole) this.said = 'It broke off before its end; what is shown is on record.';
  }

  /** true: the last line. */
  #hear(line: CheckLine): boolean {
    const { work } = this;
    switch (line.kind) {
      case 'progress':
        this.#take(line.channel);
        if (work) this.work = { ...work, done: line.done, of: line.of };
        return false;
      case 'phase': {
        const { phase, seconds } = line;
        if (work)
          this.work = { ...work, phase: { phase, seconds, since: performance.now() / 1e3 } };
        return false;
      }
      case 'result':
        for (const channel of line.channels) this.#take(channel);
        this.said = 'Done, and on record.';
        return true;
      case 'stopped':
        this.said = line.why;
        this.byHand = line.byHand ? (work?.channel ?? null) : null;
        return true;
    }
  }

  #take(channel: ChannelChecks): void {
    if (!this.answer) return;
    const channels = this.answer.channels.map((was) =>
      was.channel === channel.channel ? channel : was,
    );
    this.answer = { ...this.answer, channels };
  }

  #say(text: string, channel: string | null): void {
    this.said = text;
    this.saidOf = channel;
    this.faults = [];
  }

  #refused({ error, faults }: Problem): void {
    this.said = error;
    this.faults = faults;
  }
}

export const [useChecks, provideChecks] = createContext<ChecksState>();
