import { isBelieved } from '../../shared/model/block.ts';
import { createContext } from 'svelte';
import { fetchSite } from '../feed/api.ts';
import type { Site, Structure } from '../../shared/model/site.ts';
import { channelFacts, stressAt, type ChannelFacts } from './channel-facts.ts';
import { LiveState } from './live.svelte.ts';
import { NO_FIGURE } from './number-text.ts';
import type { PreferenceState } from './preferences.svelte.ts';
import { figureText, kindOf, quantityText, scaleFor, type Scale } from './quantity.ts';
import type { RouteState } from './route.svelte.ts';
import { TrendState } from './trend.svelte.ts';

/** Seconds between two attempts to get the site. */
const TRY_AGAIN = 2;

/** All that the pages stand on, once the site is known. */
export class AppState {
  readonly site: Site;
  readonly facts: readonly ChannelFacts[];
  readonly live: LiveState;
  readonly trend: TrendState;
  readonly preferences: PreferenceState;
  readonly route: RouteState;

  constructor(site: Site, preferences: PreferenceState, route: RouteState) {
    this.site = site;
    this.facts = channelFacts(site);
    this.live = new LiveState(this.facts);
    this.trend = new TrendState(this.live);
    this.preferences = preferences;
    this.route = route;
  }

  get structure(): Structure | undefined {
    const { structures } = this.site;
    return structures.find(({ id }) => id === this.route.now.structure) ?? structures[0];
  }

  factsOf(id: string): ChannelFacts | undefined {
    return this.facts[this.live.indexOf(id) ?? -1];
  }

  scale({ channel }: ChannelFacts): Scale {
    return scaleFor(kindOf(channel.measurand), this.preferences.units);
  }

  get stressScale(): Scale {
    return scaleFor('stress', this.preferences.units);
  }

  /** A channel's figure with its unit. */
  text(facts: ChannelFacts, value: number | null): string {
    const scale = this.scale(facts);
    return value === null ? `${NO_FIGURE} ${scale.unit}` : quantityText(value, scale);
  }

  /** Stress where there is one, else the channel's own figure; with its unit. */
  telling(facts: ChannelFacts, value: number): string {
    const stress = stressAt(value, facts.context);
    return stress === null ? this.text(facts, value) : quantityText(stress, this.stressScale);
  }

  /** Of these channels: how many have a limit, and how many of those cannot be judged just now. */
  judged(of: readonly ChannelFacts[]): { limited: number; not: number } {
    void this.live.pulse;
    const limited = of.filter(({ index }) => {
      const { caution, stop } = this.live.bounds(index);
      return caution !== null || stop !== null;
    });
    const not = limited.filter(({ index }) => !isBelieved(this.live.read(index).quality));
    return { limited: limited.length, not: not.length };
  }

  bare(facts: ChannelFacts, value: number | null): string {
    return value === null ? NO_FIGURE : figureText(value, this.scale(facts));
  }
}

export const [useApp, provideApp] = createContext<AppState>();

export type Start =
  | { readonly kind: 'loading' }
  | { readonly kind: 'waiting'; readonly why: string }
  | { readonly kind: 'ready'; readonly app: AppState };

/** Gets the site, for as long as it takes; says each time why it is not there yet. */
export const startApp = (
  preferences: PreferenceState,
  route: RouteState,
  say: (start: Start) => void,
): (() => void) => {
  let [ended, timer] = [false, 0];
  const attempt = async () => {
    const answer = await fetchSite();
    if (ended) return;
    if (answer.ok)
      return say({ kind: 'ready', app: new AppState(answer.value, preferences, route) });
    say({ kind: 'waiting', why: answer.problem.error });
    timer = window.setTimeout(() => void attempt(), TRY_AGAIN * 1e3);
  };
  void attempt();
  return () => {
    ended = true;
    clearTimeout(timer);
  };
};
