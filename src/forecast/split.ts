import type { Small } from '../linalg/small.js';
import { add, eigen, geometricMean, product, unitDiagonal, zeros } from '../linalg/small.js';
import type { Combined } from './combined.js';
import { restricted, whole } from './combined.js';
import type { LogErrors } from './log-errors.js';
import { solve } from './log-errors.js';
import type { Part } from './part.js';
import { shuffled, seededBits } from './random.js';
import type { Members } from './subset.js';
import { derivativesOf, products, scaleOf } from './subset.js';

/** Share of the realisations that gives the directions of the compression; measured in methods, section 5. */
export const splitShare = 0.7;
/** Random splits that are averaged. */
export const splitCount = 20;

/**
 * Log errors from the split estimate: directions for a compression t = M_A^T P x from one part of the realisations, the
 * Fisher matrix of t from the other part's derivatives, F = E^T G^-1 E with G = M_A^T P M_A and E = M_A^T P M_B; averaged
 * over random splits, then joined with the raw matrix by the matrix geometric mean, since the two are biased in opposite
 * ways; priors are part of both. null values where a split has too few realisations or the mean does not exist.
 * Source: Coulton & Wandelt 2023, arXiv:2305.08994 (abstract read; formulas derived here, methods section 5).
 */
export function splitLogs(combined: Combined, seed: string): LogErrors {
  const nothing = combined.active.flatMap(() => [null, null]);
  const bits = seededBits(`${seed} split`);
  let total: Small = zeros(combined.active.length);
  for (let k = 0; k < splitCount; k += 1) {
    for (const part of combined.parts) {
      const members = randomMembers(part, bits);
      const fisher = splitFisher(part, members);
      if (fisher === null) return nothing;
      total = add([1, total], [1 / splitCount, restricted(fisher, combined.active)]);
    }
  }
  // Priors join both before the mean: a parameter that only a prior knows would leave the matrices without one.
  const mean = geometricMean(whole(combined).raw.fisher, add([1, total], [1, combined.prior]));
  return mean === null ? nothing : solve(mean).logs;
}

function randomMembers(part: Part, bits: () => number): Members {
  const count = part.suite.derivativeSeeds.size;
  const members = new Uint8Array(count);
  const order = shuffled(count, bits);
  for (let i = 0; i < Math.round(splitShare * count); i += 1) members[order[i]!] = 1;
  return members;
}

/** Fisher matrix of the compressed data, [p, p]; null where a strand is empty on either side. */
function splitFisher(part: Part, members: Members): Small | null {
  const parameters = part.exact.rows;
  const scale = scaleOf(part);
  const directions = derivativesOf(part, members, 1);
  const derivatives = derivativesOf(
    part,
    members.map((member) => 1 - member),
    1,
  );
  if (directions === null || derivatives === null) return null;
  const gram = products(directions, directions, parameters, scale);
  const responding = Array.from({ length: parameters }, (_, a) => a).filter((a) => gram.data[a * (parameters + 1)]! > 0);
  const inverse = generalisedInverse(restricted(gram, responding));
  if (inverse === null) return null;
  const mixed = restricted(products(directions, derivatives, parameters, scale), responding);
  const fisher = product(product(transposed(mixed), inverse), mixed);
  return expanded(fisher, responding, parameters);
}

/** Directions this weak beside the strongest are rounding: a suite with fewer entries than parameters has only D of them. */
const weakest = 1e-12;

/** Inverse on the directions that the compressed data have, after scaling to unit diagonal. null for a diagonal that is not positive. */
function generalisedInverse(gram: Small): Small | null {
  const unit = unitDiagonal(gram);
  if (unit === null) return null;
  const { values, vectors } = eigen(unit.scaled);
  const { size } = gram;
  const largest = values[size - 1] ?? 0;
  const inverse = zeros(size);
  values.forEach((value, k) => {
    if (value <= weakest * largest) return;
    for (let i = 0; i < size; i += 1) {
      for (let j = 0; j < size; j += 1) {
        const term = (vectors.data[i * size + k]! * vectors.data[j * size + k]!) / (value * unit.scale[i]! * unit.scale[j]!);
        inverse.data[i * size + j] = inverse.data[i * size + j]! + term;
      }
    }
  });
  return inverse;
}

function transposed({ data, size }: Small): Small {
  return { data: data.map((_, k) => data[(k % size) * size + Math.floor(k / size)]!), size };
}

function expanded(matrix: Small, places: readonly number[], size: number): Small {
  const target = zeros(size);
  places.forEach((a, i) => {
    places.forEach((b, j) => {
      target.data[a * size + b] = matrix.data[i * matrix.size + j]!;
    });
  });
  return target;
}
