import { describe, expect, test } from 'vitest';
import { demoTopic, readFaultRequest } from '../../server/demo/fault-request.ts';
import { bumpedLoad, BUMP_SECONDS } from '../../server/demo/faults.ts';
import { newton } from '../../shared/model/units.ts';
import { parseTopic } from '../../shared/pipeline/1-decode/topics.ts';

const INPUTS = ['s1', 's2'];

describe('requests for faults', () => {
  test.each([
    [{ fault: 'overload-bump' }, { fault: 'overload-bump' }],
    [{ fault: 'sun', more: 1 }, { fault: 'sun' }],
    [{ fault: 'none' }, { fault: 'none' }],
    [
      { fault: 'broken-wire', input: 's2' },
      { fault: 'broken-wire', input: 's2' },
    ],
    [{ fault: 'drop-out' }, { fault: 'drop-out', seconds: 20 }],
    [
      { fault: 'drop-out', seconds: 3 },
      { fault: 'drop-out', seconds: 3 },
    ],
  ])('%j is taken', (given, value) => {
    expect(readFaultRequest(given, INPUTS)).toEqual({ ok: true, value });
  });

  test.each([
    [null, '(request)'],
    ['sun', '(request)'],
    [{}, 'fault'],
    [{ fault: 'rain' }, 'fault'],
    [{ fault: 'debonding' }, 'input'],
    [{ fault: 'debonding', input: 's3' }, 'input'],
    [{ fault: 'drop-out', seconds: 0 }, 'seconds'],
    [{ fault: 'drop-out', seconds: '5' }, 'seconds'],
  ])('%j is refused for its %s', (given, field) => {
    expect(readFaultRequest(given, INPUTS)).toMatchObject({ ok: false, refusal: { field } });
  });

  test('their topic is below our root and none of the nodes’ own', () => {
    expect(parseTopic(demoTopic('n1'))).toEqual({ ok: true, value: null });
  });
});

describe('an overload bump', () => {
  test.each([0, 60e3, 125e3])('on top of %d N peaks at 235 kN and is gone after', (load) => {
    expect(bumpedLoad(newton(load), BUMP_SECONDS / 2)).toBeCloseTo(235e3, 6);
    expect(bumpedLoad(newton(load), 0)).toBeCloseTo(load, 6);
    expect(bumpedLoad(newton(load), BUMP_SECONDS)).toBeCloseTo(load, 6);
    expect(bumpedLoad(newton(load), -1)).toBe(load);
    expect(bumpedLoad(newton(load), Infinity)).toBe(load);
  });
});
