import type { ArrayReference } from '../arrays/reference.js';
import type { Matrix } from '../arrays/rows.js';
import type { NumericArray } from '../arrays/stored-array.js';
import { shapeText } from '../arrays/stored-array.js';
import type { Place } from './problems.js';
import type { Reading } from './reading.js';
import { placedRows, readArray, reporting } from './reading.js';
import type { Realisations } from './study.js';

/** A vector of a known length, or of any length where `length` is null: [N], or [1, N]. */
export function readVector(reading: Reading, folder: string, reference: ArrayReference, length: number | null, where: Place): Float64Array | null {
  const array = readArray(reading, folder, reference, where);
  if (array === null) return null;
  const [first, second] = array.shape;
  const found = array.shape.length === 1 ? first : first === 1 ? second : undefined;
  if (found === undefined || found === 0 || (length !== null && found !== length)) {
    report(reading, array, length === null ? 'a vector of at least one value' : shapeText([length]), where);
    return null;
  }
  return reporting(reading, where, () => array.values());
}

/** A matrix of known size. */
export function readMatrix(reading: Reading, folder: string, reference: ArrayReference, size: number, where: Place): Matrix | null {
  const array = readArray(reading, folder, reference, where);
  if (array === null) return null;
  const [rows, columns] = array.shape;
  if (rows !== size || (columns ?? 1) !== size) {
    report(reading, array, shapeText([size, size]), where);
    return null;
  }
  const data = reporting(reading, where, () => array.values());
  return data === null ? null : { data, rows: size, columns: size };
}

/** Realisations of a data vector of `columns` entries, with their seeds. */
export function readRealisations(
  reading: Reading,
  folder: string,
  reference: ArrayReference,
  columns: number,
  where: Place,
): Omit<Realisations, 'seeds'> | null {
  const array = readArray(reading, folder, reference, where);
  if (array === null) return null;
  const rows = array.rows();
  if (array.shape.length === 0 || rows.columns !== columns) {
    report(reading, array, `[realisations, ${String(columns)}], one column for each entry of the vector`, where, array.shape.length === 2 && rows.rows === columns);
    return null;
  }
  if (rows.rows < 2) {
    report(reading, array, `[realisations, ${String(columns)}] with at least 2 realisations`, where);
    return null;
  }
  return { source: array.name, rows: placedRows(rows, where) };
}

function report(reading: Reading, array: NumericArray, expected: string, where: Place, transposed = false): void {
  reading.report({
    what: 'the shape of an array does not fit',
    where,
    found: `${array.name} has the shape ${shapeText(array.shape)}`,
    expected,
    remedy: transposed ? 'save the transpose: one row for each realisation' : 'check that this is the right file, and the vector of its run',
  });
}
