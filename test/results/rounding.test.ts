import { describe, expect, it } from 'vitest';
import { asGiven, count, decimalsFor, percent, roundTo, significant, withError, withInterval } from '../../src/results/rounding.js';

const thin = '\u202f';

describe('roundTo', () => {
  it.each([
    [0.034064231309283904, 0.004808103836961838, '0.0341'],
    [1.3022530155571048, 0.1846, '1.30'],
    [1.4011140831445044, 0.035, '1.401'],
    // An uncertainty of 0.0996 has two digits as 0.10, not as 0.0996.
    [1.23456, 0.0996, '1.23'],
    [-0.4512, 0.031, '\u22120.451'],
    [1234.56, 210, '1230'],
    [0, 0.012, '0.000'],
  ])('shows %d with a standard error of %d as %s', (value, standardError, text) => {
    expect(roundTo(value, standardError)).toBe(text);
  });

  it('shows at most five digits, however small the uncertainty', () => {
    expect(roundTo(0.009989940901775397, 3.5e-7)).toBe('0.0099899');
  });

  it('shows three digits of a value whose uncertainty is not known', () => {
    expect(roundTo(0.0191146919, null)).toBe('0.0191');
    expect(roundTo(0.0191146919, 0)).toBe('0.0191');
  });

  it('takes a power of ten outside ordinary sizes', () => {
    expect(roundTo(3.2165e-7, 4.1e-9)).toBe(`3.217${thin}×${thin}10⁻⁷`);
    expect(roundTo(-4.5612e8, 2.3e6)).toBe(`\u22124.561${thin}×${thin}10⁸`);
  });

  it('never writes a negative zero', () => {
    expect(roundTo(-0.0001, 0.5)).toBe('0.00');
  });
});

describe('intervals', () => {
  it('gives the ends as many decimals as the value', () => {
    expect(withInterval(1.3022530155571048, 0.1846, [1.130112075857662, 1.5006148087043076])).toBe('1.30 (1.13 to 1.50)');
  });

  it('leaves an interval out that does not exist', () => {
    expect(withInterval(1.3, null, null)).toBe('1.30');
  });

  it('gives value and standard error the same decimals', () => {
    expect(withError(0.034064231309283904, 0.004808103836961838)).toBe('0.0341 ± 0.0048');
  });

  it('shows no standard error of zero', () => {
    expect(withError(0.009989940901775397, 3.5e-9)).toBe('0.0099899');
  });

  it('keeps one power of ten for all parts', () => {
    expect(withInterval(3.2165e-7, 4.1e-8, [2.8e-7, 3.6e-7])).toBe(
      `3.22${thin}×${thin}10⁻⁷ (2.80${thin}×${thin}10⁻⁷ to 3.60${thin}×${thin}10⁻⁷)`,
    );
  });
});

describe('numbers without an uncertainty', () => {
  it('rounds to significant digits', () => {
    expect(significant(0.98865910607)).toBe('0.989');
    expect(significant(0.98865910607, 5)).toBe('0.98866');
    expect(significant(13402.57)).toBe(`13${thin}400`);
    expect(significant(0)).toBe('0.00');
  });

  it('shows an input as it was given', () => {
    expect(asGiven(0.3)).toBe('0.3');
    expect(asGiven(-16.5)).toBe('\u221216.5');
    expect(asGiven(1e-9)).toBe(`1${thin}×${thin}10⁻⁹`);
    expect(asGiven(-0)).toBe('0');
  });

  it('shows shares as percentages of two digits', () => {
    expect(percent(0.0347)).toBe(`3.5${thin}%`);
    expect(percent(0.2741)).toBe(`27${thin}%`);
    expect(percent(0.0004)).toBe(`less than 0.1${thin}%`);
    expect(percent(0)).toBe(`0.0${thin}%`);
    expect(percent(-0.05)).toBe(`\u22125.0${thin}%`);
  });

  it('sets thousands apart from five digits on', () => {
    expect(count(1500)).toBe('1500');
    expect(count(1234567)).toBe(`1${thin}234${thin}567`);
  });
});

describe('decimalsFor', () => {
  it('loses no digit of the uncertainty for values over many powers of ten', () => {
    for (let power = -12; power <= 12; power += 1) {
      expect(decimalsFor(4.2 * 10 ** power, 0.13 * 10 ** power), String(power)).toBe(2 - power);
    }
  });
});
