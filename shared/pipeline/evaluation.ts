/** What a virtual channel makes of the channels that it comes from. */
import type { Material, Member, VirtualChannel } from '../model/site.ts';
import type { SectionQuantity } from '../model/virtual.ts';
import { transverseMatrix } from './3-strain/transverse.ts';
import { fillExtremeStress } from './4-stress/extreme-fibre.ts';
import { fillResidualDeviation } from './4-stress/plane-fit.ts';
import { fillRosette, planRosette } from './4-stress/rosette.ts';
import { fillSectionForce, planSection, type SectionPlan } from './4-stress/section-forces.ts';
import { fillWeighted } from './4-stress/weighted.ts';

/** Columns of the sources' values, all of one length, to values of that length; SI. */
export type Evaluate = (columns: readonly Float64Array[], out: Float64Array) => void;

/** An expression's text to its evaluation; columns in the order of `names`. */
export type CompileExpression = (text: string, names: readonly string[]) => Evaluate;

const toNothing: Evaluate = (_columns, out) => void out.fill(NaN);

const COLUMN_LESS = new Float64Array(0);

const sectionEvaluation = (plan: SectionPlan, quantity: SectionQuantity): Evaluate => {
  switch (quantity) {
    case 'axial':
      return (columns, out) => fillSectionForce(plan, 'axial', columns, out);
    case 'about-y':
      return (columns, out) => fillSectionForce(plan, 'aboutY', columns, out);
    case 'about-z':
      return (columns, out) => fillSectionForce(plan, 'aboutZ', columns, out);
    case 'residual':
      return (columns, out) => fillResidualDeviation(plan.fit, columns, out);
    case 'highest-stress':
    case 'lowest-stress': {
      const side = quantity === 'highest-stress' ? 'highest' : 'lowest';
      return (columns, out) => {
        const forces = [out.length, out.length, out.length].map((n) => new Float64Array(n));
        const [axial = COLUMN_LESS, aboutY = COLUMN_LESS, aboutZ = COLUMN_LESS] = forces;
        fillSectionForce(plan, 'axial', columns, axial);
        fillSectionForce(plan, 'aboutY', columns, aboutY);
        fillSectionForce(plan, 'aboutZ', columns, aboutZ);
        fillExtremeStress(side, plan.section, axial, aboutY, aboutZ, out);
      };
    }
  }
};

/** `transverse`: Kt of each source, 0 where it has none. NaN throughout where a section is no plane. */
export const evaluation = (
  { definition }: VirtualChannel,
  { section, material }: { readonly section: Member['section']; readonly material: Material },
  transverse: readonly number[],
  compile: CompileExpression,
): Evaluate => {
  switch (definition.kind) {
    case 'rosette': {
      const [a = 0, b = 0, c = 0] = transverse;
      const correction = a || b || c ? transverseMatrix(definition.layout, [a, b, c]) : null;
      const plan = planRosette(definition.layout, material, correction);
      const empty = COLUMN_LESS;
      return ([x = empty, y = empty, z = empty], out) =>
        fillRosette(plan, definition.quantity, x, y, z, out);
    }
    case 'section': {
      const plan = planSection(definition.gauges, section, material.youngsModulus);
      return plan.ok ? sectionEvaluation(plan.value, definition.quantity) : toNothing;
    }
    case 'mean': {
      const weights = definition.of.map(() => 1 / definition.of.length);
      return (columns, out) => fillWeighted(weights, columns, out);
    }
    case 'difference':
      return (columns, out) => fillWeighted([1, -1], columns, out);
    case 'expression':
      return compile(definition.text, Object.keys(definition.names));
  }
};
