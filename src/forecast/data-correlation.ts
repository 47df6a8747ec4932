import type { DataCorrelation } from '../results/schema.js';
import type { Column } from '../study/study.js';
import type { Suite } from './suite.js';

/** Most cells each way: what a page shows legibly. */
const mostCells = 64;

/**
 * Correlation matrix of the data of a suite, coarsened where it is large: each cell is the mean of the correlations
 * that fall into it, and no cell spans two blocks. null where fewer than three realisations are shared.
 */
export function dataCorrelation(suite: Suite): DataCorrelation | null {
  const shared = suite.sharedFiducials(suite.runs);
  if (shared !== null && shared < 3) return null;
  const { runs, covariance } = suite.covarianceOf(suite.runs);
  const columns = runs.flatMap((run) => run.columns);
  const entriesPerCell = Math.ceil(columns.length / mostCells);
  const groups = groupsOf(columns, entriesPerCell);
  const cells = groups.flatMap(({ cellStarts }) => cellStarts);
  const deviation = columns.map((_, i) => Math.sqrt(covariance.data[i * (covariance.columns + 1)]!));
  const correlation = (i: number, j: number): number => {
    const scale = deviation[i]! * deviation[j]!;
    return scale > 0 ? covariance.data[i * covariance.columns + j]! / scale : 0;
  };
  return {
    entriesPerCell,
    groups: groups.map(({ probe, block, label, entries, cellStarts }) => ({
      probe,
      block,
      label,
      entries,
      cells: cellStarts.length,
    })),
    cells: cells.map((a) => cells.map((b) => meanOver(a, b, correlation))),
  };
}

interface Span {
  readonly from: number;
  readonly to: number;
}

function groupsOf(columns: readonly Column[], perCell: number) {
  const groups: { probe: string; block: string; label: string; entries: number; cellStarts: Span[] }[] = [];
  let start = 0;
  while (start < columns.length) {
    const { probe, block, label } = columns[start]!;
    let end = start;
    while (end < columns.length && columns[end]!.probe === probe && columns[end]!.block === block) end += 1;
    const cellStarts: Span[] = [];
    for (let from = start; from < end; from += perCell) cellStarts.push({ from, to: Math.min(from + perCell, end) });
    groups.push({ probe, block, label, entries: end - start, cellStarts });
    start = end;
  }
  return groups;
}

function meanOver(a: Span, b: Span, correlation: (i: number, j: number) => number): number {
  let sum = 0;
  for (let i = a.from; i < a.to; i += 1) {
    for (let j = b.from; j < b.to; j += 1) sum += correlation(i, j);
  }
  return sum / ((a.to - a.from) * (b.to - b.from));
}
