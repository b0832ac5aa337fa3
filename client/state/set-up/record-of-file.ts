/** A calibration record as it stands in a draft, for the formulas of the pipeline. */
import { material as gradeAt } from '../../../shared/catalogue/materials.ts';
import { section as sectionNamed } from '../../../shared/catalogue/sections.ts';
import type {
  BridgeCircuit,
  BridgeResponse,
  Excitation,
  Leads,
  Signal,
} from '../../../shared/model/calibration.ts';
import type { Limit, LimitContext } from '../../../shared/model/limit.ts';
import type { Material, Measurand, Section } from '../../../shared/model/site.ts';
import {
  celsius,
  cubicMetre,
  gigapascalToPascal,
  kilonewtonToNewton,
  megapascalToPascal,
  microstrainToStrain,
  millimetreToMetre,
  millivoltPerVoltToRatio,
  ohm,
  quarticMetre,
  seconds,
  share,
  squareMetre,
  volt,
} from '../../../shared/model/units.ts';
import { CIRCUITS } from '../../../shared/pipeline/3-strain/circuits.ts';
import { stressPerStrain, yieldFor } from '../../../shared/pipeline/4-stress/stress.ts';
import { isMapOf, numberAt, textAt, valueAt, type Json } from './tree.ts';

/** NaN where there is no figure: formulas then give none. */
const figure = (map: Json | undefined, ...path: string[]): number => numberAt(map, ...path) ?? NaN;

const isCircuit = (name: string | null): name is BridgeCircuit =>
  name !== null && Object.hasOwn(CIRCUITS, name);

const leadsOf = (leads: Json | undefined): Leads | null => {
  const resistance = ohm(figure(leads, 'resistance_ohm'));
  switch (textAt(leads, 'kind')) {
    case 'none':
      return { kind: 'none' };
    case 'two-wire':
      return { kind: 'two-wire', resistance, trimmed: valueAt(leads, ['trimmed']) === true };
    case 'three-wire':
      return { kind: 'three-wire', resistance };
    case 'excitation':
      return { kind: 'excitation', resistance };
    default:
      return null;
  }
};

/**
 * The bridge of a record's response, for its output and drawing; null where it is no bridge or not
 * yet told. `poisson` is the material's, where the record has none of its own.
 */
export const bridgeOf = (response: Json | undefined, poisson: number): BridgeResponse | null => {
  const circuit = textAt(response, 'circuit');
  const leads = leadsOf(valueAt(response, ['leads']));
  if (!isCircuit(circuit) || leads === null) return null;
  return {
    ...{ kind: 'bridge', circuit, leads, temperature: null, grid: null },
    gaugeFactor: figure(response, 'gauge_factor'),
    gaugeResistance: ohm(figure(response, 'gauge_resistance_ohm')),
    poisson: numberAt(response, 'poisson') ?? poisson,
    transverseSensitivity: (numberAt(response, 'transverse_sensitivity_percent') ?? 0) / 100,
    zero: millivoltPerVoltToRatio(figure(response, 'zero_mV_per_V')),
  };
};

const excitationOf = (signal: Json | undefined): Excitation => {
  const input = textAt(signal, 'excitation', 'measured_by_input');
  return input === null
    ? { kind: 'stated', volts: volt(figure(signal, 'excitation', 'stated_V')) }
    : { kind: 'measured', input };
};

/** What the node's figure is; null: not yet told. */
export const signalOf = (signal: Json | undefined): Signal | null => {
  const zeroCount = figure(signal, 'zero_count');
  switch (textAt(signal, 'kind')) {
    case 'ratio':
      return { kind: 'ratio' };
    case 'direct':
      return { kind: 'direct' };
    case 'volts':
      return { kind: 'volts', excitation: excitationOf(signal) };
    case 'counts-as-ratio': {
      const perCount = millivoltPerVoltToRatio(figure(signal, 'mV_per_V_per_count'));
      return { kind: 'counts', as: 'ratio', perCount, zeroCount };
    }
    case 'counts-as-volts': {
      const perCount = figure(signal, 'microvolt_per_count') / 1e6;
      const excitation = excitationOf(signal);
      return { kind: 'counts', as: 'volts', perCount, zeroCount, excitation };
    }
    default:
      return null;
  }
};

/** The section of a member in a draft; a text says why there is none. */
export const sectionOf = (member: Json | undefined): Section | string => {
  const own = valueAt(member, ['section']);
  if (typeof own === 'string') {
    const known = sectionNamed(own);
    return known.ok ? known.value : known.expected;
  }
  if (!isMapOf(own)) return 'a section';
  return {
    ...{ designation: textAt(own, 'name') ?? '', source: textAt(own, 'source') ?? '' },
    height: millimetreToMetre(figure(own, 'height_mm')),
    width: millimetreToMetre(figure(own, 'width_mm')),
    area: squareMetre(figure(own, 'area_cm2') * 1e-4),
    inertiaY: quarticMetre(figure(own, 'inertia_y_cm4') * 1e-8),
    inertiaZ: quarticMetre(figure(own, 'inertia_z_cm4') * 1e-8),
    modulusY: cubicMetre(figure(own, 'modulus_y_cm3') * 1e-6),
    modulusZ: cubicMetre(figure(own, 'modulus_z_cm3') * 1e-6),
    thickness: millimetreToMetre(figure(own, 'thickness_mm')),
  };
};

/** The material of a member in a draft at its thickness; a text says why there is none. */
export const materialOf = (member: Json | undefined): Material | string => {
  const own = valueAt(member, ['material']);
  if (typeof own === 'string') {
    const stated = numberAt(member, 'thickness_mm');
    const section = sectionOf(member);
    const thickness =
      stated !== null
        ? millimetreToMetre(stated)
        : typeof section === 'string'
          ? null
          : section.thickness;
    if (thickness === null) return 'a section or a thickness first';
    const known = gradeAt(own, thickness);
    return known.ok ? known.value : known.expected;
  }
  if (!isMapOf(own)) return 'a material';
  return {
    ...{ designation: textAt(own, 'name') ?? '', source: textAt(own, 'source') ?? '' },
    youngsModulus: gigapascalToPascal(figure(own, 'youngs_modulus_GPa')),
    poisson: figure(own, 'poisson'),
    expansion: microstrainToStrain(figure(own, 'expansion_microstrain_per_K')),
    yieldStrength: megapascalToPascal(figure(own, 'yield_MPa')),
  };
};

/** What limits of a channel on this material are judged by. */
export const contextOf = (
  measurand: Measurand,
  material: Material | null,
  highestLimit: number,
): LimitContext => ({
  measurand,
  stressPerStrain: material && stressPerStrain(measurand, material),
  yieldStrength: material && yieldFor(measurand, material),
  highestLimit: share(highestLimit),
});

const LIMITS: Readonly<Record<string, (n: number) => Pick<Limit, 'basis' | 'value'>>> = {
  share_of_yield: (n) => ({ basis: 'share', value: share(n) }),
  stress_MPa: (n) => ({ basis: 'stress', value: megapascalToPascal(n) }),
  strain_microstrain: (n) => ({ basis: 'strain', value: microstrainToStrain(n) }),
  force_kN: (n) => ({ basis: 'value', value: kilonewtonToNewton(n) }),
  displacement_mm: (n) => ({ basis: 'value', value: millimetreToMetre(n) }),
  temperature_Cel: (n) => ({ basis: 'value', value: celsius(n) }),
};

/** A limit of a draft, without its deadband; null where it is not told. */
export const limitOf = (limit: Json | undefined): Limit | null => {
  const level = textAt(limit, 'level');
  const read = LIMITS[textAt(limit, 'basis') ?? ''];
  const value = numberAt(limit, 'value');
  if (!read || value === null || (level !== 'caution' && level !== 'stop')) return null;
  return { level, ...read(value), deadband: 0, onDelay: seconds(0) };
};
