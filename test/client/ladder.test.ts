import { describe, expect, test } from 'vitest';
import { holdShares, ladderOrder, MARGIN } from '../../client/state/ladder.ts';

const unheld = (size: number) => new Float64Array(size).fill(NaN);
const shares = (...values: number[]) => Float64Array.from(values);

describe('the headroom ladder', () => {
  test('puts what is nearest to its stop limit first, ties in site order', () => {
    const held = unheld(4);
    expect(holdShares(held, shares(0.2, 0.9, 0.2, 1.4))).toBe(true);
    expect(ladderOrder(held)).toEqual([3, 1, 0, 2]);
  });

  test('leaves out what cannot be judged, and takes it back', () => {
    const held = unheld(3);
    holdShares(held, shares(0.2, NaN, 0.4));
    expect(ladderOrder(held)).toEqual([2, 0]);
    expect(holdShares(held, shares(NaN, 0.3, 0.4))).toBe(true);
    expect(ladderOrder(held)).toEqual([2, 1]);
    holdShares(held, shares(NaN, NaN, NaN));
    expect(ladderOrder(held)).toEqual([]);
  });

  test('does not move for noise within the margin', () => {
    const held = unheld(2);
    holdShares(held, shares(0.5, 0.499));
    for (let i = 0; i < 100; i++) {
      const swing = 0.9 * MARGIN * (i % 2 === 0 ? 1 : -1);
      expect(holdShares(held, shares(0.5 - swing, 0.499 + swing))).toBe(false);
    }
    expect(ladderOrder(held)).toEqual([0, 1]);
  });

  test('follows a slow change, and is never further than twice the margin out of order', () => {
    const held = unheld(3);
    for (let i = 0; i <= 1000; i++) {
      const now = shares(i / 1000, 1 - i / 1000, 0.5);
      holdShares(held, now);
      const order = ladderOrder(held).map((channel) => now[channel] ?? NaN);
      order.slice(1).forEach((share, place) => {
        expect(share - (order[place] ?? NaN)).toBeLessThanOrEqual(2 * MARGIN + 1e-12);
      });
    }
    expect(ladderOrder(held)).toEqual([0, 2, 1]);
  });
});
