import type { Site } from '../../shared/model/site.ts';
import type { CompileExpression } from '../../shared/pipeline/evaluation.ts';
import { planSite, type SitePlan } from '../../shared/pipeline/index.ts';

/** The site as it stands, and its plan; replaced whole when its set-up changes. */
export class CurrentSite implements SitePlan {
  readonly #compile: CompileExpression;
  #site: Site;
  #plan: SitePlan;

  constructor(site: Site, compile: CompileExpression) {
    this.#compile = compile;
    this.#site = site;
    this.#plan = this.planFor(site);
  }

  get site(): Site {
    return this.#site;
  }

  get channels(): SitePlan['channels'] {
    return this.#plan.channels;
  }

  get measured(): SitePlan['measured'] {
    return this.#plan.measured;
  }

  get virtual(): SitePlan['virtual'] {
    return this.#plan.virtual;
  }

  get readers(): SitePlan['readers'] {
    return this.#plan.readers;
  }

  /** Of a site that may come to stand. */
  planFor(site: Site): SitePlan {
    return planSite(site, this.#compile);
  }

  replace(site: Site): void {
    this.#site = site;
    this.#plan = this.planFor(site);
  }
}
