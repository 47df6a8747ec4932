import { createHash } from 'node:crypto';
import { appendFileSync, mkdtempSync, rmSync, truncateSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { openNpy } from '../../src/arrays/npy.js';
import { npyBytes, npyFile } from '../fixtures/npy-writer.js';
import { makePipe } from '../fixtures/pipe.js';
import { faultText } from './fault-text.js';

const folder = mkdtempSync(path.join(tmpdir(), 'sigmafolio-npy-'));
afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

let files = 0;
function written(bytes: Uint8Array): string {
  files += 1;
  const file = path.join(folder, `${String(files)}.npy`);
  writeFileSync(file, bytes);
  return file;
}
const open = (bytes: Uint8Array) => openNpy(written(bytes), 'x.npy');
const header = (descr: string, shape: string, fortran = 'False') => `{'descr': '${descr}', 'fortran_order': ${fortran}, 'shape': ${shape}, }`;
const bytesOf = (items: ArrayBufferView) => new Uint8Array(items.buffer, items.byteOffset, items.byteLength);

describe('reading rows', () => {
  const values = Float64Array.from({ length: 700 * 9 }, (_, i) => Math.sin(i));

  it('gives any block of rows, whatever was read before', () => {
    const rows = open(npyBytes({ shape: [700, 9], values })).rows();
    for (const [start, count] of [[0, 3], [650, 50], [7, 300], [699, 1], [0, 0], [0, 700]] as const) {
      expect(Array.from(rows.read(start, count))).toEqual(Array.from(values.subarray(start * 9, (start + count) * 9)));
    }
  });

  it('gives the same rows from Fortran order, also in blocks', () => {
    const columnwise = Float64Array.from({ length: values.length }, (_, i) => values[(i % 700) * 9 + Math.floor(i / 700)]!);
    const array = open(npyFile(header('<f8', '(700, 9)', 'True'), bytesOf(columnwise)));
    expect(Array.from(array.rows().read(13, 300))).toEqual(Array.from(values.subarray(13 * 9, 313 * 9)));
    expect(Array.from(array.values())).toEqual(Array.from(values));
  });

  it('gives float32 as the float64 of the same value', () => {
    const rows = open(npyBytes({ shape: [700, 9], values, type: '<f4' })).rows();
    expect(Array.from(rows.read(1, 2))).toEqual(Array.from(values.subarray(9, 27), Math.fround));
  });

  it('treats rows outside of the array as a bug of the caller', () => {
    expect(() => open(npyBytes({ shape: [3, 2], values: [1, 2, 3, 4, 5, 6] })).rows().read(2, 2)).toThrow(new RangeError('rows 2 to 4 of 3 were asked for'));
  });

  it('lets a vector serve as one column', () => {
    const rows = open(npyBytes({ shape: [3], values: [1, 2, 3] })).rows();
    expect([rows.rows, rows.columns, ...rows.read(1, 2)]).toEqual([3, 1, 2, 3]);
  });

  it('reads float16 as IEEE 754 binary16 defines it, with subnormals', () => {
    // Source: the limits of binary16 in IEEE 754-2008, table 3.5 (11-bit precision, emax 15).
    const array = open(npyFile(header('<f2', '(7,)'), bytesOf(Uint16Array.of(0x0001, 0x03ff, 0x0400, 0x3c01, 0x7bff, 0xc000, 0x8000))));
    expect(Array.from(array.values())).toEqual([2 ** -24, 1023 * 2 ** -24, 2 ** -14, 1 + 2 ** -10, 65504, -2, -0]);
  });

  it('reads all 63488 finite patterns of float16 as NumPy does', () => {
    // Source: NumPy 2.4.6, SHA-256 of numpy.arange(65536, dtype='u2').view('f2'), finite ones only, as '<f8' bytes.
    const array = open(npyFile(header('<f2', '(65536,)'), bytesOf(Uint16Array.from({ length: 65536 }, (_, bits) => bits))));
    const finite = array.values().filter((value) => Number.isFinite(value));
    expect(finite).toHaveLength(63488);
    expect(createHash('sha256').update(bytesOf(finite)).digest('hex')).toBe('aa36751fa3d7a1ad367c17b8505f04d7c8b01bb1eb0dec00b0f1c4ee444d56d3');
  });

  it('reads the long integers of Python 2 headers', () => {
    expect(Array.from(open(npyFile(header('<f8', '(2L, 1L)'), bytesOf(Float64Array.of(5, 6)))).values())).toEqual([5, 6]);
  });
});

describe('values that cannot be computed with', () => {
  const spoilt = (place: number, value: number) => Float64Array.from({ length: 600_000 }, (_, i) => (i >= place && (i - place) % 100_000 === 0 ? value : 1));

  it('names the row and the column of the first NaN and counts them all, across blocks', () => {
    const { unusable } = open(npyBytes({ shape: [200_000, 3], values: spoilt(300_001, NaN) })).inspect();
    expect(unusable).toEqual({ count: 3, row: 100_000, column: 1, value: 'NaN' });
  });

  it('names infinities by their sign', () => {
    expect(open(npyBytes({ shape: [2, 2], values: [1, 2, 3, -Infinity] })).inspect().unusable).toEqual({ count: 1, row: 1, column: 1, value: '-infinity' });
    expect(open(npyBytes({ shape: [2, 2], values: [1, 2, Infinity, NaN] })).inspect().unusable).toEqual({ count: 2, row: 1, column: 0, value: 'infinity' });
  });

  it('finds the row and the column in Fortran order too', () => {
    const data = bytesOf(Float64Array.of(1, 2, 3, 4, NaN, 6));
    expect(open(npyFile(header('<f8', '(3, 2)', 'True'), data)).inspect().unusable).toEqual({ count: 1, row: 1, column: 1, value: 'NaN' });
  });

  it('finds infinity in float16', () => {
    expect(open(npyFile(header('<f2', '(1, 2)'), bytesOf(Uint16Array.of(0, 0x7c00)))).inspect().unusable).toEqual({ count: 1, row: 0, column: 1, value: 'infinity' });
  });

  it('refuses integers that float64 would round, and no others', () => {
    const exact = bytesOf(BigInt64Array.of(2n ** 53n, -(2n ** 62n)));
    expect(open(npyFile(header('<i8', '(2,)'), exact)).inspect().unusable).toBeNull();
    const inexact = bytesOf(BigUint64Array.of(1n, 2n ** 53n + 1n));
    expect(open(npyFile(header('<u8', '(2,)'), inexact)).inspect().unusable).toEqual({ count: 1, row: 1, column: 0, value: 'an integer that float64 cannot hold exactly' });
  });
});

describe('files that are no arrays', () => {
  const notNpy = (kind: string) => `a file is not an NPY array\nx.npy starts like ${kind}\na file written by numpy.save\nsave the array with numpy.save`;
  const text = (content: string) => new TextEncoder().encode(content);

  it.each([
    ['a ZIP archive', text('PK\x03\x04 and so on'), notNpy('a ZIP archive (an NPZ file?)')],
    ['HDF5', Uint8Array.of(0x89, 0x48, 0x44, 0x46, 13, 10, 26, 10), notNpy('an HDF5 file')],
    ['a pickle', Uint8Array.of(0x80, 4, 0x95, 0), notNpy('a pickle, which is never executed')],
    ['text', text('1.0 2.0 3.0\n'), notNpy('text')],
    ['anything else', Uint8Array.of(0, 1, 2, 3), notNpy('something else')],
    ['an empty file', new Uint8Array(0), 'a file is not an NPY array\nx.npy is empty\na file written by numpy.save\nsave the array with numpy.save'],
  ])('says that %s is none', (_, bytes, message) => {
    expect(faultText(() => open(bytes))).toBe(message);
  });

  it('refuses versions that do not exist', () => {
    const bytes = npyBytes({ shape: [1], values: [1] });
    bytes[6] = 4;
    expect(faultText(() => open(bytes))).toBe('an NPY version is not known\nx.npy says version 4.0\nversion 1.0, 2.0 or 3.0\nsave the array again with numpy.save');
  });

  it.each([8, 9, 11, 60])('says that a file of %i bytes ends inside its header', (length) => {
    const message = `an array file ends inside its header\nx.npy holds ${String(length)} bytes\na whole NPY header, and the array behind it\ncopy or save the file again: it was cut off`;
    expect(faultText(() => open(npyBytes({ shape: [1], values: [1] }).slice(0, length)))).toBe(message);
  });

  it('claims no memory for a header that says it is long', () => {
    const bytes = Uint8Array.of(0x93, 0x4e, 0x55, 0x4d, 0x50, 0x59, 2, 0, 0xff, 0xff, 0xff, 0xff, 0x20);
    expect(faultText(() => open(bytes))).toBe(
      'an NPY header is too long\nx.npy says its header has 4294967295 bytes\nat most 65535 bytes\nsave the array again with numpy.save, as plain numbers',
    );
  });

  it.each(['(99999999999999999999, 99999999999999999999)', '(4294967296, 4294967296)', '(9007199254740993,)'])('claims no memory for the shape %s', (shape) => {
    const sizes = shape.match(/\d+/g)!.map(BigInt);
    const needed = sizes.reduce((product, size) => product * size, 8n);
    expect(faultText(() => open(npyFile(header('<f8', shape), new Uint8Array(16))))).toBe(
      `an array file is shorter than its header says\nx.npy holds 16 bytes of data\n${String(needed)} bytes, for the shape [${sizes.join(', ')}] in its header\ncopy or save the file again: it was cut off`,
    );
  });

  it('refuses an absurd size beside a 0, which needs no bytes', () => {
    expect(faultText(() => open(npyFile(header('<f8', '(0, 99999999999999999999)'), new Uint8Array(0))))).toBe(
      'an array has a shape that is not read\nx.npy has the shape [0, 99999999999999999999]\nat most two dimensions: realisations, then entries\nreshape the array before saving it, one row for each realisation',
    );
  });

  it.each([
    "{'descr': '<f8', 'fortran_order': False, 'shape': (-1,), }",
    "{'descr': '<f8', 'fortran_order': 0, 'shape': (1,), }",
    "{'descr': '<f8', 'fortran_order': False, 'shape': 1, }",
    "{'descr': '<f8', 'fortran_order': False, 'shape': (1), }",
    "{'descr': '<f8', 'fortran_order': False, 'shape': (1,), 'more': 1}",
    "{'descr': '<f8', 'shape': (1,)}",
    "{'descr': '<f8', 'descr': '<f8', 'fortran_order': False, 'shape': (1,)}",
    "__import__('os').system('true')",
    "{'descr': '<f8', 'fortran_order': False, 'shape': (1,), } + 1",
  ])('refuses the header %s', (text) => {
    expect(faultText(() => open(npyFile(text, new Uint8Array(8))))).toBe(
      `an NPY header is damaged\nx.npy says ${JSON.stringify(text.slice(0, 80))}\na dictionary of exactly 'descr', 'fortran_order' and 'shape'\ncopy or save the file again`,
    );
  });

  it.each([
    ['<f16', 'something that is not read'],
    ['=f8', 'something that is not read'],
    ['|f8', 'something that is not read'],
    ['<i3', 'something that is not read'],
    ['<M8[s]', 'dates or durations'],
    ['|V8', 'raw bytes'],
    ['|S8', 'text'],
  ])('refuses the type %s', (type, kind) => {
    expect(faultText(() => open(npyFile(header(type, '(1,)'), new Uint8Array(8))))).toBe(
      `an array does not hold plain numbers\nx.npy holds ${kind} (type ${type})\nbool, integers of 1 to 8 bytes, or floats of 2, 4 or 8 bytes\nsave it as float64: numpy.save(file, array.astype("<f8"))`,
    );
  });
});

describe('files that are not ordinary', () => {
  it('does not wait for a pipe, and opens no folder', () => {
    const pipe = path.join(folder, 'pipe.npy');
    makePipe(pipe);
    const message = 'a path is not a file\nx.npy is a folder, a pipe or a device\nan ordinary file\nname the file that holds the data';
    expect(faultText(() => openNpy(pipe, 'x.npy'))).toBe(message);
    expect(faultText(() => openNpy(folder, 'x.npy'))).toBe(message);
    expect(faultText(() => openNpy('/dev/zero', 'x.npy'))).toBe(message);
  });

  it('refuses to go on with a file that changed since it was opened', () => {
    const file = written(npyBytes({ shape: [2, 2], values: [1, 2, 3, 4] }));
    const rows = openNpy(file, 'x.npy').rows();
    expect(rows.read(0, 2)).toHaveLength(4);
    const message =
      'a file changed while it was read\nx.npy is not what it was when the study was loaded\nfiles that stay as they are until the build is done\nwait until whatever writes the file has finished, then build again';
    appendFileSync(file, 'x');
    expect(faultText(() => rows.read(0, 2))).toBe(message);
    truncateSync(file, 100);
    expect(faultText(() => rows.read(0, 2))).toBe(message);
  });

  it('holds at most 2^27 values at once', () => {
    // Sparse: the file says 1 GiB and takes no room on the disk.
    const file = written(npyFile(header('|u1', '(134217729,)'), new Uint8Array(0)));
    truncateSync(file, 128 + 134_217_729);
    expect(faultText(() => openNpy(file, 'x.npy').values())).toBe(
      'an array is too large to be held at once\nx.npy has the shape [134217729]\nat most 134217728 values\ncheck that this is the file you meant',
    );
  });
});
