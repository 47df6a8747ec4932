import { describe, expect, it } from 'vitest';
import { commonKeys, gather, joined, keysOf, sameKeys } from '../../src/forecast/realisations.js';
import { suitesOf } from '../../src/forecast/suite.js';
import type { RowSource } from '../../src/arrays/rows.js';
import { columnsOf, combination, ensembleRun, memoryRows, memoryStudy, parameter, realisations } from '../fixtures/memory-study.js';
import { normalRows, range } from './seeded-study.js';

describe('keys of realisations', () => {
  it('are the seeds, or the rows where there are none; the two never meet', () => {
    const rows = Float64Array.from([1, 2, 3]);
    expect(keysOf(realisations(rows, 1, [7, 0, 5]))).toEqual([7, 0, 5]);
    expect(keysOf(realisations(rows, 1))).toEqual(['#0', '#1', '#2']);
    expect(commonKeys([[0, 1], ['#0', '#1']])).toEqual([]);
  });

  it('in common stand in the order of the first list', () => {
    expect(commonKeys([[5, 3, 9, 1], [1, 5, 8], [9, 5, 1]])).toEqual([5, 1]);
    expect(commonKeys([])).toEqual([]);
    expect(commonKeys([[2, 1]])).toEqual([2, 1]);
  });

  it('are the same in any order', () => {
    expect(sameKeys([1, 2, 3], [3, 1, 2])).toBe(true);
    expect(sameKeys([1, 2], [1, 2, 3])).toBe(false);
    expect(sameKeys([1, 2, 3], [1, 2, 4])).toBe(false);
  });
});

describe('rows', () => {
  /** Counts its reads, and reuses its block as files do. */
  function counting(source: RowSource): { readonly source: RowSource; readonly reads: [number, number][] } {
    const reads: [number, number][] = [];
    const block = new Float64Array(256 * source.columns);
    return {
      reads,
      source: {
        ...source,
        read: (start, count) => {
          reads.push([start, count]);
          block.set(source.read(start, count));
          return block.subarray(0, count * source.columns);
        },
      },
    };
  }

  it('are gathered in any order, runs of rows at once, at most 256 a time', () => {
    const { source, reads } = counting(memoryRows(Float64Array.from(range(1200)), 2));
    const picks = [4, 5, 6, 2, ...range(300, 100)];
    const found = gather(source, picks);
    expect(Array.from(found)).toEqual(picks.flatMap((row) => [2 * row, 2 * row + 1]));
    expect(reads).toEqual([[4, 3], [2, 1], [100, 256], [356, 44]]);
  });

  it('of several sources are aligned by seed, side by side', () => {
    const a = realisations(Float64Array.from([1, 2, 3]), 1, [10, 20, 30]);
    const b = realisations(Float64Array.from([6, 7, 4, 5, 8, 9]), 2, [30, 10, 20]);
    const source = joined([a, b], [20, 10, 30]);
    expect([source.rows, source.columns]).toEqual([3, 3]);
    expect(Array.from(source.read(0, 3))).toEqual([2, 8, 9, 1, 4, 5, 3, 6, 7]);
    expect(Array.from(source.read(1, 1))).toEqual([1, 4, 5]);
  });
});

describe('a suite', () => {
  const run = (name: string, seeds: readonly number[], suite = 'box') =>
    ensembleRun(name, columnsOf(name, 2), realisations(normalRows(seeds.length, 2, name.length), 2, seeds), { p0: { kind: 'insensitive' } }, suite);
  const suites = (...runs: readonly ReturnType<typeof run>[]) => suitesOf(memoryStudy({ parameters: [parameter('p0')], combinations: [combination('c', ['a'])], runs }));

  it('holds its runs in order; suites stand in the order of their first run', () => {
    expect(suites(run('a', range(5), 'y'), run('bb', range(5), 'x'), run('ccc', range(5), 'y')).map(({ name, runs }) => [name, runs.map((one) => one.name)])).toEqual([
      ['y', ['a', 'ccc']],
      ['x', ['bb']],
    ]);
  });

  it('measures one covariance for all its runs where they have the same realisations', () => {
    const [suite] = suites(run('a', range(9)), run('bb', [...range(9)].reverse()));
    const all = suite!.covarianceOf(suite!.runs);
    expect(suite!.covarianceOf([suite!.runs[0]!])).toBe(all);
    expect(all.covariance.columns).toBe(4);
  });

  it('measures each set of runs by itself where they differ', () => {
    const [suite] = suites(run('a', range(9)), run('bb', range(9, 3)));
    const counts = [[0], [1], [0, 1]].map((places) => suite!.covarianceOf(places.map((place) => suite!.runs[place]!)).realisations);
    expect(counts).toEqual([9, 9, 6]);
    const joint = suite!.covarianceOf(suite!.runs);
    expect(Array.from(joint.rows!.seeds, (number) => [...suite!.fiducialSeeds.keys()][number])).toEqual(range(6, 3));
  });
});
