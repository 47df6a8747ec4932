import { reportDuplicates } from './duplicates.js';
import { unknownName } from './nearest-name.js';
import type { Reading } from './reading.js';
import type { CombinationFile, StudyFile } from './schema.js';
import type { Combination, Keep, Run, Scan } from './study.js';
import type { YamlFile } from './yaml-positions.js';

/** What the combinations of a study may name: the vectors of its runs. */
export type Vectors = readonly Pick<Run, 'name' | 'columns' | 'volume' | 'volumeUnit'>[];

/** Combinations with every name checked against the vectors of the runs. */
export function readCombinations(study: StudyFile, runs: Vectors, yaml: YamlFile, reading: Reading): readonly Combination[] {
  const names = study.combinations.map(({ name }) => name);
  reportDuplicates('a combination', names, (i) => yaml.place(['combinations', i, 'name']), reading);
  if (!names.includes(study.baseline)) reading.report(unknownName('a combination', study.baseline, names, yaml.place(['baseline'])));
  return study.combinations.map((given, i) => readCombination(given, i, runs, yaml, reading));
}

function readCombination(given: CombinationFile, index: number, runs: Vectors, yaml: YamlFile, reading: Reading): Combination {
  const path = ['combinations', index];
  const probes = probesOf(runs);
  given.probes.forEach((probe, i) => {
    if (!probes.includes(probe)) reading.report(unknownName('a probe', probe, probes, yaml.place([...path, 'probes', i])));
  });
  reportDuplicates('a probe', given.probes, (i) => yaml.place([...path, 'probes', i]), reading);
  if (given.volume !== undefined) checkVolume(given, index, runs, yaml, reading);
  const keep = Object.entries(given.keep ?? {}).map(([probe, rules]) => readKeep(probe, rules, given, index, runs, yaml, reading));
  return { name: given.name, label: given.label ?? given.name, probes: given.probes, keep, volume: given.volume ?? null };
}

export function probesOf(runs: Vectors): readonly string[] {
  return [...new Set(runs.flatMap(({ columns }) => columns.map(({ probe }) => probe)))];
}

/** A volume to scale to means something only beside the volume that was simulated. */
function checkVolume(given: CombinationFile, index: number, runs: Vectors, yaml: YamlFile, reading: Reading): void {
  const used = runs.filter(({ columns }) => columns.some(({ probe }) => given.probes.includes(probe)));
  const without = used.filter(({ volume }) => volume === null).map(({ name }) => name);
  const units = [...new Set(used.map(({ volumeUnit }) => volumeUnit))];
  if (without.length === 0 && units.length <= 1) return;
  reading.report({
    what: 'a volume cannot be scaled to',
    where: yaml.place(['combinations', index, 'volume']),
    found: without.length > 0 ? `no volume in run ${without.join(', ')}` : `runs in the units ${units.map((unit) => (unit === '' ? '(none)' : unit)).join(', ')}`,
    expected: 'a volume in every run of the combination, all in one unit',
    remedy: without.length > 0 ? 'add volume: to run.yaml, or remove it here' : 'write all volumes in one unit',
  });
}

function readKeep(
  probe: string,
  rules: NonNullable<CombinationFile['keep']>[string],
  given: CombinationFile,
  index: number,
  runs: Vectors,
  yaml: YamlFile,
  reading: Reading,
): Keep {
  const path = ['combinations', index, 'keep', probe];
  if (!given.probes.includes(probe)) reading.report(unknownName('a probe of this combination', probe, given.probes, yaml.place(path)));
  const columns = runs.flatMap((run) => run.columns).filter((column) => column.probe === probe);
  const { blocks, ...bounds } = rules;
  const known = [...new Set(columns.map(({ block }) => block))];
  const coordinates = coordinatesOf(columns);
  // A probe that does not exist has been reported: its blocks are not looked for.
  if (columns.length > 0) {
    blocks?.forEach((block, i) => {
      if (!known.includes(block)) reading.report(unknownName(`a block of ${probe}`, block, known, yaml.place([...path, 'blocks', i])));
    });
  }
  reportDuplicates('a block', blocks ?? [], (i) => yaml.place([...path, 'blocks', i]), reading);
  const ranges = Object.entries(bounds).map(([coordinate, range]) => {
    if (columns.length > 0 && !coordinates.includes(coordinate)) {
      reading.report(unknownName(`a coordinate of ${probe}`, coordinate, coordinates, yaml.place([...path, coordinate])));
    }
    return readRange(coordinate, range, [...path, coordinate], yaml, reading);
  });
  return { probe, ranges, blocks: blocks ?? null };
}

function coordinatesOf(columns: Run['columns']): readonly string[] {
  return [...new Set(columns.flatMap(({ coordinate }) => (coordinate === null ? [] : [coordinate.name])))];
}

function readRange(
  coordinate: string,
  range: { readonly min?: number | undefined; readonly max?: number | undefined },
  path: readonly (string | number)[],
  yaml: YamlFile,
  reading: Reading,
): Keep['ranges'][number] {
  const { min = null, max = null } = range;
  const empty = min !== null && max !== null && min > max;
  if (empty || (min === null && max === null)) {
    reading.report({
      what: 'a range is empty',
      where: yaml.place(path),
      found: empty ? `min ${String(min)} above max ${String(max)}` : 'neither min nor max',
      expected: 'min, max, or both with min at most max',
      remedy: empty ? 'exchange the two' : 'add a bound, or remove the range',
    });
  }
  return { coordinate, min, max };
}

/** The cuts of a scan, ascending. */
export function readScan(study: StudyFile, runs: Vectors, yaml: YamlFile, reading: Reading): Scan | null {
  if (study.scan === undefined) return null;
  const { coordinate, keep = 'below', at } = study.scan;
  const known = coordinatesOf(runs.flatMap(({ columns }) => columns));
  if (!known.includes(coordinate)) reading.report(unknownName('a coordinate', coordinate, known, yaml.place(['scan', 'coordinate'])));
  const seen = new Map<number, number>();
  at.forEach((cut, i) => {
    const first = seen.get(cut);
    if (first === undefined) {
      seen.set(cut, i);
      return;
    }
    reading.report({
      what: 'a cut stands twice',
      where: yaml.place(['scan', 'at', i]),
      found: `${String(cut)} at index ${String(first)} and ${String(i)} (counted from 0)`,
      expected: 'each cut once',
      remedy: 'remove one of the two',
    });
  });
  return { coordinate, keep, at: [...at].sort((a, b) => a - b) };
}
