import { readVector } from './array-shapes.js';
import { reportDuplicates } from './duplicates.js';
import type { Reading } from './reading.js';
import type { RunFile } from './schema.js';
import type { Column } from './study.js';
import type { YamlFile } from './yaml-positions.js';

// The covariance of so many entries would fill 20 GB.
const mostEntries = 50_000;

type Block = RunFile['vector'][number];

/** The entries of a run's data vector; null where a block cannot be read. */
export function readColumns(run: RunFile, folder: string, yaml: YamlFile, reading: Reading): readonly Column[] | null {
  reportDuplicates('a block', run.vector.map(({ probe, block }) => `${probe}/${block}`), (i) => yaml.place(['vector', i]), reading);
  const blocks = run.vector.map((block, i) => readBlock(block, i, folder, yaml, reading));
  const columns = blocks.flatMap((block) => block ?? []);
  if (blocks.includes(null)) return null;
  if (columns.length <= mostEntries) return columns;
  reading.report(tooMany(columns.length, yaml));
  return null;
}

function tooMany(entries: number, yaml: YamlFile) {
  return {
    what: 'a data vector is too long',
    where: yaml.place(['vector']),
    found: `${String(entries)} entries`,
    expected: `at most ${String(mostEntries)}`,
    remedy: 'check size: and values:, or bin the data before the forecast',
  };
}

function readBlock(block: Block, index: number, folder: string, yaml: YamlFile, reading: Reading): readonly Column[] | null {
  const { probe, coordinate, values, size } = block;
  const label = block.label ?? block.block;
  const place = (key: string) => yaml.place(['vector', index, key]);
  if (coordinate === 'blocks') {
    reading.report({ what: 'a name is taken', where: place('coordinate'), found: coordinate, expected: 'another name: keep: has a key blocks', remedy: 'rename the coordinate' });
    return null;
  }
  if (coordinate !== undefined && values !== undefined && size === undefined) {
    const numbers = readVector(reading, folder, values, null, place('values'));
    if (numbers === null) return null;
    return Array.from(numbers, (value) => ({ probe, block: block.block, label, coordinate: { name: coordinate, unit: block.unit ?? '', value } }));
  }
  if (coordinate === undefined && values === undefined && size !== undefined && block.unit === undefined) {
    if (size <= mostEntries) return Array.from({ length: size }, () => ({ probe, block: block.block, label, coordinate: null }));
    reading.report(tooMany(size, yaml));
    return null;
  }
  const given = (['coordinate', 'unit', 'values', 'size'] as const).filter((key) => block[key] !== undefined);
  reading.report({
    what: 'a block does not say its entries in one way',
    where: yaml.place(['vector', index]),
    found: given.length === 0 ? `${probe}/${block.block} has neither` : `${probe}/${block.block} has ${given.join(', ')}`,
    expected: 'coordinate: and values: (and perhaps unit:), or size: alone',
    remedy: 'add what is missing, or remove what is too much',
  });
  return null;
}
