import { describe, expect, it } from 'vitest';
import { InputError } from '../../src/study/problems.js';
import { formatProblem } from '../../src/study/message.js';
import type { EnsembleDerivative, Realisations, Study } from '../../src/study/study.js';
import { columnsOf, combination, ensembleRun, memoryStudy, momentsRun, parameter, realisations } from '../fixtures/memory-study.js';
import { forecastOf, normalRows, partsOf, range } from './seeded-study.js';

const exact = (size: number): EnsembleDerivative => ({ kind: 'exact', values: new Float64Array(size).fill(1) });

function studyWith(rows: Float64Array, size: number, p0: EnsembleDerivative = exact(size), changes: Partial<Study> = {}): Study {
  return memoryStudy({
    parameters: [parameter('p0')],
    combinations: [combination('base', ['base'])],
    runs: [ensembleRun('run', columnsOf('base', size), realisations(rows, size), { p0 })],
    ...changes,
  });
}

/** The whole text of a refusal. */
function refusal(study: Study): string {
  try {
    forecastOf(study);
  } catch (error) {
    if (error instanceof InputError) return error.problems.map(formatProblem).join('\n');
    throw error;
  }
  return 'not refused';
}

/** Rows with some columns replaced by a function of the others. */
function remade(rows: Float64Array, size: number, change: (row: Float64Array) => void): Float64Array {
  const copy = Float64Array.from(rows);
  for (let start = 0; start < copy.length; start += size) change(copy.subarray(start, start + size));
  return copy;
}

describe('a forecast refuses', () => {
  it('fewer fiducial realisations than entries + 3, and says how many more', () => {
    expect(refusal(studyWith(normalRows(6, 5, 1), 5))).toBe(`error: too few fiducial realisations for the length of the data vector
  where     runs/run/run.yaml  fiducial
  found     6 realisations for the 5 entries of combination base
  expected  more than 7 (entries + 2), and better twice as many as entries
  do        add at least 2 realisations, or cut or rebin the data vector`);
    expect(refusal(studyWith(normalRows(7, 5, 1), 5))).toContain('add at least 1 realisations');
    expect(refusal(studyWith(normalRows(8, 5, 1), 5))).toBe('not refused');
  });

  it('likewise for a covariance that says how many it came from', () => {
    const covariance = { data: Float64Array.from([1, 0, 0, 1]), rows: 2, columns: 2 };
    const run = momentsRun('run', columnsOf('base', 2), { covariance, realisations: 4, derivatives: { p0: { kind: 'exact', values: Float64Array.from([1, 1]) } } });
    expect(refusal(studyWith(new Float64Array(2), 2, exact(2), { runs: [run] }))).toBe(`error: too few fiducial realisations for the length of the data vector
  where     runs/run/run.yaml  realisations
  found     4 realisations for the 2 entries of combination base
  expected  more than 4 (entries + 2), and better twice as many as entries
  do        add at least 1 realisations, or cut or rebin the data vector`);
  });

  it('a constant column, whatever its value', () => {
    for (const value of [0, 0.1, -1e30, 1e-30]) {
      const rows = remade(normalRows(20, 3, 2), 3, (row) => {
        row[1] = value;
      });
      expect(refusal(studyWith(rows, 3))).toBe(`error: a constant column
  where     runs/run/run.yaml  fiducial
  found     column 1 (base, only at x = 2) has no variance over the fiducial realisations
  expected  entries that scatter: a constant one has no covariance to invert
  do        leave the entry out of the vector (an empty bin, or one fixed by normalisation, is the usual cause)`);
    }
  });

  it('a column that is another one times a constant, whatever the constant and the offset', () => {
    for (const [factor, offset] of [[1, 0], [-3, 0], [1e-20, 0], [2, 1e6]] as const) {
      const rows = remade(normalRows(20, 3, 3), 3, (row) => {
        row[2] = factor * (row[0]! + offset);
      });
      expect(refusal(studyWith(rows, 3))).toBe(`error: a duplicated column
  where     runs/run/run.yaml  fiducial
  found     column 2 (base, only at x = 3) is column 0 (base, only at x = 1) times a constant
  expected  entries that are not copies of one another
  do        leave one of the two out of the vector or of the combination`);
    }
  });

  it('a column that is a sum of others, and names it', () => {
    const rows = remade(normalRows(20, 4, 4), 4, (row) => {
      row[3] = 1 - row[0]! - 2 * row[1]! + 0.5 * row[2]!;
    });
    expect(refusal(studyWith(rows, 4))).toBe(`error: a covariance that cannot be inverted
  where     runs/run/run.yaml  fiducial
  found     in combination base, column 3 (base, only at x = 4) is a sum of multiples of entries before it (4 entries, from 20 realisations)
  expected  a positive-definite covariance
  do        leave the entry out (bins that add up to a constant are the usual cause), or look for repeated realisations`);
  });

  it('repeated realisations that leave too low a rank', () => {
    const few = normalRows(4, 6, 5);
    const rows = Float64Array.from(range(5).flatMap(() => Array.from(few)));
    expect(refusal(studyWith(rows, 6))).toMatch(/^error: a covariance that cannot be inverted\n[^]*column 3 [^]*6 entries, from 20 realisations/);
  });

  it('two derivative realisations or fewer, for every parameter that has so few', () => {
    const noisy = (count: number): EnsembleDerivative => ({ kind: 'per realisation', realisations: realisations(normalRows(count, 2, 6), 2) });
    const two = studyWith(normalRows(20, 2, 7), 2);
    const run = ensembleRun('run', columnsOf('base', 2), realisations(normalRows(20, 2, 7), 2), { p0: noisy(2), p1: noisy(1), p2: noisy(3) });
    const study = { ...two, parameters: ['p0', 'p1', 'p2'].map((name) => parameter(name)), runs: [run] };
    const text = (name: string, count: number, missing: number): string => `error: too few derivative realisations
  where     runs/run/run.yaml  derivatives.${name}
  found     ${String(count)} realisations
  expected  at least 3, and tens to hundreds for a number that can be trusted
  do        add at least ${String(missing)} more, or give the derivative as exact: if it has no noise`;
    expect(refusal(study)).toBe(`${text('p0', 2, 1)}\n${text('p1', 1, 2)}`);
    expect(refusal(studyWith(normalRows(20, 2, 7), 2, noisy(3)))).toBe('not refused');
  });

  it('a node with too few realisations, where nodes are not matched', () => {
    const rows = (seeds: readonly number[]): Realisations => realisations(normalRows(seeds.length, 2, 8), 2, seeds);
    const nodes: EnsembleDerivative = { kind: 'nodes', nodes: [{ at: -1, realisations: rows([1, 2, 3, 4]) }, { at: 1, realisations: rows([7, 8]) }] };
    expect(refusal(studyWith(normalRows(20, 2, 9), 2, nodes))).toContain('found     2 realisations');
  });

  it('a volume to scale to where the run gives none', () => {
    const study = studyWith(normalRows(20, 2, 10), 2, exact(2), { combinations: [combination('base', ['base'], { volume: 2.5 })] });
    expect(refusal(study)).toBe(`error: a volume to scale to, but none to scale from
  where     runs/run/run.yaml${'  '}
  found     combination base asks for volume 2.5, and run run gives none
  expected  volume: in the run, in the same unit
  do        add volume: to the run, or take volume: out of combination base`);
  });

  it('a combination that its cuts leave nothing of', () => {
    const keep = [{ probe: 'base', ranges: [{ coordinate: 'x', min: 5, max: null }], blocks: null }];
    const study = studyWith(normalRows(20, 2, 11), 2, exact(2), { combinations: [combination('base', ['base']), combination('cut', ['base'], { keep })] });
    expect(refusal(study)).toBe(`error: a combination without entries
  where     study.yaml  combinations.1
  found     nothing is left of base in combination cut
  expected  at least one entry of the data vector
  do        loosen its keep: ranges or blocks`);
  });
});

describe('a part', () => {
  it('of two runs with overlapping fiducial seeds uses what they share', () => {
    const runOf = (name: string, probe: string, seeds: readonly number[], seed: number) =>
      ensembleRun(name, columnsOf(probe, 2), realisations(normalRows(seeds.length, 2, seed), 2, seeds), { p0: exact(2) });
    const study = memoryStudy({
      parameters: [parameter('p0')],
      combinations: [combination('base', ['a']), combination('joint', ['a', 'b'])],
      runs: [runOf('one', 'a', range(20), 12), runOf('two', 'b', range(30, 5), 13)],
    });
    expect(partsOf(study, 'base')[0]!.covariance.realisations).toBe(20);
    expect(partsOf(study, 'joint')[0]!.covariance.realisations).toBe(15);
    // The covariance of shared realisations, whatever rows they stand in.
    const { covariance } = partsOf(study, 'joint')[0]!.covariance;
    const a = normalRows(20, 2, 12).subarray(2 * 5);
    const b = normalRows(30, 2, 13).subarray(0, 2 * 15);
    const mean = (rows: Float64Array): number => range(15).reduce((sum, k) => sum + rows[2 * k]! / 15, 0);
    const cross = range(15).reduce((sum, k) => sum + ((a[2 * k]! - mean(a)) * (b[2 * k]! - mean(b))) / 14, 0);
    expect(covariance.data[2]).toBeCloseTo(cross, 12);
  });

  it('keeps a column that no combination uses from refusing the others', () => {
    const rows = remade(normalRows(20, 3, 14), 3, (row) => {
      row[2] = 5;
    });
    const keep = [{ probe: 'base', ranges: [{ coordinate: 'x', min: null, max: 2 }], blocks: null }];
    expect(refusal(studyWith(rows, 3, exact(3), { combinations: [combination('base', ['base'], { keep })] }))).toBe('not refused');
  });

  it('of two runs that share no fiducial seed is refused for that reason', () => {
    const runOf = (name: string, probe: string, first: number) =>
      ensembleRun(name, columnsOf(probe, 2), realisations(normalRows(100, 2, first), 2, range(100, first)), { p0: exact(2) });
    const study = memoryStudy({
      parameters: [parameter('p0')],
      combinations: [combination('base', ['a']), combination('joint', ['a', 'b'])],
      runs: [runOf('one', 'a', 0), runOf('two', 'b', 1000)],
    });
    expect(refusal(study)).toMatch(/seed/);
  });
});
