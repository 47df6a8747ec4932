import { describe, expect, it } from 'vitest';
import { nearestName, typingSlips, unknownName } from '../../src/study/nearest-name.js';

describe('typing slips', () => {
  // Source of the pairs: the four kinds of slip of Damerau 1964, one each, and the textbook pair kitten, sitting (3).
  it.each([
    ['values', 'values', 0],
    ['value', 'values', 1],
    ['vallues', 'values', 1],
    ['valies', 'values', 1],
    ['vlaues', 'values', 1],
    ['kitten', 'sitting', 3],
    ['', 'abc', 3],
    ['abc', '', 3],
  ])('between %s and %s are %i', (a, b, slips) => {
    expect(typingSlips(a, b)).toBe(slips);
    expect(typingSlips(b, a)).toBe(slips);
  });
});

describe('the nearest name', () => {
  it('is the one with the fewest slips, the first of equals', () => {
    expect(nearestName('omega_n', ['sigma_8', 'omega_m', 'omega_b'])).toBe('omega_m');
  });

  it('does not mind capitals', () => {
    expect(nearestName('FIDUCIAL', ['fiducial'])).toBe('fiducial');
  });

  it('is none where nothing is near, or the name is absurdly long', () => {
    expect(nearestName('colour', ['name', 'label'])).toBeNull();
    expect(nearestName('x', [])).toBeNull();
    expect(nearestName('a'.repeat(1_000_000), ['a'])).toBeNull();
  });

  it('says so when there is no name at all', () => {
    expect(unknownName('a coordinate', 'k', [], { file: 'study.yaml' })).toEqual({
      what: 'a name is not that of a coordinate',
      where: { file: 'study.yaml' },
      found: 'k',
      expected: 'none is defined',
      remedy: 'remove it',
    });
  });
});
