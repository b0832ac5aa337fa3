import type { Limit, LimitContext } from '../../shared/model/limit.ts';
import type { RosetteLayout, RosetteQuantity } from '../../shared/model/rosette.ts';
import type { Material, Measurand, VirtualChannel } from '../../shared/model/site.ts';
import { millimetreToMetre } from '../../shared/model/units.ts';
import type { Definition, SectionQuantity } from '../../shared/model/virtual.ts';
import { limitContextFor } from '../../shared/pipeline/plan.ts';
import { fitPlane } from '../../shared/pipeline/4-stress/plane-fit.ts';
import type { SiteContext } from './channels.ts';
import { expressionFault } from './expression.ts';
import { readLimits } from './limits.ts';
import type { Reading } from './reading.ts';

type DefinitionOfFile =
  | {
      readonly kind: 'rosette';
      readonly layout: RosetteLayout;
      readonly gauges: readonly [string, string, string];
      readonly quantity: RosetteQuantity;
    }
  | {
      readonly kind: 'section';
      readonly gauges: readonly {
        readonly channel: string;
        readonly y_mm: number;
        readonly z_mm: number;
      }[];
      readonly quantity: SectionQuantity;
    }
  | { readonly kind: 'mean'; readonly of: readonly string[] }
  | { readonly kind: 'difference'; readonly of: readonly [string, string] }
  | {
      readonly kind: 'expression';
      readonly text: string;
      readonly names: Readonly<Record<string, string>>;
      readonly measurand: Measurand;
    };

const definitionOf = (file: DefinitionOfFile): Definition => {
  switch (file.kind) {
    case 'section':
      return {
        ...{ kind: 'section', quantity: file.quantity },
        gauges: file.gauges.map(({ channel, y_mm, z_mm }) => ({
          ...{ channel, y: millimetreToMetre(y_mm), z: millimetreToMetre(z_mm) },
        })),
      };
    case 'expression':
      return { kind: 'expression', text: file.text, names: file.names };
    case 'rosette':
    case 'mean':
    case 'difference':
      return file;
  }
};

const SECTION_MEASURANDS: Readonly<Record<SectionQuantity, Measurand>> = {
  axial: 'force',
  'about-y': 'moment',
  'about-z': 'moment',
  residual: 'strain',
  'highest-stress': 'stress',
  'lowest-stress': 'stress',
};

const rosetteMeasurand = (quantity: RosetteQuantity): Measurand => {
  if (quantity === 'angle') return 'angle';
  return quantity.includes('strain') ? 'strain' : 'stress';
};

/** Pointers of the ids that a definition names, and what each has to measure; undefined: alike. */
const references = (
  at: string,
  file: DefinitionOfFile,
): { readonly pointer: string; readonly wanted: Measurand | undefined }[] => {
  switch (file.kind) {
    case 'rosette':
      return file.gauges.map((_, i) => ({ pointer: `${at}/gauges/${i}`, wanted: 'strain' }));
    case 'section':
      return file.gauges.map((_, i) => ({
        pointer: `${at}/gauges/${i}/channel`,
        wanted: 'strain',
      }));
    case 'mean':
    case 'difference':
      return file.of.map((_, i) => ({ pointer: `${at}/of/${i}`, wanted: undefined }));
    case 'expression':
      return Object.keys(file.names).map((name) => ({
        pointer: `${at}/names/${name}`,
        wanted: undefined,
      }));
  }
};

/** What a definition measures, once what it comes from is known; undefined: at fault. */
const measurandOf = (
  reading: Reading,
  at: string,
  file: DefinitionOfFile,
  sources: readonly (Measurand | undefined)[],
): Measurand | undefined => {
  switch (file.kind) {
    case 'rosette':
      return rosetteMeasurand(file.quantity);
    case 'section':
      return SECTION_MEASURANDS[file.quantity];
    case 'mean':
    case 'difference': {
      const [first] = sources;
      const other = sources.findIndex((one) => one !== undefined && one !== first);
      if (first === undefined || other < 0) return first;
      reading.fault(`${at}/of/${other}`, `a channel of ${first}`, `one of ${sources[other]}`);
      return undefined;
    }
    case 'expression': {
      const names = Object.keys(file.names);
      const known: Record<string, Measurand> = {};
      names.forEach((name, i) => {
        const measurand = sources[i];
        if (measurand !== undefined) known[name] = measurand;
      });
      if (Object.keys(known).length < names.length) return undefined;
      const fault = expressionFault(file.text, known, file.measurand);
      if (fault) reading.fault(`${at}/text`, fault.expected, fault.came);
      return file.measurand;
    }
  }
};

const checkSection = (reading: Reading, at: string, definition: Definition) => {
  if (definition.kind !== 'section') return;
  const fit = fitPlane(definition.gauges);
  if (!fit.ok) reading.fault(`${at}/gauges`, fit.refusal.expected, fit.refusal.came);
};

/**
 * A virtual channel of a station, to be finished when every channel is known: in the order of the
 * file, so that it may come from virtual channels before it, and from no circle.
 */
export const readVirtual = (
  reading: Reading,
  at: string,
  structure: string,
  material: Material | null,
  site: SiteContext,
): (() => VirtualChannel[]) => {
  const entry: { measurand: Measurand | undefined; structure: string; pending: boolean } = {
    ...{ measurand: undefined, structure, pending: true },
  };
  site.channels.add(`${at}/id`, entry);
  return () => {
    const where = `${at}/definition`;
    const file = reading.value<DefinitionOfFile>(where);
    if (!file) return [];
    const sources = references(where, file).map(({ pointer, wanted }) => {
      const source = site.channels.refer(pointer);
      if (source?.pending) {
        reading.faultAt(
          pointer,
          'a channel that stands before this one, so that there is no circle',
        );
      }
      const measurand = source?.measurand;
      if (wanted !== undefined && measurand !== undefined && measurand !== wanted) {
        reading.fault(pointer, `a ${wanted} channel`, `one of ${measurand}`);
      }
      return measurand;
    });
    const measurand = measurandOf(reading, where, file, sources);
    entry.measurand = measurand;
    entry.pending = false;
    const definition = definitionOf(file);
    checkSection(reading, where, definition);
    const id = reading.value<string>(`${at}/id`);
    const name = reading.value<string>(`${at}/name`);
    if (id === undefined || name === undefined || measurand === undefined) return [];
    const channel = { kind: 'virtual', id, name, measurand, definition } as const;
    const context = contextOf({ ...channel, limits: [] }, material, site);
    const limits: readonly Limit[] = reading.has(`${at}/limits`)
      ? readLimits(reading, `${at}/limits`, measurand, context)
      : [];
    return [{ ...channel, limits }];
  };
};

const contextOf = (
  channel: VirtualChannel,
  material: Material | null,
  { highestLimit }: SiteContext,
): LimitContext | null =>
  material && highestLimit !== null ? limitContextFor(channel, material, highestLimit) : null;
