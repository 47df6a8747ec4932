import { describe, expect, it } from 'vitest';
import { dataCorrelation } from '../../src/forecast/data-correlation.js';
import { suitesOf } from '../../src/forecast/suite.js';
import type { Column, Run } from '../../src/study/study.js';
import { columnsOf, combination, ensembleRun, memoryStudy, momentsRun, parameter, realisations } from '../fixtures/memory-study.js';
import { normalRows, range } from './seeded-study.js';

function correlationOf(...runs: readonly Run[]) {
  const study = memoryStudy({ parameters: [parameter('p0')], combinations: [combination('c', [runs[0]!.columns[0]!.probe])], runs });
  return dataCorrelation(suitesOf(study)[0]!);
}

const rowsRun = (columns: readonly Column[], rows: Float64Array): Run => ensembleRun('run', columns, realisations(rows, columns.length), { p0: { kind: 'insensitive' } });

describe('the correlation matrix of the data', () => {
  it('of a given covariance is that by hand', () => {
    const covariance = { data: Float64Array.from([4, 3, 3, 9]), rows: 2, columns: 2 };
    const result = correlationOf(momentsRun('run', columnsOf('base', 2), { covariance, realisations: null, derivatives: { p0: { kind: 'insensitive' } } }))!;
    expect(result).toEqual({ entriesPerCell: 1, groups: [{ probe: 'base', block: 'only', label: 'base', cells: 2, entries: 2 }], cells: [[1, 0.5], [0.5, 1]] });
  });

  it('has a unit diagonal, is symmetric, and lies within -1 to 1', () => {
    const { cells } = correlationOf(rowsRun(columnsOf('base', 8), normalRows(40, 8, 1)))!;
    range(8).forEach((i) => {
      expect(cells[i]![i]).toBeCloseTo(1, 14);
      range(8).forEach((j) => {
        expect(cells[i]![j]).toBeCloseTo(cells[j]![i]!, 14);
        expect(Math.abs(cells[i]![j]!)).toBeLessThanOrEqual(1 + 1e-14);
      });
    });
  });

  it('of a long vector is coarsened: cells are means, and none spans two blocks', () => {
    const columns = [...columnsOf('base', 101), ...columnsOf('added', 30)];
    const rows = normalRows(50, 131, 2);
    const { entriesPerCell, groups, cells } = correlationOf(rowsRun(columns, rows))!;
    expect(entriesPerCell).toBe(3);
    expect(groups).toEqual([
      { probe: 'base', block: 'only', label: 'base', cells: 34, entries: 101 },
      { probe: 'added', block: 'only', label: 'added', cells: 10, entries: 30 },
    ]);
    expect(cells).toHaveLength(44);
    // The last cell of the first block holds two entries: the mean of 1, r, r, 1.
    const pair = correlationOf(rowsRun(columnsOf('base', 2), Float64Array.from(range(50).flatMap((k) => [rows[k * 131 + 99]!, rows[k * 131 + 100]!]))))!;
    expect(cells[33]![33]).toBeCloseTo((1 + pair.cells[0]![1]!) / 2, 12);
  });

  it('writes 0 beside a constant entry', () => {
    const rows = normalRows(20, 2, 3).map((value, k) => (k % 2 === 0 ? value : 7));
    expect(correlationOf(rowsRun(columnsOf('base', 2), rows))!.cells[0]![1]).toBe(0);
  });

  it('joins the runs of a suite, and is none where they share fewer than three realisations', () => {
    const runOf = (name: string, seeds: readonly number[]): Run => ensembleRun(name, columnsOf(name, 1), realisations(normalRows(seeds.length, 1, seeds[0]!), 1, seeds), { p0: { kind: 'insensitive' } });
    expect(correlationOf(runOf('a', range(10)), runOf('b', range(10, 7)))!.groups.map(({ probe }) => probe)).toEqual(['a', 'b']);
    expect(correlationOf(runOf('a', range(10)), runOf('b', range(10, 8)))).toBeNull();
    expect(correlationOf(runOf('a', range(10)), runOf('b', range(10, 100)))).toBeNull();
  });
});
