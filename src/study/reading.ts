import { createHash } from 'node:crypto';
import { ArrayFault } from '../arrays/fault.js';
import { inlineArray } from '../arrays/inline.js';
import type { ArrayReference, FileReference } from '../arrays/reference.js';
import { fileReference } from '../arrays/reference.js';
import { readExactly, withRegularFile } from '../arrays/regular-file.js';
import type { RowSource } from '../arrays/rows.js';
import type { NumericArray, StoredArray, Unusable } from '../arrays/stored-array.js';
import type { InsideFile } from './places.js';
import { findInside } from './places.js';
import type { Place, Problem } from './problems.js';
import { InputError } from './problems.js';
import type { Input } from './study.js';

/** What is shared while one study is read. */
export interface Reading {
  /** The study folder, links followed. */
  readonly root: string;
  /** Every file that was read, by path. */
  readonly inputs: Map<string, Input>;
  /** Array files by reference, so that each is streamed once; null where one cannot be used, which has been reported. */
  readonly arrays: Map<string, StoredArray | null>;
  readonly report: (problem: Problem) => void;
}

const longestText = 1_048_576;

/** A text file in UTF-8, null where it cannot be read. */
export function readText(reading: Reading, folder: string, name: string, where: Place): string | null {
  const found = findInside(reading.root, folder, name, where);
  if (found.kind === 'refused') {
    reading.report(found.problem);
    return null;
  }
  const bytes = reporting(reading, where, () => textBytes(found.file, name));
  if (bytes === null) return null;
  reading.inputs.set(found.file.path, { path: found.file.path, sha256: createHash('sha256').update(bytes).digest('hex'), bytes: bytes.length });
  try {
    return new TextDecoder('utf-8', { fatal: true }).decode(bytes);
  } catch {
    reading.report({ what: 'a text file is not UTF-8', where, found: found.file.path, expected: 'text in UTF-8', remedy: 'save the file again as UTF-8' });
    return null;
  }
}

function textBytes(file: InsideFile, name: string): Uint8Array {
  return withRegularFile(file.real, name, (open) => {
    if (open.bytes > longestText) {
      throw new ArrayFault('a text file is too long', {
        found: `${name} has ${String(open.bytes)} bytes`,
        expected: `at most ${String(longestText)} bytes`,
        remedy: 'check that this is the file you meant; put long lists of numbers into array files',
      });
    }
    const bytes = new Uint8Array(open.bytes);
    readExactly(open, bytes, 0, name);
    return bytes;
  });
}

/** The array behind a reference, every value finite; null where it cannot be used. */
export function readArray(reading: Reading, folder: string, reference: ArrayReference, where: Place): NumericArray | null {
  if (typeof reference !== 'string') return reporting(reading, where, () => inlineArray(reference, where.path ?? 'the list'));
  const format = reporting(reading, where, () => fileReference(reference));
  if (format === null) return null;
  const found = findInside(reading.root, folder, format.file, where);
  if (found.kind === 'refused') {
    reading.report(found.problem);
    return null;
  }
  const key = found.file.path + reference.slice(format.file.length);
  const known = reading.arrays.get(key);
  if (known !== undefined) return known;
  const array = openInspected(reading, format, found.file, where);
  reading.arrays.set(key, array);
  return array;
}

function openInspected(reading: Reading, format: FileReference, file: InsideFile, where: Place): StoredArray | null {
  return reporting(reading, where, () => {
    const array = format.open(file.real);
    const { sha256, bytes, unusable } = array.inspect();
    reading.inputs.set(file.path, { path: file.path, sha256, bytes });
    if (unusable === null) return array;
    reading.report(unusableProblem(array, unusable, where));
    return null;
  });
}

function unusableProblem(array: NumericArray, { value, count, row, column }: Unusable, where: Place): Problem {
  const place = array.shape.length < 2 ? `index ${String(row)}` : `row ${String(row)}, column ${String(column)}`;
  const others = count === 1 ? 'the only one' : `the first of ${String(count)} such values`;
  const finite = value === 'NaN' || value.endsWith('infinity');
  return {
    what: finite ? 'an array holds values that are not finite' : 'an array holds values that are not exact',
    where,
    found: `${array.name}: ${value} at ${place} (counted from 0), ${others}`,
    expected: finite ? 'finite numbers only' : 'integers up to 2^53 in size',
    remedy: finite ? 'mend what wrote the file; where a simulation failed, leave out its row and its seed' : 'use smaller integers: seeds only need to differ',
  };
}

/** Runs an action and reports a fault of an array at the place that named it. */
export function reporting<T>(reading: Reading, where: Place, action: () => T): T | null {
  try {
    return action();
  } catch (error) {
    if (!(error instanceof ArrayFault)) throw error;
    reading.report(problemOf(error, where));
    return null;
  }
}

function problemOf(fault: ArrayFault, where: Place): Problem {
  return { what: fault.message, where, found: fault.found, expected: fault.expected, remedy: fault.remedy };
}

/** Rows whose faults, should the file change after loading, carry their place. */
export function placedRows(source: RowSource, where: Place): RowSource {
  const read = (start: number, count: number): Float64Array => {
    try {
      return source.read(start, count);
    } catch (error) {
      throw error instanceof ArrayFault ? new InputError([problemOf(error, where)]) : error;
    }
  };
  return { rows: source.rows, columns: source.columns, read };
}
