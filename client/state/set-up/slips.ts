/** The usual slips: questions to the person who types, never refusals. */
import type { BridgeResponse } from '../../../shared/model/calibration.ts';
import { apply, chain, inverse } from '../../../shared/model/fractional-linear.ts';
import { MEASURANDS } from '../../../shared/model/site.ts';
import { pascalToMegapascal, strain, strainToMicrostrain } from '../../../shared/model/units.ts';
import { signalMap } from '../../../shared/pipeline/2-ratio/signal.ts';
import { bridgeOutput } from '../../../shared/pipeline/3-strain/bridge.ts';
import { stressOf } from '../../../shared/pipeline/4-stress/stress.ts';
import { thresholdOf } from '../../../shared/pipeline/5-alarm/threshold.ts';
import { figureWithUnit, unitOf } from './figures.ts';
import { bridgeOf, contextOf, limitOf, materialOf, signalOf } from './record-of-file.ts';
import { channelPlaces, inputOf, type ChannelPlace } from './site-walk.ts';
import {
  isSame,
  listAt,
  numberAt,
  pathOf,
  pointerOf,
  textAt,
  valueAt,
  type Json,
  type Path,
} from './tree.ts';

export interface Slip {
  /** The rule. */
  readonly code: string;
  /** JSON pointer of the figure. */
  readonly at: string;
  readonly question: string;
}

/** Usual figures. Common practice, no source, where none is named. */
export const USUAL = {
  /**
   * Gauge factor of metal foil; constantan about 2.05, karma about 2.1. Common practice, no
   * source.
   */
  foilFactor: [1.8, 2.3],
  /** From here on it is a semiconductor's: another trade, no slip. Common practice, no source. */
  semiconductorFactor: 40,
  /** Excitation of foil gauges, V: from here on it looks like mV. Common practice, no source. */
  highestExcitation: 24,
  /** Below it looks like a figure of another unit, V. Common practice, no source. */
  lowestExcitation: 0.5,
  /** Nominal resistances of gauges, Ω, and how far off they still are one. Common practice. */
  resistances: [120, 175, 350, 1000],
  resistanceShare: 0.05,
  /** Of one conductor, Ω: about 40 m of 0.14 mm² copper (0.123 Ω/m, IEC 60028). */
  highestLead: 5,
  /** Transverse sensitivity, %; foil gauges lie within ±2 %, ASTM E251. Value from memory. */
  highestTransverse: 10,
  /** A stop limit of so small a stress, MPa, looks like a figure of another unit. */
  lowestStress: 50,
} as const;

const text = (n: number): string => String(Number(n.toPrecision(4)));

interface RecordPlace extends ChannelPlace {
  readonly site: Json;
  readonly recordPath: Path;
  readonly record: Json;
}

type Rule = (place: RecordPlace) => Slip[];

const slip = (code: string, path: Path, question: string): Slip => ({
  code,
  at: pointerOf(path),
  question,
});

const gaugeFactor: Rule = ({ record, recordPath }) => {
  const factor = numberAt(record, 'response', 'gauge_factor');
  const [low, high] = USUAL.foilFactor;
  if (factor === null || (factor >= low && factor <= high)) return [];
  if (factor >= USUAL.semiconductorFactor) return [];
  const question = `Foil gauges have a gauge factor of ${low} to ${high}; this is ${text(factor)}. Is it what the packet says?`;
  return [slip('gauge-factor', [...recordPath, 'response', 'gauge_factor'], question)];
};

const excitation: Rule = ({ record, recordPath }) => {
  const volts = numberAt(record, 'signal', 'excitation', 'stated_V');
  if (volts === null) return [];
  const at = ['signal', 'excitation', 'stated_V'] as const;
  if (volts > USUAL.highestExcitation) {
    const question = `Excitation of ${text(volts)} V is more than a bonded gauge stands. Is it mV, or another figure?`;
    return [slip('excitation', [...recordPath, ...at], question)];
  }
  if (volts < USUAL.lowestExcitation) {
    const question = `Excitation of ${text(volts)} V is less than any instrument gives. Is it in V?`;
    return [slip('excitation', [...recordPath, ...at], question)];
  }
  return [];
};

const near = (a: number, b: number): boolean => Math.abs(a - b) <= b * USUAL.resistanceShare;

const unusualResistance: Rule = ({ record, recordPath }) => {
  const resistance = numberAt(record, 'response', 'gauge_resistance_ohm');
  if (resistance === null || USUAL.resistances.some((usual) => near(resistance, usual))) return [];
  const question = `Gauges have ${USUAL.resistances.join(', ')} Ω as a rule; this is ${text(resistance)} Ω. Is it what the packet says?`;
  return [
    slip('resistance-unusual', [...recordPath, 'response', 'gauge_resistance_ohm'], question),
  ];
};

/** Gauges at one station and of one circuit come out of one packet, as a rule. */
const neighbourResistance: Rule = ({ record, recordPath, station, channel }) => {
  const resistance = numberAt(record, 'response', 'gauge_resistance_ohm');
  const circuit = textAt(record, 'response', 'circuit');
  if (resistance === null) return [];
  const others = listAt(station, 'channels').flatMap((other) => {
    if (other === channel) return [];
    const last = listAt(other, 'calibration').at(-1);
    const its = numberAt(last, 'response', 'gauge_resistance_ohm');
    return its !== null && textAt(last, 'response', 'circuit') === circuit
      ? [{ id: textAt(other, 'id') ?? '', its }]
      : [];
  });
  const differing = others.filter(({ its }) => !near(resistance, its));
  const [first] = differing;
  if (!first || differing.length < others.length) return [];
  const question = `${first.id} beside it has ${text(first.its)} Ω, this gauge ${text(resistance)} Ω. Do they differ?`;
  return [
    slip('resistance-neighbours', [...recordPath, 'response', 'gauge_resistance_ohm'], question),
  ];
};

const leads: Rule = ({ record, recordPath }) => {
  const kind = textAt(record, 'response', 'leads', 'kind');
  const resistance = numberAt(record, 'response', 'leads', 'resistance_ohm');
  const at = ['response', 'leads', 'resistance_ohm'] as const;
  if (resistance === null) return [];
  if (resistance > USUAL.highestLead) {
    const question = `${text(resistance)} Ω is a long or thin conductor. Is it of one conductor, and in Ω?`;
    return [slip('lead-high', [...recordPath, ...at], question)];
  }
  if (resistance === 0 && kind === 'two-wire') {
    const question =
      'With two wires their resistance lies in the arm. Are they really without any?';
    return [slip('lead-zero', [...recordPath, ...at], question)];
  }
  return [];
};

const transverse: Rule = ({ record, recordPath }) => {
  const percent = numberAt(record, 'response', 'transverse_sensitivity_percent');
  if (percent === null || Math.abs(percent) <= USUAL.highestTransverse) return [];
  const question = `Transverse sensitivity of ${text(percent)} % is beyond that of foil gauges. Is it in %?`;
  return [
    slip('transverse', [...recordPath, 'response', 'transverse_sensitivity_percent'], question),
  ];
};

const measurandOf = (channel: Json) =>
  MEASURANDS.find((one) => one === textAt(channel, 'measurand')) ?? null;

const contextAt = ({ site, member, channel }: Pick<RecordPlace, 'site' | 'member' | 'channel'>) => {
  const material = materialOf(member);
  const measurand = measurandOf(channel);
  if (typeof material === 'string' || measurand === null) return null;
  return contextOf(measurand, material, numberAt(site, 'highest_limit_share_of_yield') ?? NaN);
};

/** Limits of the channel, or those of the site. */
const limitsAt = (site: Json, channel: Json): readonly Json[] =>
  valueAt(channel, ['limits']) === undefined
    ? listAt(site, 'default_limits')
    : listAt(channel, 'limits');

/** V/V of the bridge to the raw figure of the input. */
const rawAt = (record: Json, bridge: BridgeResponse, value: number): number | null => {
  const signal = signalOf(valueAt(record, ['signal']));
  if (signal === null || signal.kind === 'direct') return null;
  if ('excitation' in signal && signal.excitation.kind === 'measured') return null;
  return apply(chain(bridgeOutput(bridge), inverse(signalMap(signal))), value);
};

const rawText = (raw: number, input: Json | undefined): string =>
  figureWithUnit(Number(raw.toPrecision(4)), unitOf('range', input), 'si').replace('-', '\u2212');

/** At the stop limit the input must still see what comes. */
const inputRange: Rule = ({ site, record, recordPath, channel, member }) => {
  const [low, high] = listAt(inputOf(site, channel), 'range');
  const context = contextAt({ site, member, channel });
  const material = materialOf(member);
  if (typeof low !== 'number' || typeof high !== 'number' || typeof material === 'string')
    return [];
  const bridge = bridgeOf(valueAt(record, ['response']), material.poisson);
  const stop = limitsAt(site, channel)
    .map(limitOf)
    .find((limit) => limit?.level === 'stop');
  if (!bridge || !stop || !context) return [];
  const threshold = thresholdOf(stop, context).raise;
  const ends = [threshold, -threshold].map((value) => rawAt(record, bridge, value));
  const outside = ends.find((raw) => raw !== null && (raw <= low || raw >= high));
  if (outside === undefined || outside === null) return [];
  const micro = text(strainToMicrostrain(strain(threshold)));
  const input = inputOf(site, channel);
  const [seen, from, to] = [outside, low, high].map((raw) => rawText(raw, input));
  const question = `At the stop limit (${micro} µε) the input would read ${seen}, beyond its range of ${from} to ${to}: over range before the alarm. Is that meant?`;
  return [slip('input-range', [...recordPath, 'response'], question)];
};

const RECORD_RULES: readonly Rule[] = [
  gaugeFactor,
  excitation,
  unusualResistance,
  neighbourResistance,
  leads,
  transverse,
  inputRange,
];

/** A stop limit of so little stress is a figure in MPa typed as µε, as a rule. */
const limitSlips = (site: Json, { path, channel, member }: ChannelPlace): Slip[] =>
  listAt(channel, 'limits').flatMap((limit, i): Slip[] => {
    const context = contextAt({ site, member, channel });
    const read = limitOf(limit);
    if (!read || !context || context.stressPerStrain === null || read.basis === 'share') return [];
    const stress = stressOf(strain(thresholdOf(read, context).raise), context.stressPerStrain);
    const megapascal = pascalToMegapascal(stress);
    const value = numberAt(limit, 'value') ?? NaN;
    if (read.level !== 'stop' || megapascal >= USUAL.lowestStress) return [];
    const unit = read.basis === 'strain' ? 'µε' : 'MPa';
    const other =
      read.basis === 'strain' ? `${text(value)} MPa or ${text(value)} % of yield` : 'ksi';
    const question = `A stop limit of ${text(value)} ${unit} is a stress of only ${text(megapascal)} MPa. Is ${other} meant?`;
    return [slip('limit-unit', [...path, 'limits', String(i), 'value'], question)];
  });

/** All questions that a set-up raises. Of the calibration records, those that no other corrects. */
export const slipsOf = (site: Json): Slip[] =>
  channelPlaces(site).flatMap((place) => {
    const records = listAt(place.channel, 'calibration');
    const corrected = new Set(records.map((record) => textAt(record, 'corrects')));
    const ofRecords = records.flatMap((record, i) =>
      corrected.has(textAt(record, 'id'))
        ? []
        : RECORD_RULES.flatMap((rule) => {
            const recordPath = [...place.path, 'calibration', String(i)];
            return rule({ ...place, site, record, recordPath });
          }),
    );
    return [...ofRecords, ...limitSlips(site, place)];
  });

/** The same question about the same thing, to be answered once. */
export const slipKey = ({ code, question, at }: Slip): string => `${code} ${at} ${question}`;

const isUntouched = (stands: Json, draft: Json, at: string): boolean => {
  const path = pathOf(at);
  const record = path.slice(0, path.indexOf('response'));
  return isSame(valueAt(stands, record), valueAt(draft, record));
};

/**
 * Questions that the draft raises and what stands did not (`before`: its questions); of two gauges
 * that differ, the new one is asked about.
 */
export const newSlips = (stands: Json, before: readonly Slip[], draft: Json): Slip[] => {
  const old = new Set(before.map(slipKey));
  return slipsOf(draft).filter(
    (one) =>
      !old.has(slipKey(one)) &&
      !(one.code === 'resistance-neighbours' && isUntouched(stands, draft, one.at)),
  );
};
