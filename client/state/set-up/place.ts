/** Which page of the set-up somebody is on: in the address, after `#/set-up`. */
import { pathOf, pointerOf, type Path } from './tree.ts';

export const WORK_PAGES = ['save', 'files', 'revisions'] as const;
export type WorkPage = (typeof WORK_PAGES)[number];

export type SetUpPlace =
  | { readonly page: 'overview' }
  | { readonly page: 'part'; readonly path: Path }
  | { readonly page: WorkPage };

/** Of any text after the #; what it does not know is the overview. */
export const parsePlace = (hash: string): SetUpPlace => {
  const [, first = '', ...rest] =
    hash
      .replace(/^#?\/?/, '')
      .split('?')[0]
      ?.split('/') ?? [];
  const work = WORK_PAGES.find((page) => page === first);
  if (work) return { page: work };
  if (first !== 'part') return { page: 'overview' };
  try {
    const pointer = rest.filter((part) => part !== '').map(decodeURIComponent);
    return { page: 'part', path: pathOf(pointer.map((part) => `/${part}`).join('')) };
  } catch (error) {
    if (error instanceof URIError) return { page: 'overview' };
    throw error;
  }
};

/** `parsePlace` of it gives the same place. */
export const placeText = (place: SetUpPlace): string => {
  if (place.page === 'overview') return '#/set-up';
  if (place.page !== 'part') return `#/set-up/${place.page}`;
  const parts = pointerOf(place.path).split('/').map(encodeURIComponent).join('/');
  return `#/set-up/part${parts}`;
};

export const partLink = (path: Path): string => placeText({ page: 'part', path });
