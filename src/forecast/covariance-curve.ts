import type { Matrix, RowSource } from '../arrays/rows.js';
import { cholesky, whiten } from '../linalg/cholesky.js';
import { momentsOf } from '../linalg/gram.js';
import { add } from '../linalg/small.js';
import type { Combined } from './combined.js';
import { restricted, whole } from './combined.js';
import type { LogErrors } from './log-errors.js';
import { solve } from './log-errors.js';
import type { Part } from './part.js';
import { chosen } from './part.js';
import { precisionFactor } from './precision.js';
import { gather } from './realisations.js';
import type { FiducialCovariance } from './suite.js';
import { products } from './subset.js';

/** Raw log errors with covariances from fewer fiducial realisations, each with its own precision factor. */
export interface CovarianceCurve {
  /** N_s of the suite that has the fewest. */
  readonly realisations: readonly number[];
  readonly logs: readonly LogErrors[];
}

const divisions = [8, 4, 2] as const;

/**
 * Raw errors at N_s/8, N_s/4, N_s/2 and N_s: every eighth, fourth, second realisation, so that a trend along the rows does not
 * show as convergence. Sizes that cannot be inverted (N_s/m <= D + 2) are left out. null where no covariance is an estimate from rows.
 * Source: methods, section 5.
 */
export function covarianceCurve(combined: Combined): CovarianceCurve | null {
  const counts = combined.parts.flatMap(({ covariance }) => (covariance.rows === null ? [] : [covariance.rows.source.rows]));
  if (counts.length === 0) return null;
  const fewest = Math.min(...counts);
  const points = divisions.flatMap((division) => {
    const logs = logsAt(combined, division);
    return logs === null ? [] : [{ realisations: Math.floor(fewest / division), logs }];
  });
  const all = [...points, { realisations: fewest, logs: whole(combined).raw.logs }];
  return { realisations: all.map(({ realisations }) => realisations), logs: all.map(({ logs }) => logs) };
}

function logsAt(combined: Combined, division: number): LogErrors | null {
  const terms = combined.parts.map((part) => fisherAt(part, division));
  const fishers = terms.filter((term) => term !== null);
  if (fishers.length < terms.length) return null;
  const total = add([1, combined.prior], ...fishers.map((fisher) => [1, restricted(fisher, combined.active)] as const));
  return solve(total).logs;
}

function fisherAt(part: Part, division: number) {
  const { rows, covariance, realisations } = part.covariance;
  const source = rows === null ? null : every(rows.source, division);
  const count = source === null ? realisations : source.rows;
  const entries = part.entries.length;
  if (count !== null && count <= entries + 2) return null;
  const matrix = chosen(source === null ? covariance : thinned(part.covariance, source, division), part.picks);
  const factorisation = cholesky(matrix);
  if (factorisation.kind !== 'factor') return null;
  const derivatives = Float64Array.from(part.plainExact.data);
  for (const strand of part.strands) {
    const start = strand.parameter * entries;
    for (let i = 0; i < entries; i += 1) derivatives[start + i] = derivatives[start + i]! + strand.plainMean[i]!;
  }
  whiten(factorisation.factor, { ...part.plainExact, data: derivatives });
  const scale = precisionFactor(count, entries) * part.volumeScale;
  return products(derivatives, derivatives, part.exact.rows, scale);
}

/** Covariances of fewer realisations, which every combination of a suite shares. */
const known = new WeakMap<FiducialCovariance, Map<number, Matrix>>();

function thinned(of: FiducialCovariance, source: RowSource, division: number): Matrix {
  const all = known.get(of) ?? new Map<number, Matrix>();
  known.set(of, all);
  const found = all.get(division) ?? momentsOf(source).covariance;
  all.set(division, found);
  return found;
}

function every(source: RowSource, division: number): RowSource {
  const rows = Math.floor(source.rows / division);
  return {
    rows,
    columns: source.columns,
    read: (start, count) => gather(source, Int32Array.from({ length: count }, (_, k) => (start + k) * division)),
  };
}
