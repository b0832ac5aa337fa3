import { describe, expect, test } from 'vitest';
import { compileExpression, expressionFault } from '../../server/site/expression.ts';

const NAMES = { load: 'force', sag: 'displacement', low: 'strain', top: 'stress' } as const;

describe('units are checked', () => {
  test.each([
    ['load / sag', 'number', 'a figure without unit'],
    ['load + sag', 'force', 'units that go together'],
    ['load * sag', 'moment', null],
    ['top * low', 'stress', null],
    ['top * low', 'strain', 'a figure without unit'],
    ['2 * load - abs(load)', 'force', null],
    ['sqrt(load^2 + (3 * load)^2)', 'force', null],
    ['atan2(low, 2 * low)', 'angle', null],
    ['atan2(load, load)', 'angle', 'units that go together'],
    ['mean(load, load)', 'force', null],
    ['max(top, top / 2)', 'stress', null],
    ['sqrt(low^2 + low^2)', 'strain', null],
  ] as const)('%s as %s', (text, measurand, expected) => {
    const used = Object.fromEntries(
      Object.entries(NAMES).filter(([name]) => new RegExp(`\\b${name}\\b`).test(text)),
    );
    const fault = expressionFault(text, used, measurand);
    expect(fault?.expected ?? null).toBe(expected);
  });
});

describe('only arithmetic over the names', () => {
  test.each([
    ['load = 3', 'load = 3'],
    ['import("x")', 'import'],
    ['x + load', 'x'],
    ['load.constructor', 'load.constructor'],
    ['f(x) = load', 'f(x) = load'],
    ['[load, load]', '[load, load]'],
    ['evaluate(load)', 'evaluate'],
    ['load ; load', 'load'],
  ])('%s is refused', (text, came) => {
    const fault = expressionFault(text, { load: 'force' }, 'force');
    expect(fault?.expected).toMatch(/^arithmetic over load, /);
    expect(fault?.came).toContain(came);
  });

  test('what cannot be read says where', () => {
    expect(expressionFault('load +', { load: 'force' }, 'force')).toMatchObject({
      expected: 'an expression',
      came: expect.stringContaining('char 7'),
    });
  });

  test('a name that is not used is a slip', () => {
    const fault = expressionFault('load', { load: 'force', sag: 'displacement' }, 'force');
    expect(fault?.expected).toBe('sag to be used');
  });
});

test('values are those of the arithmetic, sample by sample; NaN stays', () => {
  const evaluate = compileExpression('(a - b) / 2 + sqrt(abs(a))', ['a', 'b']);
  const out = new Float64Array(3);
  evaluate([Float64Array.of(4, -9, NaN), Float64Array.of(2, 1, 1)], out);
  expect([...out]).toEqual([(4 - 2) / 2 + 2, (-9 - 1) / 2 + 3, NaN]);
});
