/** What each channel of the demo's site feels, by its place on the lift. */
import type { Channel, Member, Station } from '../../shared/model/site.ts';
import { metre, newton } from '../../shared/model/units.ts';
import {
  beamDeflection,
  beamStrain,
  legStrain,
  sunStrainPerKelvin,
  tieStrain,
  webShearStrain,
} from './structure.ts';

/** In the channel's SI unit: what is true there is linear in these. */
export interface Influence {
  /** Per N in the hook. */
  readonly perNewton: number;
  /** Per K by which the sun warms one flange of leg L1. */
  readonly perSunKelvin: number;
  /** Per K of the steel above `STEEL_AT_REST`. */
  readonly perSteelKelvin: number;
  readonly atRest: number;
  /** Standard deviation of one sample. */
  readonly noise: number;
}

/** °C at which the zeros were taken. */
export const STEEL_AT_REST = 16;
const SUNLIT_LEG = 'L1';
/** A quarter bridge is matched to the steel but for so much, 1/K; pairs cancel it. */
const THERMAL_MISMATCH = 0.8e-6;
/** Strain: what a good input shows, 0.5 to 2 µε. */
const [QUARTER_NOISE, PAIR_NOISE] = [0.8e-6, 0.5e-6];

const NONE: Influence = { perNewton: 0, perSunKelvin: 0, perSteelKelvin: 0, atRest: 0, noise: 0 };
const ONE_NEWTON = newton(1);

const quarter = (perNewton: number): Influence => ({
  ...{ ...NONE, perNewton },
  perSteelKelvin: THERMAL_MISMATCH,
  noise: QUARTER_NOISE,
});

const pair = (perNewton: number, perSunKelvin = 0): Influence => ({
  ...{ ...NONE, perNewton, perSunKelvin },
  noise: PAIR_NOISE,
});

/** A gauge on a flange tip: y to the left and z up, looking along the member. */
const flangeTip = (face: string, side: string, { section }: Member) => ({
  y: metre(((side === 'left' ? 1 : -1) * section.width) / 2),
  z: metre(((face === 'top' ? 1 : -1) * section.height) / 2),
});

type Places = readonly (readonly [
  RegExp,
  (match: RegExpExecArray, member: Member, station: Station) => Influence,
])[];

const PLACES: Places = [
  [
    /^B\d-mid-(top|bottom)-(left|right)$/,
    ([, face = '', side = ''], member, { at }) =>
      quarter(beamStrain(member, at, flangeTip(face, side, member), ONE_NEWTON)),
  ],
  [
    /^B\d-third\d-bending$/,
    (_, member, { at }) => {
      const bottom = { y: metre(0), z: metre(-member.section.height / 2) };
      return pair(beamStrain(member, at, bottom, ONE_NEWTON));
    },
  ],
  [
    /^B\d-end-web-(0|45|90)$/,
    // Pure shear at half height: only the gauge at 45° sees it, as γ/2.
    ([, angle], member, { at }) =>
      quarter(angle === '45' ? webShearStrain(member, at, ONE_NEWTON) / 2 : 0),
  ],
  [/^B\d-end-web-shear$/, (_, member, { at }) => pair(webShearStrain(member, at, ONE_NEWTON) / 2)],
  [
    /^B\d-mid-deflection$/,
    (_, member, { at }) => ({
      ...NONE,
      perNewton: beamDeflection(member, at, ONE_NEWTON),
      noise: 5e-6,
    }),
  ],
  [
    /^L\d-mid-(bending|axial)$/,
    ([, kind], leg, { at }) => {
      const [load, sun] = [legStrain(leg, at, ONE_NEWTON), sunStrainPerKelvin(leg)];
      const [perNewton, perSunKelvin] =
        kind === 'bending' ? [load.bending, sun.bending] : [load.axial, sun.axial];
      return pair(perNewton, leg.id === SUNLIT_LEG ? perSunKelvin : 0);
    },
  ],
  [/^T\d-mid-axial$/, (_, tie) => pair(tieStrain(tie, ONE_NEWTON))],
  [/^hook-load$/, () => ({ ...NONE, perNewton: 1, noise: 30 })],
  [
    /^steel$/,
    () => ({ ...NONE, perSunKelvin: 1, perSteelKelvin: 1, atRest: STEEL_AT_REST, noise: 0.03 }),
  ],
  [/^air$/, () => ({ ...NONE, perSteelKelvin: 1.4, atRest: STEEL_AT_REST - 2, noise: 0.05 })],
];

/** null for a channel that is none of the demo's. */
export const influenceOf = (
  { id }: Channel,
  member: Member,
  station: Station,
): Influence | null => {
  for (const [pattern, influence] of PLACES) {
    const match = pattern.exec(id);
    if (match) return influence(match, member, station);
  }
  return null;
};
