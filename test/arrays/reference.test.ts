import { describe, expect, it } from 'vitest';
import { inlineArray } from '../../src/arrays/inline.js';
import { fileReference } from '../../src/arrays/reference.js';
import { faultText } from './fault-text.js';

describe('references to files', () => {
  it('reads .npy, however it is spelt', () => {
    expect(fileReference('a/b.NPY').file).toBe('a/b.NPY');
  });

  it.each(['a.npz#x', 'a.h5#/group/set', 'a.csv', 'a.txt', 'a'])('says that %s is not read by this version', (name) => {
    expect(faultText(() => fileReference(name))).toBe(
      `a kind of array file is not read by this version\n${name}\na .npy file, or a list of numbers\nsave the array with numpy.save, and name that file here`,
    );
  });

  it('says that an NPY file has no names inside', () => {
    expect(faultText(() => fileReference('a.npy#x'))).toBe('a file holds one array only\na.npy#x\na.npy\nremove the # and what follows: a .npy file has no names inside');
  });
});

describe('arrays that are written out', () => {
  it('takes a list as a vector and a list of lists as a matrix', () => {
    expect(inlineArray([1, 2, 3], 'x').shape).toEqual([3]);
    const matrix = inlineArray([[1, 2], [3, 4], [5, 6]], 'x');
    expect(matrix.shape).toEqual([3, 2]);
    expect(Array.from(matrix.rows().read(1, 2))).toEqual([3, 4, 5, 6]);
    expect(Array.from(matrix.values())).toEqual([1, 2, 3, 4, 5, 6]);
  });

  it('refuses rows of different lengths', () => {
    expect(faultText(() => inlineArray([[1, 2], [3]], 'x'))).toBe(
      'a list is neither a vector nor a matrix\nitem 1 (counted from 0) of x is not like the first\nnumbers only, or rows of numbers of one length\nwrite every row with the same number of values',
    );
  });

  it('says that lists of files come later', () => {
    expect(faultText(() => inlineArray(['a.npy', 'b.npy'], 'x'))).toBe(
      'a list of files is not read by this version\nx is a list of 2 names\none .npy file, or a list of numbers\njoin the files into one with numpy.concatenate and numpy.save',
    );
  });
});
