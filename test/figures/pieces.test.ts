import { describe, expect, it } from 'vitest';
import { cellPaths } from '../../src/figures/data-correlation.js';
import { arrangeGains } from '../../src/figures/gain-rows.js';
import { glyphs, marks, plainText } from '../../src/figures/glyphs.js';
import { logTicks } from '../../src/figures/log-ticks.js';
import { lookOf } from '../../src/figures/palette.js';
import { tick } from '../../src/figures/panels.js';
import { drawnResults } from './drawn-results.js';

describe('TeX labels', () => {
  it.each([
    ['\\Omega_\\mathrm{m}', 'Ω_m'],
    ['\\sigma_8', 'σ_8'],
    ['f\\sigma_8', 'fσ_8'],
    ['10^{-3}', '10^−3'],
    ['\\hat{\\theta}_{\\rm x}', 'θ\u0302_x'],
    ['\\ell^2 C_\\ell', 'ℓ^2 C_ℓ'],
    ['\\unknown{x}', 'unknownx'],
    ['}{_', '_'],
    ['', ''],
  ])('%s reads %s', (tex, text) => {
    expect(plainText(tex)).toBe(text);
  });

  it('mark where a shift begins and where it ends', () => {
    expect(glyphs('a_{b^c}d')).toBe(`a${marks.sub}bc${marks.base}d`);
  });

  it('cannot smuggle marks in', () => {
    expect(glyphs(`a${marks.sub}b`)).toBe('ab');
  });

  it('end, however broken the source is', () => {
    for (const tex of ['{'.repeat(50), '\\', '_', '^{', '\\hat', '}}}']) expect(typeof plainText(tex)).toBe('string');
  });
});

describe('ticks of a logarithmic axis', () => {
  it('are round, inside, and few', () => {
    expect(logTicks([0.9, 2.1], 9)).toEqual([0.9, 1, 1.2, 1.4, 1.6, 1.8, 2]);
    expect(logTicks([0.005, 0.02], 5)).toEqual([0.005, 0.007, 0.01, 0.015, 0.02]);
    expect(logTicks([1, 1e6], 4)).toEqual([1, 100, 10_000, 1_000_000]);
  });

  it('are linear where the axis is short', () => {
    expect(logTicks([0.01715, 0.0178], 5)).toEqual([0.0172, 0.0174, 0.0176, 0.0178]);
  });

  it('have labels without padding and with a real minus sign', () => {
    expect([0, 0.1, 1500, 1e-5, -2].map(tick)).toEqual(['0', '0.1', '1500', '1e−5', '−2']);
  });
});

it('twelve combinations look different from one another', () => {
  const looks = Array.from({ length: 12 }, (_, k) => JSON.stringify(lookOf(k)));
  expect(new Set(looks).size).toBe(12);
});

it('the rows of the gains are every parameter in every added combination, in order, from top to bottom', () => {
  const { rows } = arrangeGains(drawnResults({ parameters: 2, added: 2 }), 'fixed', 0);
  expect(rows.map(({ parameter, combination }) => `${parameter} ${combination}`)).toEqual(['p0 joint0', 'p0 joint1', 'p1 joint0', 'p1 joint1']);
  expect(rows.every(({ place }, k) => k === 0 || place > rows[k - 1]!.place)).toBe(true);
});

it('cells of one strength are one path, and cells near zero are left out', () => {
  const paths = cellPaths([
    [1, 0.01],
    [0.01, 1],
  ]);
  expect([...paths.keys()]).toEqual([20]);
  expect(paths.get(20)).toBe('M0,0h268v268H0zM268,268h268v268H268z');
});
