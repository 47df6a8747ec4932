import { describe, expect, it } from 'vitest';
import { sharedWeight } from '../../src/forecast/shared-noise.js';
import { range } from './seeded-study.js';

/**
 * Expectation of sum_i (u_i - ubar)(v_i - vbar) over common realisations where cov(u_k, v_k) = 1 for the same realisation, else 0:
 * every product written out as a form in the u_k and v_k.
 */
function expectedSum(first: readonly number[], second: readonly number[]): number {
  const common = first.filter((seed) => second.includes(seed));
  let sum = 0;
  for (const i of common) {
    for (const k of common) {
      const inFirst = (i === k ? 1 : 0) - 1 / first.length;
      const inSecond = (i === k ? 1 : 0) - 1 / second.length;
      sum += inFirst * inSecond;
    }
  }
  return sum;
}

describe('the weight of products over common realisations', () => {
  it.each([
    [range(5), range(5)],
    [range(5), range(6, 2)],
    [range(4), range(9, 3)],
    [range(20), range(3)],
    [range(3), range(3, 2)],
    [range(2), range(2, 1)],
  ])('makes their sum the covariance of the two means, n/(N_u N_v): seeds %j and %j', (first, second) => {
    const common = first.filter((seed) => second.includes(seed)).length;
    const weight = sharedWeight(first.length, second.length, common);
    expect(weight * expectedSum(first, second)).toBeCloseTo(common / (first.length * second.length), 14);
  });

  it('is 1/(N (N - 1)) where all are common, and symmetric', () => {
    expect(sharedWeight(7, 7, 7)).toBeCloseTo(1 / 42, 16);
    expect(sharedWeight(5, 8, 3)).toBeCloseTo(sharedWeight(8, 5, 3), 16);
  });

  it('is 0 where none is', () => {
    expect(sharedWeight(5, 8, 0)).toBe(0);
  });
});
