import type { Vector } from '../arrays/rows.js';

/**
 * Finite-difference weights of the first derivative at `centre` from values at any distinct nodes:
 * f'(centre) ~ sum_j w_j f(node_j), exact for polynomials of degree nodes.length - 1.
 * @param nodes at least two distinct places, in the unit of the parameter
 * @returns weights in the order of the nodes, in 1/unit. Two symmetric nodes give the central difference.
 * Accuracy: a few units in the last place on the 29 stencils of test/outside/fornberg.test.ts.
 * Source: Fornberg 1988, Mathematics of Computation 51, 699.
 */
export function firstDerivativeWeights(nodes: Vector, centre: number): Float64Array {
  return derivativeWeights(nodes, centre, 1);
}

/** Weights of any derivative order; see `firstDerivativeWeights`. Order 0 interpolates. */
export function derivativeWeights(nodes: Vector, centre: number, order: number): Float64Array {
  const count = nodes.length;
  // weights[k * count + j]: weight of node j for derivative k, from the nodes met so far.
  const weights = new Float64Array((order + 1) * count);
  weights[0] = 1;
  let previousProduct = 1;
  for (let i = 1; i < count; i += 1) {
    let product = 1;
    const offset = nodes[i]! - centre;
    const previousOffset = nodes[i - 1]! - centre;
    const highest = Math.min(i, order);
    for (let j = 0; j < i; j += 1) {
      const distance = nodes[i]! - nodes[j]!;
      product *= distance;
      if (j === i - 1) {
        for (let k = highest; k >= 0; k -= 1) {
          const lower = k > 0 ? k * weights[(k - 1) * count + i - 1]! : 0;
          weights[k * count + i] = (previousProduct * (lower - previousOffset * weights[k * count + i - 1]!)) / product;
        }
      }
      for (let k = highest; k >= 0; k -= 1) {
        const lower = k > 0 ? k * weights[(k - 1) * count + j]! : 0;
        weights[k * count + j] = (offset * weights[k * count + j]! - lower) / distance;
      }
    }
    previousProduct = product;
  }
  return weights.slice(order * count, (order + 1) * count);
}
