import type { Fault } from '../../shared/model/fault.ts';
import type { Limit } from '../../shared/model/limit.ts';
import { channelsOf, type Site } from '../../shared/model/site.ts';
import type { EpochSeconds } from '../../shared/model/units.ts';
import type {
  PreviewLine,
  RevisionsAnswer,
  SetUpAnswer,
  SetUpRequest,
} from '../../shared/protocol/http.ts';
import type {
  Clock,
  LimitChange,
  RecordStore,
  SampleStore,
  SetUpDesk,
  SetUpOutcome,
  SiteFormat,
  SiteRevision,
} from '../ports.ts';
import type { CurrentSite } from './current-site.ts';
import { previewChange } from './preview.ts';
import { successionFaults } from './succession.ts';
import { textFaults } from './text-faults.ts';

export interface SetUpParts {
  readonly records: RecordStore;
  readonly samples: SampleStore;
  readonly format: SiteFormat;
  readonly clock: Clock;
  readonly current: CurrentSite;
  readonly limits: ReadonlyMap<string, readonly Limit[]>;
  /** Puts a checked and stored set-up in force. */
  readonly adopt: (site: Site, changes: readonly LimitChange[]) => Promise<void>;
}

const MOST_REVISIONS = 200;

type Checked =
  | { readonly ok: true; readonly site: Site; readonly text: string }
  | { readonly ok: false; readonly faults: readonly Fault[] };

/** The site file as it stands, revision by revision, and its change while everything runs. */
export class SetUp implements SetUpDesk {
  readonly #parts: SetUpParts;
  #revision: SiteRevision;
  #last: Promise<unknown> = Promise.resolve();

  constructor(parts: SetUpParts, revision: SiteRevision) {
    this.#parts = parts;
    this.#revision = revision;
  }

  get revision(): number {
    return this.#revision.revision;
  }

  /** The site file with the limits in force in it. */
  get text(): string {
    const { format, limits } = this.#parts;
    return format.withLimits(this.#revision.text, limits);
  }

  answer(): SetUpAnswer {
    const { revision, at, author, reason, origin } = this.#revision;
    const { simulated } = this.#parts.current.site;
    const document: unknown = JSON.parse(this.text);
    return { simulated, revision, at, author, reason, origin, document };
  }

  async revisions(): Promise<RevisionsAnswer> {
    const { records, current } = this.#parts;
    const revisions = await records.siteRevisions(MOST_REVISIONS);
    return { simulated: current.site.simulated, revisions };
  }

  /** One at a time: the second of two that were made from the same revision is told so. */
  change(request: SetUpRequest): Promise<SetUpOutcome> {
    const outcome = this.#last.then(() => this.#change(request));
    this.#last = outcome.catch(() => undefined);
    return outcome;
  }

  /** What a change would do to the past; faults instead, if it may not be. */
  preview(
    document: unknown,
  ):
    | { readonly ok: true; readonly lines: AsyncGenerator<PreviewLine> }
    | { readonly ok: false; readonly faults: readonly Fault[] } {
    const { samples, current, clock } = this.#parts;
    const checked = this.#check(document);
    if (!checked.ok) return checked;
    const before = current.planFor(current.site);
    const lines = previewChange(samples, before, current.planFor(checked.site), clock.now());
    return { ok: true, lines };
  }

  #check(document: unknown): Checked {
    const { format, current, clock } = this.#parts;
    const text = JSON.stringify(document ?? null);
    const read = format.read(text);
    if (!read.ok) return read;
    const faults = successionFaults(current.site, read.site);
    if (faults.length > 0) return { ok: false, faults };
    const stamped = format.stamped(text, this.#revision.text, clock.now());
    const again = format.read(stamped);
    return again.ok ? { ok: true, site: again.site, text: stamped } : again;
  }

  async #change({ document, basedOn, author, reason }: SetUpRequest): Promise<SetUpOutcome> {
    const { records, clock, adopt } = this.#parts;
    if (basedOn !== this.#revision.revision) {
      const { revision, at, author: by, reason: why } = this.#revision;
      return { kind: 'conflict', revision, at, author: by, reason: why };
    }
    const checked = this.#check(document);
    const wordFaults = [...textFaults('/author', author), ...textFaults('/reason', reason)];
    if (!checked.ok || wordFaults.length > 0) {
      return { kind: 'refused', faults: [...wordFaults, ...(checked.ok ? [] : checked.faults)] };
    }
    const at = clock.now();
    const changes = this.#limitChanges(checked.site, { at, author, reason });
    const revision: SiteRevision = {
      ...{ revision: this.#revision.revision + 1, at, author, reason },
      ...{ origin: 'screen', text: checked.text },
    };
    await records.addSiteRevision(revision, changes);
    this.#revision = revision;
    await adopt(checked.site, changes);
    return { kind: 'changed', revision: revision.revision };
  }

  #limitChanges(
    site: Site,
    head: { readonly at: EpochSeconds; readonly author: string; readonly reason: string },
  ): LimitChange[] {
    const { limits: inForce } = this.#parts;
    return channelsOf(site).flatMap(({ channel: { id, limits } }) =>
      JSON.stringify(limits) === JSON.stringify(inForce.get(id))
        ? []
        : [{ ...head, channel: id, limits }],
    );
  }
}
