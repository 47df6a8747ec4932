import type { Inversion, Small } from '../linalg/small.js';
import { invert, invertByCholesky, unitDiagonal } from '../linalg/small.js';

/**
 * Logarithms of the errors of every parameter, marginalised and fixed: value 2a is the marginalised error of parameter
 * a, value 2a + 1 its fixed error. NaN never stands for a number here: what does not exist is null.
 */
export type LogErrors = readonly (number | null)[];

/** A Fisher matrix with priors added, and what follows from it. */
export interface Solved {
  readonly fisher: Small;
  readonly inversion: Inversion;
  readonly logs: LogErrors;
}

/**
 * Marginalised errors sqrt((F^-1)_aa) and fixed errors 1/sqrt(F_aa), as logarithms.
 * @param fisher [p, p], priors included
 */
export function solve(fisher: Small): Solved {
  const inversion = invert(fisher);
  const inverse = inversion.kind === 'inverse' ? inversion.inverse : null;
  return { fisher, inversion, logs: logErrors(fisher, inverse) };
}

function logErrors(fisher: Small, inverse: Small | null): LogErrors {
  const { size } = fisher;
  return Array.from({ length: 2 * size }, (_, quantity) => {
    const diagonal = Math.floor(quantity / 2) * (size + 1);
    if (quantity % 2 === 0) return inverse === null ? null : Math.log(inverse.data[diagonal]!) / 2;
    return fisher.data[diagonal]! > 0 ? -Math.log(fisher.data[diagonal]!) / 2 : null;
  });
}

/**
 * Log errors of a matrix near one that is already solved, such as the one without a realisation. Where the neighbour is
 * not positive definite the linear form serves: d log sigma_a = -(F^-1 dF F^-1)_aa / (2 (F^-1)_aa), and for a fixed
 * error -dF_aa/(2 F_aa). The two agree elsewhere to first order.
 * @returns [2p], written to `target` from `start`; quantities that the solved matrix lacks stay 0
 * Source: methods, section 4; Efron & Stein 1981, Ann. Stat. 9, 586 (from memory).
 */
export function neighbourLogs(near: Small, solved: Solved, target: Float64Array, start: number): void {
  const { size } = near;
  const inverse = fastInverse(near);
  const base = solved.inversion.kind === 'inverse' ? solved.inversion.inverse : null;
  for (let a = 0; a < size; a += 1) {
    const diagonal = a * (size + 1);
    if (base !== null) {
      target[start + 2 * a] =
        inverse !== null
          ? Math.log(inverse.data[diagonal]!) / 2
          : Math.log(base.data[diagonal]!) / 2 + linearMarginalised(near, solved.fisher, base, a);
    }
    const fixed = solved.fisher.data[diagonal]!;
    if (fixed > 0) {
      const value = near.data[diagonal]!;
      target[start + 2 * a + 1] =
        value > 0 ? -Math.log(value) / 2 : -Math.log(fixed) / 2 - (value - fixed) / (2 * fixed);
    }
  }
}

function linearMarginalised(near: Small, fisher: Small, inverse: Small, a: number): number {
  const { size } = near;
  let change = 0;
  for (let i = 0; i < size; i += 1) {
    for (let j = 0; j < size; j += 1) {
      const delta = near.data[i * size + j]! - fisher.data[i * size + j]!;
      change += inverse.data[a * size + i]! * delta * inverse.data[j * size + a]!;
    }
  }
  return -change / (2 * inverse.data[a * (size + 1)]!);
}

/** Inverse without the eigenvalues; null where a pivot is not positive. */
function fastInverse(matrix: Small): Small | null {
  const unit = unitDiagonal(matrix);
  if (unit === null) return null;
  const inverse = invertByCholesky(unit.scaled);
  if (inverse === null) return null;
  const { size } = matrix;
  return { data: inverse.map((value, k) => value / (unit.scale[Math.floor(k / size)]! * unit.scale[k % size]!)), size };
}
