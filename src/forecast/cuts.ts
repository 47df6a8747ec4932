import type { Column, Combination, Scan, Study } from '../study/study.js';
import type { Entry } from './part.js';

/** Whether a combination keeps a column: bounds are inclusive, and a column without the coordinate is not cut by it. */
export function keeps(combination: Combination, column: Column): boolean {
  if (!combination.probes.includes(column.probe)) return false;
  return combination.keep
    .filter((keep) => keep.probe === column.probe)
    .every((keep) => {
      const inBlocks = keep.blocks === null || keep.blocks.includes(column.block);
      return inBlocks && keep.ranges.every((range) => inRange(column, range.coordinate, range.min, range.max));
    });
}

function inRange(column: Column, coordinate: string, min: number | null, max: number | null): boolean {
  if (column.coordinate?.name !== coordinate) return true;
  const { value } = column.coordinate;
  return (min === null || value >= min) && (max === null || value <= max);
}

/** Most cuts of a scan that the study does not spell out. */
const defaultCuts = 12;

/**
 * The study's scan, or up to 12 cuts, evenly spread over the places of the baseline's entries along its first
 * coordinate; the first leaves at least as many entries as parameters. null where the baseline has no coordinate.
 */
export function scanOf(study: Study): Scan | null {
  if (study.scan !== null) return study.scan;
  const baseline = study.combinations.find(({ name }) => name === study.baseline)!;
  const columns = study.runs.flatMap((run) => run.columns).filter((column) => keeps(baseline, column));
  const coordinate = columns.find((column) => column.coordinate !== null)?.coordinate?.name;
  if (coordinate === undefined) return null;
  const along = columns.flatMap(({ coordinate: c }) => (c?.name === coordinate ? [c.value] : [])).sort((a, b) => a - b);
  const free = columns.length - along.length;
  const enough = along.filter((_, index) => free + index + 1 >= study.parameters.length);
  const places = [...new Set(enough)];
  const count = Math.min(defaultCuts, places.length);
  if (count === 0) return null;
  const at = Array.from({ length: count }, (_, k) => places[Math.round(((k + 1) * places.length) / count) - 1]!);
  return { coordinate, keep: 'below', at };
}

/** Entries in the order of the factor: what the scan never cuts, then along the scan, so that each cut is a leading block. */
export function ordered(entries: readonly Entry[], scan: Scan | null): readonly Entry[] {
  if (scan === null) return entries;
  const place = (entry: Entry): number => {
    const { coordinate } = entry.column;
    if (coordinate?.name !== scan.coordinate) return -Infinity;
    return scan.keep === 'below' ? coordinate.value : -coordinate.value;
  };
  return entries
    .map((entry, index) => ({ entry, index, place: place(entry) }))
    .sort((a, b) => (a.place === b.place ? a.index - b.index : a.place < b.place ? -1 : 1))
    .map(({ entry }) => entry);
}

/** How many of the ordered entries each cut keeps, then all of them. Bounds are inclusive. */
export function prefixesOf(entries: readonly Entry[], scan: Scan | null): readonly number[] {
  if (scan === null) return [entries.length];
  const kept = scan.at.map(
    (at) =>
      entries.filter(({ column: { coordinate } }) => {
        if (coordinate?.name !== scan.coordinate) return true;
        return scan.keep === 'below' ? coordinate.value <= at : coordinate.value >= at;
      }).length,
  );
  if (scan.keep === 'above') kept.reverse();
  return [...kept, entries.length];
}
