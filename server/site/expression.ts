import { createRequire } from 'node:module';
import type * as MathJs from 'mathjs';
import type { MathJsInstance, MathNode, Unit } from 'mathjs';
import type { Measurand } from '../../shared/model/site.ts';
import type { CompileExpression } from '../../shared/pipeline/evaluation.ts';

interface Arithmetic {
  readonly math: MathJsInstance;
  readonly parse: (text: string) => MathNode;
}

const refuse = () => {
  throw new Error('is not available');
};

/**
 * A large library, so it is loaded with the first expression. What would reach out of an expression
 * is taken away, as the library's documentation advises.
 */
const load = (): Arithmetic => {
  const { create, all } = createRequire(import.meta.url)('mathjs') as typeof MathJs;
  const math = create(all ?? {});
  const parse = math.parse.bind(math);
  math.import(
    {
      ...{ import: refuse, createUnit: refuse, evaluate: refuse, parse: refuse, simplify: refuse },
      ...{ derivative: refuse, resolve: refuse, reviver: refuse },
    },
    { override: true },
  );
  return { math, parse: (text) => parse(text) };
};

let loaded: Arithmetic | null = null;
const arithmetic = (): Arithmetic => (loaded ??= load());

/** How an expression reads each measurand: strain, angles and numbers are bare. */
const UNIT_OF: Readonly<Record<Measurand, string | null>> = {
  strain: null,
  shear: null,
  number: null,
  angle: null,
  force: 'N',
  displacement: 'm',
  temperature: 'K',
  stress: 'Pa',
  moment: 'N m',
};

export const LONGEST_EXPRESSION = 500;

const FUNCTIONS: readonly string[] = [
  ...['abs', 'sqrt', 'sign', 'min', 'max', 'mean', 'sin', 'cos', 'tan', 'atan2'],
  ...['exp', 'log', 'pow'],
];
const NODES: readonly string[] = [
  ...['OperatorNode', 'ParenthesisNode', 'SymbolNode', 'ConstantNode', 'FunctionNode'],
];
const CONSTANTS: readonly string[] = ['pi', 'e'];

/** What in the text is no arithmetic over the names; null: nothing. */
const strangerIn = (root: MathNode, names: readonly string[]): string | null => {
  let found: string | null = null;
  root.traverse((node) => {
    if (!NODES.includes(node.type)) found ??= node.toString();
    if (node.type === 'SymbolNode') {
      const { name } = node as unknown as { readonly name: string };
      if (![...names, ...FUNCTIONS, ...CONSTANTS].includes(name)) found ??= name;
    }
  });
  return found;
};

const parsed = (text: string): MathNode | string => {
  try {
    return arithmetic().parse(text);
  } catch (error) {
    return error instanceof Error ? error.message : 'no expression';
  }
};

/** Any figures do: only their dimensions are looked at. */
const withUnits = (names: Readonly<Record<string, Measurand>>) =>
  Object.fromEntries(
    Object.entries(names).map(([name, measurand], i) => {
      const figure = 1.25 + 0.5 * i;
      const si = UNIT_OF[measurand];
      return [name, si === null ? figure : arithmetic().math.unit(figure, si)];
    }),
  );

const isUnit = (value: unknown): value is Unit => arithmetic().math.typeOf(value) === 'Unit';

/**
 * Why an expression cannot be a channel of this measurand, or null. `names`: what each name
 * measures. Units are checked by working it out once with them.
 */
export const expressionFault = (
  text: string,
  names: Readonly<Record<string, Measurand>>,
  measurand: Measurand,
): { readonly expected: string; readonly came: string } | null => {
  if (text.length > LONGEST_EXPRESSION) {
    return { expected: `at most ${LONGEST_EXPRESSION} characters`, came: String(text.length) };
  }
  const root = parsed(text);
  if (typeof root === 'string') return { expected: 'an expression', came: root };
  const stranger = strangerIn(root, Object.keys(names));
  if (stranger !== null) {
    const known = [...Object.keys(names), ...FUNCTIONS].join(', ');
    return { expected: `arithmetic over ${known}`, came: stranger };
  }
  const unused = Object.keys(names).find(
    (name) => root.filter((node) => node.toString() === name).length === 0,
  );
  if (unused !== undefined) return { expected: `${unused} to be used`, came: text };
  const wanted = UNIT_OF[measurand];
  try {
    const value: unknown = root.compile().evaluate(withUnits(names));
    if (wanted === null) {
      if (typeof value === 'number') return null;
      return { expected: 'a figure without unit', came: unitText(value) };
    }
    if (isUnit(value) && value.equalBase(arithmetic().math.unit(1, wanted))) return null;
    return { expected: `a figure in ${wanted}`, came: unitText(value) };
  } catch (error) {
    const came = error instanceof Error ? error.message : String(error);
    return { expected: 'units that go together', came };
  }
};

const unitText = (value: unknown): string => {
  if (isUnit(value)) return `one in ${value.toSI().formatUnits()}`;
  return typeof value === 'number' ? 'one without unit' : arithmetic().math.typeOf(value);
};

/** For expressions that `expressionFault` passes; SI figures in and out. */
export const compileExpression: CompileExpression = (text, names) => {
  const code = arithmetic().parse(text).compile();
  const scope: Record<string, number> = {};
  return (columns, out) => {
    for (let i = 0; i < out.length; i++) {
      names.forEach((name, k) => (scope[name] = columns[k]?.[i] ?? NaN));
      const value: unknown = code.evaluate(scope);
      out[i] = typeof value === 'number' ? value : NaN;
    }
  };
};
