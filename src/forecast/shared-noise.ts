import type { PartStrand } from './part.js';

/** What two strands have in common: the realisations that appear in both, and the weight of their products. */
export interface Shared {
  /** Rows of the first strand, and of the second, of each common realisation. */
  readonly rowsA: Int32Array;
  readonly rowsB: Int32Array;
  readonly count: number;
}

/** Common realisations of two strands. */
export function sharedRows(a: PartStrand, b: PartStrand): Shared {
  const rowsA: number[] = [];
  const rowsB: number[] = [];
  a.seeds.forEach((seed, row) => {
    const other = b.rowOf[seed]!;
    if (other >= 0) {
      rowsA.push(row);
      rowsB.push(other);
    }
  });
  return { rowsA: Int32Array.from(rowsA), rowsB: Int32Array.from(rowsB), count: rowsA.length };
}

/**
 * Factor on sum_i (u_i - ubar).(v_i - vbar) over common realisations that makes it an unbiased estimate of the
 * covariance of the two strands' means: 1/(N_u N_v kappa), kappa = 1 - 1/N_u - 1/N_v + n/(N_u N_v).
 * Means are those of each strand's own N realisations; n are common. With n = N_u = N_v it is 1/(N (N - 1)).
 * 0 where nothing is shared. Derived here from E[(u - ubar)(v - vbar)] = kappa cov(u, v) for a common realisation.
 */
export function sharedWeight(countA: number, countB: number, common: number): number {
  if (common === 0) return 0;
  const kappa = 1 - 1 / countA - 1 / countB + common / (countA * countB);
  return 1 / (countA * countB * kappa);
}
