import type {
  BridgeCircuit,
  CalibrationRecord,
  Excitation,
  Leads,
  Signal,
} from '../../shared/model/calibration.ts';
import { MEASURAND_UNITS, type Measurand } from '../../shared/model/site.ts';
import { ratioToMillivoltPerVolt } from '../../shared/model/units.ts';
import { decimalText } from './number-text.ts';

export interface Line {
  readonly what: string;
  readonly text: string;
}

const CIRCUITS: Readonly<Record<BridgeCircuit, string>> = {
  quarter: 'quarter bridge',
  'half-poisson': 'half bridge, lengthwise and crosswise gauge',
  'half-bending': 'half bridge, bending',
  'half-opposite': 'half bridge, opposite arms',
  'full-bending': 'full bridge, bending',
  'full-bending-poisson': 'full bridge, bending with crosswise pair',
  'full-axial-poisson': 'full bridge, axial with crosswise pair',
  'full-torsion': 'full bridge, gauges at ±45°',
};

const significant = (value: number): string => String(Number(value.toPrecision(6)));

const excitationText = (excitation: Excitation): string =>
  excitation.kind === 'stated'
    ? `stated, ${significant(excitation.volts)} V`
    : `measured by input ${excitation.input}`;

const leadsText = (leads: Leads): string => {
  switch (leads.kind) {
    case 'none':
      return 'none worth counting';
    case 'two-wire':
      return `2 wires, ${significant(leads.resistance)} Ω each, adjacent arm ${leads.trimmed ? 'trimmed' : 'not trimmed'}`;
    case 'three-wire':
      return `3 wires, ${significant(leads.resistance)} Ω each`;
    case 'excitation':
      return `supply through ${significant(leads.resistance)} Ω each way`;
  }
};

const signalLines = (signal: Signal): Line[] => {
  switch (signal.kind) {
    case 'ratio':
      return [{ what: 'Node sends', text: 'bridge output, V/V' }];
    case 'direct':
      return [{ what: 'Node sends', text: 'the figure itself, or its signal' }];
    case 'volts':
      return [
        { what: 'Node sends', text: 'volts' },
        { what: 'Excitation', text: excitationText(signal.excitation) },
      ];
    case 'counts':
      return [
        {
          what: 'Node sends',
          text: `counts from ${signal.zeroCount}, ${signal.perCount.toExponential(4)} ${signal.as === 'volts' ? 'V' : 'V/V'} each`,
        },
        ...(signal.as === 'volts'
          ? [{ what: 'Excitation', text: excitationText(signal.excitation) }]
          : []),
      ];
  }
};

/** A calibration record in words, as figures of the record itself. */
export const calibrationLines = (record: CalibrationRecord, measurand: Measurand): Line[] => {
  const { response } = record;
  if (response.kind === 'linear') {
    return [
      ...signalLines(record.signal),
      {
        what: 'Response',
        text: `straight line, ${significant(response.perUnit)} per ${measurand === 'temperature' ? '°C' : MEASURAND_UNITS[measurand]}`,
      },
      { what: 'Zero', text: significant(response.zero) },
    ];
  }
  return [
    { what: 'Bridge', text: CIRCUITS[response.circuit] },
    { what: 'Gauge factor', text: significant(response.gaugeFactor) },
    { what: 'Gauge resistance', text: `${significant(response.gaugeResistance)} Ω` },
    { what: 'Poisson’s ratio', text: significant(response.poisson) },
    { what: 'Leads', text: leadsText(response.leads) },
    { what: 'Zero', text: `${decimalText(ratioToMillivoltPerVolt(response.zero), 4)} mV/V` },
    ...signalLines(record.signal),
  ];
};
