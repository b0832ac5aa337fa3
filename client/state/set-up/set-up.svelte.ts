import type { Fault } from '../../../shared/model/fault.ts';
import type { ChannelChange, Problem, SetUpAnswer } from '../../../shared/protocol/http.ts';
import { fetchSetUp, previewSetUp, putSetUp } from '../../feed/set-up.ts';
import { differences } from './difference.ts';
import {
  isTaken,
  keepDraft,
  keepSaved,
  readDraft,
  readSaved,
  signed,
  withStep,
  type Draft,
  type Step,
} from './draft.ts';
import { newSlips, slipKey, slipsOf } from './slips.ts';
import { isSame, pointerOf, withValue, type Json, type Path } from './tree.ts';

export type Preview =
  | { readonly kind: 'none' }
  | { readonly kind: 'running'; readonly done: number; readonly of: number }
  | { readonly kind: 'done'; readonly channels: readonly ChannelChange[]; readonly of: Json }
  | { readonly kind: 'failed'; readonly why: string };

const memory = () => sessionStorage;

const jsonOf = (answer: SetUpAnswer): Json => answer.document as Json;

/** The set-up that stands, and the one under change. */
export class SetUpState {
  stands = $state.raw<SetUpAnswer | null>(null);
  trouble = $state<string | null>(null);
  draft = $state.raw<Draft | null>(readDraft(memory));
  /** False: the browser keeps no draft, a reload would lose it. */
  isKept = $state(true);
  faults = $state.raw<readonly Fault[]>([]);
  /** What the server said of the last attempt. */
  outcome = $state('');
  preview = $state.raw<Preview>({ kind: 'none' });
  saving = $state(false);
  /** The revision put in force from here, until the next draft; kept while the page is read anew. */
  saved = $state<number | null>(readSaved(memory));
  #steps = $state.raw<readonly Step[]>([]);
  #previewing: AbortController | null = null;

  readonly document = $derived.by((): Json | null =>
    this.draft ? this.draft.document : this.stands && jsonOf(this.stands),
  );
  readonly base = $derived.by((): Json | null =>
    this.draft ? this.draft.base : this.stands && jsonOf(this.stands),
  );
  readonly changes = $derived.by(() =>
    this.draft ? differences(this.draft.base, this.draft.document) : [],
  );
  /** Of what stands; worked out once, not with every key pressed. */
  readonly #standingSlips = $derived.by(() => (this.base === null ? [] : slipsOf(this.base)));
  readonly #baseStands = $derived.by(
    () => this.base !== null && this.stands !== null && isSame(this.base, jsonOf(this.stands)),
  );
  readonly slips = $derived.by(() =>
    this.draft ? newSlips(this.draft.base, this.#standingSlips, this.draft.document) : [],
  );
  readonly open = $derived.by(() =>
    this.slips.filter((slip) => !this.draft?.answered.includes(slipKey(slip))),
  );
  /** Somebody else has changed what the draft was made from. */
  readonly isOvertaken = $derived.by(
    () =>
      this.draft !== null &&
      this.stands !== null &&
      (this.draft.basedOn !== this.stands.revision || !this.#baseStands),
  );

  get canUndo(): boolean {
    return this.#steps.length > 0;
  }

  /** Reads what stands. A draft that it holds all of is done with. */
  async load(): Promise<void> {
    const answer = await fetchSetUp();
    if (!answer.ok) {
      this.trouble = answer.problem.error;
      return;
    }
    this.trouble = null;
    this.stands = answer.value;
    const { draft } = this;
    if (draft && isTaken(signed(draft), jsonOf(answer.value))) {
      if (draft.basedOn !== answer.value.revision) this.#took(answer.value.revision);
      this.#put(null);
    }
  }

  edit(path: Path, value: Json | undefined, alone = false): void {
    const { document } = this;
    if (document === null) return;
    const next = withValue(document, path, value);
    if (isSame(document, next)) return;
    this.#steps = withStep(this.#steps, document, alone ? null : pointerOf(path));
    this.replace(next);
  }

  /** Another document in the draft's place, as from a file. */
  take(document: Json): void {
    if (this.document !== null) this.#steps = withStep(this.#steps, this.document, null);
    this.replace(document);
  }

  undo(): void {
    const step = this.#steps.at(-1);
    if (!step) return;
    this.#steps = this.#steps.slice(0, -1);
    this.replace(step.document);
  }

  discard(): void {
    this.#steps = [];
    this.#put(null);
    this.faults = [];
    this.outcome = '';
  }

  /** The draft goes on from what stands now, with `document` in it. */
  rebase(document: Json): void {
    const { draft, stands } = this;
    if (!draft || !stands) return;
    this.#steps = withStep(this.#steps, draft.document, null);
    this.#put({ ...draft, basedOn: stands.revision, base: jsonOf(stands), document });
    this.outcome = '';
  }

  say(change: Partial<Pick<Draft, 'author' | 'reason' | 'answered'>>): void {
    if (this.draft) this.#put({ ...this.draft, ...change });
  }

  replace(document: Json): void {
    const { stands, draft } = this;
    if (!stands) return;
    const begun = { basedOn: stands.revision, base: jsonOf(stands), answered: [] };
    this.#took(null);
    this.#put({ author: '', reason: '', ...begun, ...draft, document });
  }

  faultsAt(pointer: string): readonly Fault[] {
    return this.faults.filter(({ path }) => path === pointer);
  }

  async look(): Promise<void> {
    if (!this.draft) return;
    const document = signed(this.draft);
    this.stopLooking();
    const control = (this.#previewing = new AbortController());
    this.faults = [];
    this.preview = { kind: 'running', done: 0, of: 0 };
    const answer = await previewSetUp(
      document,
      (line) => {
        this.preview =
          line.kind === 'progress'
            ? { ...line, kind: 'running' }
            : { ...line, kind: 'done', of: document };
      },
      control.signal,
    );
    if (this.#previewing !== control) return;
    this.#previewing = null;
    if (answer.ok) return;
    this.preview = { kind: 'failed', why: answer.problem.error };
    ({ faults: this.faults } = answer.problem);
  }

  stopLooking(): void {
    this.#previewing?.abort();
    this.#previewing = null;
    if (this.preview.kind === 'running') this.preview = { kind: 'none' };
  }

  /** What stands is read first: limits change without a revision, and would be put back. */
  async save(): Promise<void> {
    if (!this.draft || this.saving) return;
    this.saving = true;
    this.outcome = '';
    this.faults = [];
    await this.load();
    await this.#send();
    this.saving = false;
  }

  async #send(): Promise<void> {
    const { draft } = this;
    if (!draft) return;
    if (this.trouble !== null) {
      this.outcome = this.trouble;
      return;
    }
    if (this.isOvertaken) {
      this.outcome =
        'Not saved: somebody else has changed the set-up meanwhile. Your draft is kept.';
      return;
    }
    const { basedOn, author, reason } = draft;
    const document = signed(draft);
    const answer = await putSetUp({ document, basedOn, author, reason });
    if (answer.ok) {
      this.stands = answer.value;
      this.#took(answer.value.revision);
      this.#steps = [];
      this.#put(null);
      this.preview = { kind: 'none' };
      return;
    }
    await this.load();
    this.#refused(answer.problem);
  }

  #refused({ error, faults }: Problem): void {
    this.outcome = error;
    this.faults = faults;
  }

  #took(revision: number | null): void {
    this.saved = revision;
    keepSaved(memory, revision);
  }

  #put(draft: Draft | null): void {
    this.draft = draft;
    if (draft === null || this.#isOld(draft)) this.preview = { kind: 'none' };
    this.isKept = keepDraft(memory, draft);
  }

  /** Is what was previewed another document than this draft's? */
  #isOld(draft: Draft): boolean {
    return this.preview.kind === 'done' && !isSame(this.preview.of, signed(draft));
  }
}

/** Made outside of every component: what is derived in it must not end with one of them. */
const one = new SetUpState();

/** The same for as long as the page is not read again. */
export const setUpState = (): SetUpState => one;
