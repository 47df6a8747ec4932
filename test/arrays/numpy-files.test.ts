import { createHash } from 'node:crypto';
import { readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { describe, expect, it } from 'vitest';
import { openNpy } from '../../src/arrays/npy.js';
import { faultText } from './fault-text.js';

/*
 * Source of every file here: written by NumPy 2.4.6 itself (numpy.save and numpy.lib.format), one per type, order and version;
 * expected.json holds their shapes and values as NumPy reads them back.
 */
const folder = path.join(import.meta.dirname, '../fixtures/arrays');
const { values: expected } = JSON.parse(readFileSync(path.join(folder, 'expected.json'), 'utf8')) as {
  values: Record<string, { shape: number[]; values: number[] }>;
};
const open = (name: string) => openNpy(path.join(folder, name), name);
const good = readdirSync(folder).filter((name) => name.endsWith('.npy') && !name.startsWith('bad-') && name !== 'three-dimensions.npy');

describe('arrays that NumPy wrote', () => {
  it('are all here', () => {
    expect(good).toHaveLength(22);
  });

  it.each(good)('%s has the shape and the values that NumPy reads, all at once', (name) => {
    const array = open(name);
    expect(array.shape).toEqual(expected[name]!.shape);
    expect(Array.from(array.values())).toEqual(expected[name]!.values);
  });

  it.each(good)('%s has the same values when read row by row, backwards', (name) => {
    const source = open(name).rows();
    const [rows = 1, columns = 1] = expected[name]!.shape;
    expect([source.rows, source.columns]).toEqual([rows, columns]);
    const read: number[][] = [];
    for (let row = rows - 1; row >= 0; row -= 1) read.unshift(Array.from(source.read(row, 1)));
    expect(read.flat()).toEqual(expected[name]!.values);
  });

  it.each(good)('%s is hashed as the file that it is, and found to be finite', (name) => {
    const bytes = readFileSync(path.join(folder, name));
    expect(open(name).inspect()).toEqual({ sha256: createHash('sha256').update(bytes).digest('hex'), bytes: bytes.length, unusable: null });
  });
});

const plainNumbers = 'bool, integers of 1 to 8 bytes, or floats of 2, 4 or 8 bytes\nsave it as float64: numpy.save(file, array.astype("<f8"))';

describe('arrays that are refused', () => {
  it.each([
    ['bad-object.npy', `an array does not hold plain numbers\nbad-object.npy holds pickled objects, which are never executed (type |O)\n${plainNumbers}`],
    ['bad-complex.npy', `an array does not hold plain numbers\nbad-complex.npy holds complex numbers (type <c16)\n${plainNumbers}`],
    ['bad-structured.npy', `an array does not hold plain numbers\nbad-structured.npy holds structured records\n${plainNumbers}`],
    ['bad-text.npy', `an array does not hold plain numbers\nbad-text.npy holds text (type <U2)\n${plainNumbers}`],
    [
      'bad-truncated.npy',
      'an array file is shorter than its header says\nbad-truncated.npy holds 87 bytes of data\n96 bytes, for the shape [3, 4] in its header\ncopy or save the file again: it was cut off',
    ],
    [
      'bad-extra.npy',
      'an array file is longer than its header says\nbad-extra.npy holds 99 bytes of data\n96 bytes, for the shape [3, 4] in its header\nsave the array again: something was appended to the file',
    ],
    [
      'three-dimensions.npy',
      'an array has a shape that is not read\nthree-dimensions.npy has the shape [2, 3, 4]\nat most two dimensions: realisations, then entries\nreshape the array before saving it, one row for each realisation',
    ],
  ])('%s', (name, message) => {
    expect(faultText(() => open(name))).toBe(message);
  });

  it('are all here', () => {
    expect(readdirSync(folder).filter((name) => name.startsWith('bad-'))).toHaveLength(6);
  });
});
