import { describe, expect, it } from 'vitest';
import { seededBits, shuffled } from '../../src/forecast/random.js';
import { range } from './seeded-study.js';

describe('seeded bits', () => {
  it('are the same from the same text and others from another', () => {
    const words = (seed: string): number[] => {
      const bits = seededBits(seed);
      return range(5).map(() => bits());
    };
    expect(words('a study')).toEqual(words('a study'));
    expect(words('a study')).not.toEqual(words('a studz'));
    expect(new Set(range(1000).map((k) => words(String(k))[0])).size).toBe(1000);
  });

  it('are whole numbers of 32 bits, each bit set half of the time', () => {
    const bits = seededBits('bits');
    const set = new Array<number>(32).fill(0);
    const count = 20_000;
    for (let k = 0; k < count; k += 1) {
      const word = bits();
      expect(Number.isInteger(word) && word >= 0 && word < 2 ** 32).toBe(true);
      for (let b = 0; b < 32; b += 1) set[b] = set[b]! + ((word >>> b) & 1);
    }
    // Binomial: deviation sqrt(n)/2; four of them for 32 bits.
    for (const ones of set) expect(Math.abs(ones - count / 2)).toBeLessThan(4 * (Math.sqrt(count) / 2));
  });

  it('have no correlation from one word to the next in the bit that signs use', () => {
    const bits = seededBits('signs');
    const count = 20_000;
    let sum = 0;
    let last = (bits() & 0x8000) === 0 ? -1 : 1;
    for (let k = 0; k < count; k += 1) {
      const sign = (bits() & 0x8000) === 0 ? -1 : 1;
      sum += sign * last;
      last = sign;
    }
    expect(Math.abs(sum)).toBeLessThan(4 * Math.sqrt(count));
  });
});

describe('a shuffle', () => {
  it('is a permutation, each place as likely as another', () => {
    const bits = seededBits('shuffle');
    const size = 6;
    const trials = 6000;
    const counts = new Array<number>(size * size).fill(0);
    for (let k = 0; k < trials; k += 1) {
      const order = shuffled(size, bits);
      expect([...order].sort()).toEqual(range(size));
      order.forEach((value, place) => {
        counts[size * place + value] = counts[size * place + value]! + 1;
      });
    }
    // Expected 1000 each with deviation 29; 36 cells: 4.2 deviations.
    for (const count of counts) expect(Math.abs(count - trials / size)).toBeLessThan(4.2 * Math.sqrt((trials / size) * (1 - 1 / size)));
    expect(Array.from(shuffled(0, bits))).toEqual([]);
    expect(Array.from(shuffled(1, bits))).toEqual([0]);
  });
});
