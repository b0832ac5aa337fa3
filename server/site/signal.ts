import type { Excitation, Signal } from '../../shared/model/calibration.ts';
import type { InputUnit } from '../../shared/model/site.ts';
import { volt } from '../../shared/model/units.ts';
import { signalFault } from '../../shared/pipeline/2-ratio/signal.ts';
import type { NodeEntry } from './nodes.ts';
import type { Reading } from './reading.ts';

type ExcitationOfFile = { readonly stated_V?: number; readonly measured_by_input?: string };

type SignalOfFile =
  | { readonly kind: 'ratio' | 'direct' }
  | { readonly kind: 'volts'; readonly excitation: ExcitationOfFile }
  | {
      readonly kind: 'counts-as-ratio';
      readonly mV_per_V_per_count: number;
      readonly zero_count: number;
    }
  | {
      readonly kind: 'counts-as-volts';
      readonly microvolt_per_count: number;
      readonly zero_count: number;
      readonly excitation: ExcitationOfFile;
    };

/** What a figure in each unit can be. */
const KINDS: Readonly<Record<InputUnit, readonly SignalOfFile['kind'][]>> = {
  '/': ['ratio'],
  V: ['volts', 'direct'],
  count: ['counts-as-ratio', 'counts-as-volts', 'direct'],
  Cel: ['direct'],
  N: ['direct'],
  m: ['direct'],
};

const excitationOf = ({ stated_V, measured_by_input }: ExcitationOfFile): Excitation =>
  measured_by_input === undefined
    ? { kind: 'stated', volts: volt(stated_V ?? NaN) }
    : { kind: 'measured', input: measured_by_input };

const signalOf = (file: SignalOfFile): Signal => {
  switch (file.kind) {
    case 'ratio':
    case 'direct':
      return { kind: file.kind };
    case 'volts':
      return { kind: 'volts', excitation: excitationOf(file.excitation) };
    case 'counts-as-ratio': {
      const { mV_per_V_per_count, zero_count: zeroCount } = file;
      return { kind: 'counts', as: 'ratio', perCount: mV_per_V_per_count / 1e3, zeroCount };
    }
    case 'counts-as-volts': {
      const { microvolt_per_count, zero_count: zeroCount } = file;
      const excitation = excitationOf(file.excitation);
      return {
        kind: 'counts',
        as: 'volts',
        perCount: microvolt_per_count / 1e6,
        zeroCount,
        excitation,
      };
    }
  }
};

const checkMeasuredExcitation = (
  reading: Reading,
  at: string,
  ownInput: string | undefined,
  node: NodeEntry | undefined,
) => {
  const measured = `${at}/excitation/measured_by_input`;
  if (!reading.has(measured)) return;
  const unit = node?.inputs.refer(measured)?.unit;
  if (unit !== undefined && unit !== 'V')
    reading.fault(measured, 'an input in V', `one in ${unit}`);
  if (ownInput !== undefined && reading.value<string>(measured) === ownInput) {
    reading.faultAt(measured, "another input than the channel's own");
  }
};

/** A signal that its input can give; null where something is at fault. */
export const readSignal = (
  reading: Reading,
  at: string,
  input: { readonly name: string | undefined; readonly unit: InputUnit | undefined },
  node: NodeEntry | undefined,
): Signal | null => {
  checkMeasuredExcitation(reading, at, input.name, node);
  const kind = reading.value<SignalOfFile['kind']>(`${at}/kind`);
  if (kind !== undefined && input.unit !== undefined && !KINDS[input.unit].includes(kind)) {
    const kinds = KINDS[input.unit].join(', ');
    reading.faultAt(`${at}/kind`, `${kinds} with an input in ${input.unit}`);
    return null;
  }
  const file = reading.value<SignalOfFile>(at);
  if (!file) return null;
  const signal = signalOf(file);
  const fault = signalFault(signal);
  if (fault) reading.fault(`${at}/zero_count`, fault.expected, fault.came);
  return signal;
};
