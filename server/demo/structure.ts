/**
 * The travelling lift as mechanics, linear in the load in the hook. What is assumed of it:
 * the beams are simply supported on the legs; a two-wheel trolley stands at midspan of each;
 * the hook hangs between the portals, nearer to the first; its slings pull the beams inward.
 */
import {
  deflection,
  fibreStrain,
  moment,
  shear,
  shearStress,
  type Beam,
  type PointLoad,
} from '../../shared/loadtest/beam.ts';
import type { Member } from '../../shared/model/site.ts';
import {
  metre,
  newton,
  newtonMetre,
  strain,
  type Metre,
  type Newton,
  type Strain,
} from '../../shared/model/units.ts';
import { shearModulus } from '../../shared/pipeline/4-stress/stress.ts';

/** Share of the hook's load on each beam: the hook hangs 1.12 m from the first, of 4 m. */
const BEAM_SHARE: Readonly<Record<string, number>> = { B1: 0.72, B2: 0.28 };
/** y of the inward pull: the beams pull toward each other. */
const INWARD: Readonly<Record<string, 1 | -1>> = { B1: 1, B2: -1 };
const BEAM_ON_LEG: Readonly<Record<string, string>> = { L1: 'B1', L2: 'B1', L3: 'B2', L4: 'B2' };
/** Inward pull of the slings on each beam over the hook's load. */
const SIDE_PULL = 0.065;
/** Each of the trolley's two wheels stands so far from midspan. */
const HALF_WHEELBASE = 0.2;
/** The beam sits on its leg so far inside the leg's axis; the leg's foot is pinned. */
const SEAT_OFFSET = 0.15;
/**
 * HE 300 B, EN 10365: web 11 mm; the half section's first moment is half the plastic modulus
 * of the product tables, 1868.67 cm³.
 */
const WEB = { thickness: metre(0.011), firstMoment: 1868.67e-6 / 2 };

const lengthOf = ({ from, to }: Member): Metre =>
  metre(Math.hypot(to[0] - from[0], to[1] - from[1], to[2] - from[2]));

/** Vertical (y–y) or sideways (z–z) bending of a member as a simple beam. */
const beamOf = (member: Member, axis: 'y' | 'z'): Beam => ({
  span: lengthOf(member),
  inertia: axis === 'y' ? member.section.inertiaY : member.section.inertiaZ,
  youngsModulus: member.material.youngsModulus,
});

/** Half of `force` under each wheel. */
const wheels = ({ span }: Beam, force: number): readonly PointLoad[] =>
  [-HALF_WHEELBASE, HALF_WHEELBASE].map((off) => ({
    force: newton(force / 2),
    at: metre(span / 2 + off),
  }));

const sum = (figures: readonly number[]): number => figures.reduce((a, b) => a + b, 0);

/** Downward force of the hook on a beam, N. */
const onBeam = (id: string, hook: Newton): number => (BEAM_SHARE[id] ?? 0) * hook;

/** Strain along a beam at the point (y, z) of its section, `x` from its start; tension positive. */
export const beamStrain = (
  member: Member,
  x: Metre,
  point: { readonly y: Metre; readonly z: Metre },
  hook: Newton,
): Strain => {
  const [upright, sideways] = [beamOf(member, 'y'), beamOf(member, 'z')];
  const pull = (INWARD[member.id] ?? 0) * SIDE_PULL * hook;
  const down = sum(wheels(upright, onBeam(member.id, hook)).map((w) => moment(upright, w, x)));
  const side = sum(wheels(sideways, pull).map((w) => moment(sideways, w, x)));
  // Down is −z: tension at the bottom. A pull toward +y: tension at +y.
  const forces = { axial: newton(0), aboutY: newtonMetre(-down), aboutZ: newtonMetre(-side) };
  return fibreStrain(forces, point, member.section, member.material.youngsModulus);
};

/** Shear strain γxz of a beam's web at half height, `x` from its start. */
export const webShearStrain = (member: Member, x: Metre, hook: Newton): Strain => {
  const beam = beamOf(member, 'y');
  const force = sum(wheels(beam, onBeam(member.id, hook)).map((w) => shear(beam, w, x)));
  const { firstMoment, thickness } = WEB;
  const stress = shearStress(newton(force), firstMoment, beam.inertia, thickness);
  // Left of the load the right angle between x and z opens: the strut from load to support shortens.
  return strain(-stress / shearModulus(member.material));
};

/** Deflection of a beam at `x`, downward positive. */
export const beamDeflection = (member: Member, x: Metre, hook: Newton): Metre => {
  const beam = beamOf(member, 'y');
  return metre(sum(wheels(beam, onBeam(member.id, hook)).map((w) => deflection(beam, w, x))));
};

/** Axial and outer-flange bending strain of a leg, `x` above its foot. */
export const legStrain = (
  leg: Member,
  x: Metre,
  hook: Newton,
): { readonly axial: Strain; readonly bending: Strain } => {
  const reaction = onBeam(BEAM_ON_LEG[leg.id] ?? '', hook) / 2;
  const { section, material } = leg;
  const at = (axial: number, aboutY: number, z: number): Strain =>
    fibreStrain(
      { axial: newton(axial), aboutY: newtonMetre(aboutY), aboutZ: newtonMetre(0) },
      { y: metre(0), z: metre(z) },
      section,
      material.youngsModulus,
    );
  const bending = (reaction * SEAT_OFFSET * x) / lengthOf(leg);
  return { axial: at(-reaction, 0, 0), bending: at(0, bending, section.height / 2) };
};

/** Axial strain of the tie: it holds the portals apart against half of the inward pull. */
export const tieStrain = (tie: Member, hook: Newton): Strain =>
  fibreStrain(
    { axial: newton((-SIDE_PULL * hook) / 2), aboutY: newtonMetre(0), aboutZ: newtonMetre(0) },
    { y: metre(0), z: metre(0) },
    tie.section,
    tie.material.youngsModulus,
  );

/** Share of a leg's thermal curvature, and of its expansion, that its ends do not let happen. */
const [CURVATURE_HELD, EXPANSION_HELD] = [0.5, 0.1];

/** Strain of a leg whose outer flange is 1 K warmer than the inner one: what is held back, ε = α·ΔT/2. */
export const sunStrainPerKelvin = ({ material }: Member) => ({
  bending: (-CURVATURE_HELD * material.expansion) / 2,
  axial: (-EXPANSION_HELD * material.expansion) / 2,
});
