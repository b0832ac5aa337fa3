/** Pages that exist. */
export const PAGES = ['watch', 'alarms', 'set-up'] as const;
export type Page = (typeof PAGES)[number];

export const PAGE_NAMES: Readonly<Record<Page, string>> = {
  watch: 'Watch',
  alarms: 'Alarms',
  'set-up': 'Set-up',
};

/** Lengths of the trend, s. */
export const SPANS = [120, 600, 3600] as const;
export type Span = (typeof SPANS)[number];

export const MOST_CHOSEN = 6;

/** Where somebody is: all of it in the address, after the #. */
export interface Route {
  readonly page: Page;
  /** Ids of the channels in the trend, in the order chosen; at most MOST_CHOSEN. */
  readonly chosen: readonly string[];
  readonly span: Span;
  /** The structure that is looked at; null: the site's first. */
  readonly structure: string | null;
  /** The channel whose panel is open. */
  readonly open: string | null;
}

export const HOME: Route = { page: 'watch', chosen: [], span: 120, structure: null, open: null };

/** Of any text after the #; what it does not know is left at its default. */
export const parseRoute = (hash: string): Route => {
  const [path = '', query = ''] = hash.replace(/^#?\/?/, '').split('?');
  const given = new URLSearchParams(query);
  return {
    // What follows a / is a page's own.
    page: PAGES.find((page) => page === path.split('/')[0]) ?? HOME.page,
    chosen: [...new Set(given.getAll('channel'))].slice(0, MOST_CHOSEN),
    span: SPANS.find((span) => span === Number(given.get('span'))) ?? HOME.span,
    structure: given.get('structure'),
    open: given.get('open'),
  };
};

/** `parseRoute` of it gives the same route. */
export const routeText = ({ page, chosen, span, structure, open }: Route): string => {
  const query = new URLSearchParams();
  for (const id of chosen) query.append('channel', id);
  if (span !== HOME.span) query.set('span', String(span));
  if (structure !== null) query.set('structure', structure);
  if (open !== null) query.set('open', open);
  const text = query.toString();
  return `#/${page}${text === '' ? '' : `?${text}`}`;
};

/** Adds a channel to the trend, or takes it out; the one chosen first makes way. */
export const toggleChosen = (chosen: readonly string[], id: string): string[] =>
  chosen.includes(id)
    ? chosen.filter((other) => other !== id)
    : [...chosen, id].slice(-MOST_CHOSEN);
