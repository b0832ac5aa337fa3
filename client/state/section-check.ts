import { strain, type Strain } from '../../shared/model/units.ts';
import type { Definition } from '../../shared/model/virtual.ts';
import { fitPlane } from '../../shared/pipeline/4-stress/plane-fit.ts';
import { judgeSection, watchSection } from '../../shared/pipeline/4-stress/suspect-gauge.ts';

type SectionDefinition = Extract<Definition, { readonly kind: 'section' }>;

/** What the gauges of a section say of one another. */
export interface SectionFinding {
  readonly words: string;
  /** Ids of channels that may be the one not to be believed; none where all agree. */
  readonly suspects: readonly string[];
  readonly isDoubted: boolean;
  /** Of the gauges about a plane, m/m; null with three. */
  readonly deviation: Strain | null;
}

/** Noise of a good input, and a gauge factor known to ±1 %: common practice, no source. */
const [NOISE, FACTOR] = [2e-6, 0.01 / Math.sqrt(3)];

/** Standard uncertainty of one gauge's strain among these. */
const uncertaintyAmong = (strains: readonly number[]): Strain =>
  strain(Math.hypot(NOISE, FACTOR * Math.max(...strains.map(Math.abs))));

/** null where a strain is not believed: then nothing can be said. */
export const sectionFinding = (
  { gauges }: SectionDefinition,
  strains: readonly (number | null)[],
): SectionFinding | null => {
  const known = strains.flatMap((one) => (one === null || !Number.isFinite(one) ? [] : [one]));
  const fit = fitPlane(gauges);
  if (known.length < gauges.length || !fit.ok) return null;
  const judged = judgeSection(watchSection(fit.value), known, uncertaintyAmong(known));
  const { verdict, deviation, warpingShare } = judged;
  const idOf = (gauge: number): string => gauges[gauge]?.channel ?? '';
  switch (verdict.kind) {
    case 'unchecked':
      return {
        ...{ suspects: [], isDoubted: false, deviation },
        words: 'Three gauges fit any plane: none of them is checked by the others.',
      };
    case 'agree':
      return {
        ...{ suspects: [], isDoubted: false, deviation },
        words: 'The gauges agree with a plane section.',
      };
    case 'one':
      return {
        ...{ suspects: [idOf(verdict.gauge)], isDoubted: true, deviation },
        words: 'One gauge is not to be believed: without it, and without no other, the rest agree.',
      };
    case 'undecided': {
      const warps =
        gauges.length === 4 || (warpingShare ?? 0) > 0.5 ? ', or the section warps (bimoment)' : '';
      const which =
        verdict.suspects.length > 0
          ? `The gauges do not agree with a plane section: one of these is wrong${warps}.`
          : 'The gauges do not agree with a plane section, and no single one explains it.';
      return {
        ...{ suspects: verdict.suspects.map(idOf), isDoubted: true, deviation },
        words: which,
      };
    }
  }
};
