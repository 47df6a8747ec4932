import { describe, expect, it } from 'vitest';
import { attributionRows } from '../../src/figures/attribution.js';
import { outline } from '../../src/figures/ellipses.js';
import { arrangeGains } from '../../src/figures/gain-rows.js';
import { gainDomain } from '../../src/figures/gains.js';
import { roomBeside } from '../../src/figures/room.js';
import { scanPoints } from '../../src/figures/scan.js';
import { fitted, fittedApart, textWidth, wrapped } from '../../src/figures/text-width.js';
import { inventedResults } from '../fixtures/invented-results.js';

const results = inventedResults();

describe('the rows of the gains', () => {
  it('hold the gains of the results, targets first, then the nuisance parameters under a head of their own', () => {
    const { rows, heads, leftOut } = arrangeGains(results, 'marginalised', 0);
    expect(rows).toHaveLength(20);
    for (const { parameter, combination, gain } of rows) expect(gain).toBe(results.improvements[combination]![parameter]!.marginalised);
    expect(heads.map(({ kind, parameter }) => (kind === 'nuisance' ? '—' : parameter))).toEqual(['omega_m', 'sigma_8', 'n_s', 'hubble', '—', 'shear_bias']);
    expect(leftOut).toEqual([]);
  });

  it('leave nuisance parameters to the table where there are too many, and say which', () => {
    const { rows, leftOut } = arrangeGains(inventedResults({ parameters: 30, combinations: 12 }), 'fixed', 0);
    expect(rows).toHaveLength(6 * 11);
    expect(leftOut).toHaveLength(24);
  });

  it('share a range that holds every mark and 1, and that a wild interval cannot blow up', () => {
    const { rows } = arrangeGains(results, 'marginalised', 0);
    const [row] = rows;
    const wild = [{ ...row!, gain: { ...row!.gain, raw: 2, sham: 1.5, corrected: 1.8, interval95: [0.001, 900] as [number, number] } }];
    const [low, high] = gainDomain(wild);
    // Half of the smallest mark to twice the largest, with 3 % of room.
    expect(low).toBeCloseTo(0.5 / 1.03, 12);
    expect(high).toBeCloseTo(4 * 1.03, 12);
  });
});

describe('the rows of the attribution', () => {
  it('hold both parts of every gain on a target that exists, from top to bottom', () => {
    const rows = attributionRows(results, 0);
    // Four targets; of four added combinations one is undetermined and one not assessable.
    expect(rows.map(({ parameter, one }) => `${parameter} ${one.name}`)).toEqual(
      ['omega_m', 'sigma_8', 'n_s', 'hubble'].flatMap((name) => [`${name} power_peaks`, `${name} everything`]),
    );
    for (const { parameter, one, response, degeneracy } of rows) {
      const { marginalised, fixed } = results.improvements[one.name]![parameter]!;
      // Logarithms of numbers near 1, added once: all but the last digits agree.
      expect(response).toBeCloseTo(Math.log(fixed.corrected!), 12);
      expect(response + degeneracy).toBeCloseTo(Math.log(marginalised.corrected!), 12);
    }
    expect(rows.every(({ place }, k) => k === 0 || place > rows[k - 1]!.place)).toBe(true);
  });
});

describe('ellipses', () => {
  it('have every point at the delta chi^2 of the rules', () => {
    const { parameters, covariance } = results.combinations.power_peaks!;
    const matrix = covariance.corrected!;
    const at = (a: string, b: string): number => matrix[parameters.indexOf(a)]![parameters.indexOf(b)]!;
    const [aa, bb, ab] = [at('omega_m', 'omega_m'), at('sigma_8', 'sigma_8'), at('omega_m', 'sigma_8')];
    const points = outline({ covariance: at }, 'omega_m', 'sigma_8', 0.31, 0.79, 6.18);
    expect(points).toHaveLength(73);
    for (const { x, y } of points) {
      const [u, v] = [x - 0.31, y - 0.79];
      // Inverse of a 2 x 2 matrix, written out; correlations of 0.9 leave twelve digits.
      const square = (bb * u * u - 2 * ab * u * v + aa * v * v) / (aa * bb - ab * ab);
      expect(square).toBeCloseTo(6.18, 9);
    }
  });
});

describe('points of a scan', () => {
  it('are the corrected values with their 68 % interval, and gaps where the data cannot tell', () => {
    const values = { raw: [1, 2, 3], corrected: [2, null, 4], relativeStandardError: [0.1, null, null], status: ['settled', 'undetermined', 'settled'] as const };
    const points = scanPoints({ ...results.scan.power!, at: [10, 20, 30] }, { ...values, status: [...values.status] });
    expect(points).toEqual([
      { at: 10, value: 2, low: 2 / Math.exp(0.1), high: 2 * Math.exp(0.1) },
      { at: 20, value: null },
      { at: 30, value: 4, low: 4, high: 4 },
    ]);
  });
});

describe('words beside marks', () => {
  it('come after the last mark where there is room', () => {
    expect(roomBeside([2, 3], [1], [1, 10], 300, 70)).toMatchObject({ anchor: 'start', dx: 10 });
  });

  it('come before the first where there is none after the last', () => {
    expect(roomBeside([6, 9], [], [1, 10], 300, 70)).toMatchObject({ anchor: 'end', dx: -10 });
  });

  it('come between two marks at the edges', () => {
    const { at, anchor } = roomBeside([1.1, 9], [], [1, 10], 300, 70);
    expect(anchor).toBe('middle');
    expect(at).toBeGreaterThan(1.1);
    expect(at).toBeLessThan(9);
  });

  it('cross a line rather than a mark', () => {
    // A line on either side of a mark in the middle, too near for the words.
    const { anchor } = roomBeside([3], [2, 5.5], [1, 10], 200, 80);
    expect(anchor).toBe('start');
  });
});

describe('labels of any length', () => {
  const long = (k: number): string => `calibration of the amplitude in sample number ${String(k)}`;

  it('are cut to their room, with an ellipsis', () => {
    const cut = fitted(long(1), 100);
    expect(cut).toMatch(/^calib.*…$/);
    expect(textWidth(cut)).toBeLessThanOrEqual(100.5);
    expect(fitted('short', 100)).toBe('short');
  });

  it('stay different from one another where only their ends differ', () => {
    const cut = fittedApart([long(1), long(2), 'other'], 120);
    expect(new Set(cut).size).toBe(3);
    for (const one of cut) expect(textWidth(one)).toBeLessThanOrEqual(120.5);
  });

  it('wrap between words, and the last line is cut', () => {
    const lines = wrapped(long(1), 120, 2);
    expect(lines).toHaveLength(2);
    expect(lines[1]).toMatch(/…$/);
    expect(wrapped('two words', 200, 2)).toEqual(['two words']);
  });
});
