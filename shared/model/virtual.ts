import type { RosetteLayout, RosetteQuantity } from './rosette.ts';
import type { Metre } from './units.ts';

/** A strain channel and where in the section its gauge lies, from the centroid: y to the side, z up. */
export interface SectionGauge {
  readonly channel: string;
  readonly y: Metre;
  readonly z: Metre;
}

/**
 * N in N; My, Mz in N·m; the standard deviation of the gauges about a plane in m/m; the most
 * tensile and the most compressive stress of the section's corners in Pa.
 */
export const SECTION_QUANTITIES = [
  'axial',
  'about-y',
  'about-z',
  'residual',
  'highest-stress',
  'lowest-stress',
] as const;
export type SectionQuantity = (typeof SECTION_QUANTITIES)[number];

/** How a virtual channel comes from others. Channels are named by their id. */
export type Definition =
  | {
      readonly kind: 'rosette';
      readonly layout: RosetteLayout;
      /** a, b, c, numbered counter-clockwise. */
      readonly gauges: readonly [string, string, string];
      readonly quantity: RosetteQuantity;
    }
  | {
      readonly kind: 'section';
      readonly gauges: readonly SectionGauge[];
      readonly quantity: SectionQuantity;
    }
  | { readonly kind: 'mean'; readonly of: readonly string[] }
  /** The first less the second. */
  | { readonly kind: 'difference'; readonly of: readonly [string, string] }
  /** Names in the text stand for channels, with their SI units. */
  | {
      readonly kind: 'expression';
      readonly text: string;
      readonly names: Readonly<Record<string, string>>;
    };

/** Ids of the channels that it comes from; the first one's samples say when it has values. */
export const sourcesOf = (definition: Definition): readonly string[] => {
  switch (definition.kind) {
    case 'rosette':
      return definition.gauges;
    case 'section':
      return definition.gauges.map(({ channel }) => channel);
    case 'mean':
    case 'difference':
      return definition.of;
    case 'expression':
      return Object.values(definition.names);
  }
};
