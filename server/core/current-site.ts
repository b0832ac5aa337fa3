import type { Site } from '../../shared/model/site.ts';
import { planSite, type ChannelPlan, type SitePlan } from '../../shared/pipeline/index.ts';

/** The site as it stands, and its plan; replaced whole when its set-up changes. */
export class CurrentSite implements SitePlan {
  #site: Site;
  #plan: SitePlan;

  constructor(site: Site) {
    this.#site = site;
    this.#plan = planSite(site);
  }

  get site(): Site {
    return this.#site;
  }

  get channels(): readonly ChannelPlan[] {
    return this.#plan.channels;
  }

  get readers(): SitePlan['readers'] {
    return this.#plan.readers;
  }

  replace(site: Site): void {
    this.#site = site;
    this.#plan = planSite(site);
  }
}
