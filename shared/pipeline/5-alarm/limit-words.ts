/** Figures of limits as people state them, with their units. */
import type { Limit, LimitContext } from '../../model/limit.ts';
import type { Measurand } from '../../model/site.ts';
import { thresholdOf } from './threshold.ts';

type Scale = readonly [perSi: number, unit: string];

const SHARE: Scale = [100, ' % of yield'];
const STRAIN: Scale = [1e6, ' µε'];
const STRESS: Scale = [1e-6, ' MPa'];

const OF_MEASURAND: Readonly<Record<Measurand, Scale>> = {
  strain: STRAIN,
  shear: STRAIN,
  stress: STRESS,
  force: [1e-3, ' kN'],
  displacement: [1e3, ' mm'],
  temperature: [1, ' °C'],
  moment: [1e-3, ' kN·m'],
  angle: [180 / Math.PI, '°'],
  number: [1, ''],
};

const scaleOf = (basis: Limit['basis'], measurand: Measurand): Scale => {
  switch (basis) {
    case 'share':
      return SHARE;
    case 'strain':
      return STRAIN;
    case 'stress':
      return STRESS;
    case 'value':
      return OF_MEASURAND[measurand];
  }
};

/** As many as tell 99.99 % of yield from all of it; fewer than show a double's last bit. */
const DIGITS = 6;

const inWords = (figure: number, [perSi, unit]: Scale): string =>
  `${Number((figure * perSi).toPrecision(DIGITS))}${unit}`;

/** A limit's value or deadband, SI, in the unit that its basis is stated in. */
export const figureInWords = (
  figure: number,
  basis: Limit['basis'],
  { measurand }: Pick<LimitContext, 'measurand'>,
): string => inWords(figure, scaleOf(basis, measurand));

export const shareInWords = (share: number): string => inWords(share, SHARE);

/** The share of yield that a limit is at; null for what has no yield. */
export const shareOfYield = (limit: Limit, context: LimitContext): number | null => {
  const { stressPerStrain, yieldStrength } = context;
  if (stressPerStrain === null || yieldStrength === null) return null;
  return (thresholdOf(limit, context).raise * stressPerStrain) / yieldStrength;
};

/** As it was stated; with its share of yield beside it where limits of several bases are compared. */
export const limitInWords = (limit: Limit, context: LimitContext, compared: boolean): string => {
  const stated = figureInWords(limit.value, limit.basis, context);
  const share = shareOfYield(limit, context);
  if (!compared || share === null || limit.basis === 'share') return stated;
  return `${stated} (${shareInWords(share)})`;
};
