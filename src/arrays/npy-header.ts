import { ArrayFault } from './fault.js';
import type { NumberType } from './number-type.js';
import { numberType } from './number-type.js';
import type { PythonValue } from './python-literal.js';
import { parsePythonLiteral } from './python-literal.js';
import { shapeText } from './stored-array.js';

/** What an NPY file says of itself. Format: NumPy Enhancement Proposal 1 and numpy.lib.format, versions 1.0 to 3.0. */
export interface NpyHeader {
  readonly shape: readonly number[];
  /** Columns one after the other, rather than rows. */
  readonly fortran: boolean;
  readonly type: NumberType;
  /** Where the first item stands. */
  readonly start: number;
}

// NumPy's own headers of plain numbers stay below 200 bytes; no array that is read here needs more than this.
const longestHeader = 65_535;

/**
 * Reads and checks the header, the type, and that the shape fits the size of the file: an absurd shape claims no memory.
 * @param read gives `length` bytes from `position`, or fewer at the end of the file
 */
export function readNpyHeader(name: string, fileBytes: number, read: (position: number, length: number) => Uint8Array): NpyHeader {
  const { start, length, version } = readPreamble(name, fileBytes, read);
  const text = new TextDecoder(version === 3 ? 'utf-8' : 'latin1').decode(read(start, length));
  const header = parsePythonLiteral(text);
  if (!isDictionary(header) || header.size !== 3 || !header.has('descr')) throw badHeader(name, text);
  const order = header.get('fortran_order');
  const shape = header.get('shape');
  if (typeof order !== 'boolean' || !isShape(shape)) throw badHeader(name, text);
  const type = knownType(name, header.get('descr') ?? null);
  const dimensions = fittingShape(name, shape, BigInt(type.size), BigInt(fileBytes - start - length));
  return { shape: dimensions, fortran: order, type, start: start + length };
}

interface Preamble {
  readonly start: number;
  readonly length: number;
  readonly version: number;
}

function readPreamble(name: string, fileBytes: number, read: (position: number, length: number) => Uint8Array): Preamble {
  const bytes = read(0, 12);
  const magic = [0x93, 0x4e, 0x55, 0x4d, 0x50, 0x59];
  if (!magic.every((byte, i) => bytes[i] === byte)) throw notNpy(name, fileBytes, bytes);
  const version = bytes[6] ?? 0;
  if (version < 1 || version > 3 || bytes[7] !== 0) {
    throw new ArrayFault('an NPY version is not known', {
      found: `${name} says version ${String(version)}.${String(bytes[7] ?? 0)}`,
      expected: 'version 1.0, 2.0 or 3.0',
      remedy: 'save the array again with numpy.save',
    });
  }
  const start = version === 1 ? 10 : 12;
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.length);
  if (bytes.length < start) throw cutHeader(name, fileBytes);
  const length = version === 1 ? view.getUint16(8, true) : view.getUint32(8, true);
  if (length > longestHeader) {
    throw new ArrayFault('an NPY header is too long', {
      found: `${name} says its header has ${String(length)} bytes`,
      expected: `at most ${String(longestHeader)} bytes`,
      remedy: 'save the array again with numpy.save, as plain numbers',
    });
  }
  if (start + length > fileBytes) throw cutHeader(name, fileBytes);
  return { start, length, version };
}

function cutHeader(name: string, fileBytes: number): ArrayFault {
  return new ArrayFault('an array file ends inside its header', {
    found: `${name} holds ${String(fileBytes)} bytes`,
    expected: 'a whole NPY header, and the array behind it',
    remedy: 'copy or save the file again: it was cut off',
  });
}

function notNpy(name: string, fileBytes: number, bytes: Uint8Array): ArrayFault {
  return new ArrayFault('a file is not an NPY array', {
    found: fileBytes === 0 ? `${name} is empty` : `${name} starts like ${likelyKind(bytes)}`,
    expected: 'a file written by numpy.save',
    remedy: 'save the array with numpy.save',
  });
}

function likelyKind(bytes: Uint8Array): string {
  const start = String.fromCharCode(...bytes.subarray(0, 4));
  if (start.startsWith('PK')) return 'a ZIP archive (an NPZ file?)';
  if (start === '\x89HDF') return 'an HDF5 file';
  if (start.startsWith('\x80')) return 'a pickle, which is never executed';
  if (bytes.every((byte) => byte >= 0x20 ? byte < 0x7f : byte === 9 || byte === 10 || byte === 13)) return 'text';
  return 'something else';
}

function badHeader(name: string, text: string): ArrayFault {
  return new ArrayFault('an NPY header is damaged', {
    found: `${name} says ${JSON.stringify(text.trim().slice(0, 80))}`,
    expected: "a dictionary of exactly 'descr', 'fortran_order' and 'shape'",
    remedy: 'copy or save the file again',
  });
}

function isDictionary(value: PythonValue | undefined): value is ReadonlyMap<string, PythonValue> {
  return value instanceof Map;
}

function isShape(value: PythonValue | undefined): value is readonly bigint[] {
  return Array.isArray(value) && value.every((size) => typeof size === 'bigint');
}

function knownType(name: string, descr: PythonValue): NumberType {
  const type = typeof descr === 'string' ? numberType(descr) : undefined;
  if (type !== undefined) return type;
  throw new ArrayFault('an array does not hold plain numbers', {
    found: typeof descr === 'string' ? `${name} holds ${kindOfType(descr)} (type ${descr})` : `${name} holds structured records`,
    expected: 'bool, integers of 1 to 8 bytes, or floats of 2, 4 or 8 bytes',
    remedy: 'save it as float64: numpy.save(file, array.astype("<f8"))',
  });
}

function kindOfType(descr: string): string {
  if (/^[<>|=]?O/.test(descr)) return 'pickled objects, which are never executed';
  if (/^[<>|=]?c/.test(descr)) return 'complex numbers';
  if (/^[<>|=]?[SUa]/.test(descr)) return 'text';
  if (/^[<>|=]?[mM]/.test(descr)) return 'dates or durations';
  if (/^[<>|=]?V/.test(descr)) return 'raw bytes';
  return 'something that is not read';
}

function fittingShape(name: string, shape: readonly bigint[], itemBytes: bigint, dataBytes: bigint): readonly number[] {
  const needed = shape.reduce((product, size) => product * size, itemBytes);
  if (needed !== dataBytes) {
    const short = dataBytes < needed;
    throw new ArrayFault(`an array file is ${short ? 'shorter' : 'longer'} than its header says`, {
      found: `${name} holds ${String(dataBytes)} bytes of data`,
      expected: `${String(needed)} bytes, for the shape ${shapeText(shape)} in its header`,
      remedy: short ? 'copy or save the file again: it was cut off' : 'save the array again: something was appended to the file',
    });
  }
  if (shape.length > 2 || shape.some((size) => size > BigInt(Number.MAX_SAFE_INTEGER))) {
    throw new ArrayFault('an array has a shape that is not read', {
      found: `${name} has the shape ${shapeText(shape)}`,
      expected: 'at most two dimensions: realisations, then entries',
      remedy: 'reshape the array before saving it, one row for each realisation',
    });
  }
  return shape.map(Number);
}
