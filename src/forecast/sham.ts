import { whiten } from '../linalg/cholesky.js';
import type { Small } from '../linalg/small.js';
import { add } from '../linalg/small.js';
import type { Combined } from './combined.js';
import { restricted } from './combined.js';
import type { LogErrors } from './log-errors.js';
import { solve } from './log-errors.js';
import type { Part } from './part.js';
import type { RandomBits } from './random.js';
import { seededBits } from './random.js';
import { products, scaleOf } from './subset.js';

/** Draws behind each sham gain: its median then has an error of about an eighth of its spread. */
export const shamDraws = 100;

/** Median and 16th and 84th percentile of a sham gain. */
export interface Sham {
  readonly median: number;
  readonly low: number;
  readonly high: number;
}

/**
 * The improvement that the noise of the added derivatives alone would report, by quantity. In the entries that the
 * baseline lacks, each realisation's derivative is centred on the mean and its sign flipped at random (one sign a
 * realisation, for every entry and parameter), so that only noise is left; the raw error then is divided into the one with those
 * derivatives set to exactly zero. The baseline's own error cancels. null where the error with zeros does not exist:
 * the combination then rests on the added entries alone.
 * Source: methods, section 5; sign flips as in the wild bootstrap, Wu 1986, Ann. Stat. 14, 1261 (from memory).
 */
export function shamGains(combined: Combined, seed: string): readonly (Sham | null)[] {
  const bits = seededBits(`${seed} sham`);
  const zero = rawLogs(combined, combined.parts.map(withoutAdded));
  const draws = Array.from({ length: shamDraws }, () =>
    rawLogs(
      combined,
      combined.parts.map((part) => withNoise(part, bits)),
    ),
  );
  return zero.map((base, quantity) => {
    if (base === null) return null;
    const gains: number[] = [];
    for (const draw of draws) {
      const log = draw[quantity];
      if (log === null || log === undefined) return null;
      gains.push(Math.exp(base - log));
    }
    gains.sort((a, b) => a - b);
    return { median: quantile(gains, 0.5), low: quantile(gains, 0.16), high: quantile(gains, 0.84) };
  });
}

/** Quantile of sorted values, linear between neighbours (Hyndman & Fan 1996, type 7, from memory). */
export function quantile(sorted: readonly number[], share: number): number {
  const place = share * (sorted.length - 1);
  const below = Math.floor(place);
  const low = sorted[below]!;
  const high = sorted[Math.min(below + 1, sorted.length - 1)]!;
  return low + (place - below) * (high - low);
}

function rawLogs(combined: Combined, derivatives: readonly Float64Array[]): LogErrors {
  const fishers = combined.parts.map((part, k): readonly [number, Small] => {
    const whitened = derivatives[k]!;
    whiten(part.factor, { ...part.exact, data: whitened });
    return [1, restricted(products(whitened, whitened, part.exact.rows, scaleOf(part)), combined.active)];
  });
  return solve(add([1, combined.prior], ...fishers)).logs;
}

/** The derivatives as measured, with those of the added entries set to zero, [p, D], not whitened. */
function withoutAdded(part: Part): Float64Array {
  const { columns } = part.plainExact;
  const derivatives = Float64Array.from(part.plainExact.data);
  for (const strand of part.strands) {
    const start = strand.parameter * columns;
    for (let i = 0; i < columns; i += 1) derivatives[start + i] = derivatives[start + i]! + strand.plainMean[i]!;
  }
  part.entries.forEach((entry, i) => {
    if (!entry.added) return;
    for (let start = 0; start < derivatives.length; start += columns) derivatives[start + i] = 0;
  });
  return derivatives;
}

function withNoise(part: Part, bits: RandomBits): Float64Array {
  const derivatives = withoutAdded(part);
  const { columns } = part.plainExact;
  const signs = Float64Array.from({ length: part.suite.derivativeSeeds.size }, () => ((bits() & 0x8000) === 0 ? -1 : 1));
  for (const strand of part.strands) {
    const start = strand.parameter * columns;
    const { data } = strand.plain;
    const noise = new Float64Array(columns);
    for (let row = 0; row < strand.seeds.length; row += 1) {
      const sign = signs[strand.seeds[row]!]!;
      const from = row * columns;
      for (let i = 0; i < columns; i += 1) noise[i] = noise[i]! + sign * data[from + i]!;
    }
    part.entries.forEach((entry, i) => {
      if (entry.added) derivatives[start + i] = derivatives[start + i]! + noise[i]! / strand.seeds.length;
    });
  }
  return derivatives;
}
