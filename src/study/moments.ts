import type { ArrayReference } from '../arrays/reference.js';
import type { Matrix } from '../arrays/rows.js';
import { readMatrix, readVector } from './array-shapes.js';
import type { KeyPath } from './key-path.js';
import type { RunContext } from './run-context.js';
import { everyDerivative, noneOf, onlyKey } from './run-context.js';
import type { MomentsDerivativeFile, MomentsFile } from './schema.js';
import type { Moments, MomentsDerivative, Parameter } from './study.js';
import { asymmetry, symmetrised, wrongDiagonal } from './symmetric.js';

/** The arrays of a run of kind `moments`; null where something cannot be used. */
export function readMoments(run: MomentsFile, context: RunContext): Moments | null {
  const covariance = readCovariance(run.covariance, ['covariance'], false, context);
  const derivatives = everyDerivative(context, run.derivatives ?? {}, run.insensitive ?? [], (given, parameter) => readDerivative(given, parameter, context));
  return covariance === null ? null : { kind: 'moments', covariance, realisations: run.realisations ?? null, derivatives };
}

function readDerivative(given: MomentsDerivativeFile, parameter: Parameter, context: RunContext): MomentsDerivative | null {
  const { reading, folder, place, columns } = context;
  const path = ['derivatives', parameter.name];
  const kind = onlyKey(given, ['mean', 'exact'], path, context);
  const reference = kind === null ? undefined : given[kind];
  if (kind === null || reference === undefined) return null;
  const values = readVector(reading, folder, reference, columns.length, place([...path, kind]));
  if (kind === 'exact') {
    noneOf(given, ['realisations', 'noise'], 'exact:', path, context);
    return values === null ? null : { kind: 'exact', values };
  }
  if (given.noise !== undefined && given.realisations === undefined) {
    reading.report({
      what: 'a key is missing',
      where: place(path),
      found: 'noise: without realisations:',
      expected: 'both: the noise of the mean is that of one realisation over their number',
      remedy: 'add realisations:, the number that the mean was taken over',
    });
    return null;
  }
  const noise = given.noise === undefined ? null : readCovariance(given.noise, [...path, 'noise'], true, context);
  if (values === null || (given.noise !== undefined && noise === null)) return null;
  return { kind: 'mean', mean: values, realisations: given.realisations ?? null, noise };
}

/** A symmetric matrix over the entries. A derivative may have no noise in some entries; data cannot. */
function readCovariance(reference: ArrayReference, path: KeyPath, zeroAllowed: boolean, context: RunContext): Matrix | null {
  const { reading, folder, place, columns } = context;
  const matrix = readMatrix(reading, folder, reference, columns.length, place(path));
  if (matrix === null) return null;
  const name = typeof reference === 'string' ? reference : 'the matrix';
  const size = matrix.columns;
  const diagonal = wrongDiagonal(matrix, zeroAllowed);
  if (diagonal !== null) {
    reading.report({
      what: 'a covariance has a variance that cannot be',
      where: place(path),
      found: `${name}: ${String(matrix.data[diagonal * size + diagonal])} at [${String(diagonal)}, ${String(diagonal)}] (counted from 0)`,
      expected: zeroAllowed ? 'no variance below 0' : 'every variance above 0',
      remedy: 'check that the file holds a covariance; leave entries that never vary out of the vector',
    });
    return null;
  }
  const wrong = asymmetry(matrix);
  if (wrong === null) return symmetrised(matrix);
  const { row, column } = wrong;
  reading.report({
    what: 'a covariance is not symmetric',
    where: place(path),
    found: `${name}: ${String(matrix.data[row * size + column])} at [${String(row)}, ${String(column)}] and ${String(matrix.data[column * size + row])} at [${String(column)}, ${String(row)}] (counted from 0)`,
    expected: 'a matrix that equals its transpose, to within 1e-6 of the standard deviations',
    remedy: 'check that the file holds a covariance; save (C + C.T) / 2 if only rounding differs more than this',
  });
  return null;
}
