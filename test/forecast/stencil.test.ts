import { describe, expect, it } from 'vitest';
import { derivativeWeights, firstDerivativeWeights } from '../../src/forecast/stencil.js';
import { distance, range } from './seeded-study.js';

// A few units in the last place of weights of order one.
const rounding = 1e-13;

describe('weights of a first derivative', () => {
  it('are the textbook ones', () => {
    expect(distance(firstDerivativeWeights([-1, 1], 0), [-0.5, 0.5])).toBeLessThan(rounding);
    expect(distance(firstDerivativeWeights([-2, -1, 1, 2], 0), [1 / 12, -2 / 3, 2 / 3, -1 / 12])).toBeLessThan(rounding);
    expect(distance(firstDerivativeWeights([0, 1, 2], 0), [-1.5, 2, -0.5])).toBeLessThan(rounding);
    expect(distance(firstDerivativeWeights([-1, 0, 1], 0), [-0.5, 0, 0.5])).toBeLessThan(rounding);
  });

  it('are exact for polynomials of one degree less than there are nodes, and add up to 0', () => {
    const nodes = [0.25, 0.31, 0.29, 0.4, 0.27];
    const centre = 0.3;
    const weights = firstDerivativeWeights(nodes, centre);
    range(5).forEach((degree) => {
      const found = nodes.reduce((sum, node, j) => sum + weights[j]! * node ** degree, 0);
      // Weights are of order 100 here, and cancel.
      expect(Math.abs(found - (degree === 0 ? 0 : degree * centre ** (degree - 1)))).toBeLessThan(1e-11);
    });
  });

  it('scale with the unit and do not depend on the origin', () => {
    const nodes = [-1.5, 0.5, 2];
    const weights = firstDerivativeWeights(nodes, 0.25);
    expect(distance(firstDerivativeWeights(nodes.map((node) => 1e-9 * node), 0.25e-9), weights.map((weight) => 1e9 * weight))).toBeLessThan(rounding);
    expect(distance(firstDerivativeWeights(nodes.map((node) => node + 8), 8.25), weights)).toBeLessThan(rounding);
  });

  it('follow the order of the nodes', () => {
    const weights = firstDerivativeWeights([-2, -1, 1, 2], 0);
    expect(distance(firstDerivativeWeights([1, 2, -2, -1], 0), [weights[2]!, weights[3]!, weights[0]!, weights[1]!])).toBeLessThan(rounding);
  });
});

describe('weights of other derivatives', () => {
  it('interpolate at order 0 and are 1, -2, 1 at order 2', () => {
    expect(distance(derivativeWeights([0, 1], 0.25, 0), [0.75, 0.25])).toBeLessThan(rounding);
    expect(distance(derivativeWeights([-1, 0, 1], 0, 2), [1, -2, 1])).toBeLessThan(rounding);
  });
});
