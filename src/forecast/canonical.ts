import { cholesky, whiten } from '../linalg/cholesky.js';
import { eigen } from '../linalg/small.js';
import type { Part } from './part.js';
import { chosen } from './part.js';

/** How the noise of a combination's added entries is tied to that of the baseline's entries. */
export interface NoiseTie {
  /** Canonical correlations, largest first, 0 to 1. */
  readonly correlations: readonly number[];
  /** For each baseline entry, in the order of the part: share of its variance that the added entries predict. */
  readonly predicted: readonly { readonly entry: number; readonly share: number }[];
  /** Mean share that independent data would show by chance, D_added/(N_s - 1); null where N_s is not known. */
  readonly chance: number | null;
}

/**
 * Canonical correlations between baseline and added entries: singular values of L_b^-1 C_ba L_a^-T.
 * The share of one entry's variance that the added entries predict is c_ja C_aa^-1 c_aj / C_jj (a squared multiple correlation), which for
 * independent Gaussian data follows a Beta law with mean D_a/(N_s - 1).
 * null where the part has entries of one kind only.
 * Source: Hotelling 1936, Biometrika 28, 321; Fisher 1928 for the null law (both from memory).
 */
export function noiseTie(part: Part): NoiseTie | null {
  const own = part.entries.flatMap((entry, i) => (entry.added ? [] : [i]));
  const added = part.entries.flatMap((entry, i) => (entry.added ? [i] : []));
  if (own.length === 0 || added.length === 0) return null;
  const covariance = chosen(part.covariance.covariance, part.picks);
  const factorOwn = cholesky(chosen(covariance, Int32Array.from(own)));
  const factorAdded = cholesky(chosen(covariance, Int32Array.from(added)));
  if (factorOwn.kind !== 'factor' || factorAdded.kind !== 'factor') return null;
  // Rows c_ja whitened by L_a: their squares over C_jj are the predicted shares.
  const cross = new Float64Array(own.length * added.length);
  own.forEach((i, row) => {
    added.forEach((j, column) => {
      cross[row * added.length + column] = covariance.data[i * covariance.columns + j]!;
    });
  });
  whiten(factorAdded.factor, { data: cross, rows: own.length, columns: added.length });
  const predicted = own.map((entry, row) => {
    let sum = 0;
    for (let k = 0; k < added.length; k += 1) sum += cross[row * added.length + k]! ** 2;
    return { entry, share: sum / covariance.data[entry * (covariance.columns + 1)]! };
  });
  const { realisations } = part.covariance;
  return {
    correlations: singularValues(factorOwn.factor, cross, own.length, added.length),
    predicted,
    chance: realisations === null ? null : Math.min(1, added.length / (realisations - 1)),
  };
}

/** Singular values of L_b^-1 X from the eigenvalues of X'^T X', on the smaller side. */
function singularValues(factor: Parameters<typeof whiten>[0], cross: Float64Array, rows: number, columns: number): number[] {
  const transposed = new Float64Array(cross.length);
  for (let i = 0; i < rows; i += 1) {
    for (let j = 0; j < columns; j += 1) transposed[j * rows + i] = cross[i * columns + j]!;
  }
  whiten(factor, { data: transposed, rows: columns, columns: rows });
  const size = Math.min(rows, columns);
  const at = (i: number, k: number): number => (rows <= columns ? transposed[k * rows + i]! : transposed[i * rows + k]!);
  const inner = Math.max(rows, columns);
  const gram = new Float64Array(size * size);
  for (let i = 0; i < size; i += 1) {
    for (let j = 0; j <= i; j += 1) {
      let sum = 0;
      for (let k = 0; k < inner; k += 1) sum += at(i, k) * at(j, k);
      gram[i * size + j] = sum;
      gram[j * size + i] = sum;
    }
  }
  return [...eigen({ data: gram, size }).values].reverse().map((value) => Math.sqrt(Math.min(1, Math.max(0, value))));
}
