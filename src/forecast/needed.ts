import type { Small } from '../linalg/small.js';
import { eigen, unitDiagonal } from '../linalg/small.js';
import type { Combined } from './combined.js';
import { restricted, whole } from './combined.js';
import { partFisher } from './fisher.js';
import { z95OneSided } from './thresholds.js';

/**
 * The least number of derivative realisations that could make an undetermined Fisher matrix determined.
 *
 * The corrected matrix, scaled so that the raw one has unit diagonal, has its smallest eigenvalue lambda <= 0 in a direction v.
 * With the jackknife error SE of v^T F v, that direction holds at most lambda + 1.645 SE of information (95 %). It would
 * stand two standard errors above zero once 2 SE N/N' is below that, since the error of a noise-dominated U-statistic
 * falls as 1/N: N' = 2 SE N / (lambda + 1.645 SE). It is a lower bound: where information is less, more are needed.
 * null where the upper limit itself is not positive, or where nothing is undetermined by noise.
 * Source: derived here from methods, section 3.
 */
export function realisationsNeeded(combined: Combined): number | null {
  const { corrected, raw } = whole(combined);
  const strands = combined.parts.flatMap((part) => part.strands);
  if (corrected === null || strands.length === 0 || corrected.inversion.kind !== 'not positive definite') return null;
  const unit = unitDiagonal(raw.fisher);
  if (unit === null) return null;
  const rescale = (matrix: Small): Small => scaledBy(matrix, unit.scale);
  const { values, vectors } = eigen(rescale(corrected.fisher));
  const direction = Float64Array.from({ length: vectors.size }, (_, i) => vectors.data[i * vectors.size]!);
  const error = Math.sqrt(directionVariance(combined, rescale, direction));
  const upper = values[0]! + z95OneSided * error;
  if (upper <= 0) return null;
  const now = Math.min(...strands.map((strand) => strand.seeds.length));
  return Math.max(now + 1, Math.ceil((2 * error * now) / upper));
}

function scaledBy(matrix: Small, scale: Float64Array): Small {
  const { size } = matrix;
  return { data: matrix.data.map((value, k) => value / (scale[Math.floor(k / size)]! * scale[k % size]!)), size };
}

/** Jackknife variance of v^T F v over the realisations of every suite. */
function directionVariance(combined: Combined, rescale: (matrix: Small) => Small, direction: Float64Array): number {
  let variance = 0;
  for (const part of combined.parts) {
    const fishers = partFisher(part);
    const fisher = fishers[fishers.length - 1]!;
    const size = fisher.raw.size;
    const full = form(rescale(restricted(fisher.corrected, combined.active)), direction);
    const weights = whole(combined).replicates.get(part.suite.name)!.weights;
    weights.forEach((weight, seed) => {
      if (weight === 0) return;
      const without = { data: fisher.without.subarray(seed * size * size, (seed + 1) * size * size), size };
      variance += weight * (form(rescale(restricted(without, combined.active)), direction) - full) ** 2;
    });
  }
  return variance;
}

function form(matrix: Small, direction: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < matrix.size; i += 1) {
    for (let j = 0; j < matrix.size; j += 1) sum += direction[i]! * matrix.data[i * matrix.size + j]! * direction[j]!;
  }
  return sum;
}
