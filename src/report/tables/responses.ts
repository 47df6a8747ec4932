import type { Results, VectorResult } from '../../results/schema.js';
import { say } from '../markdown/nodes.js';
import { blockLabel, parameterLabel, probeLabel, withUnit } from '../words/labels.js';
import type { TableMaker } from './table.js';
import { numbers, words } from './table.js';

/** In how many entries of each block the response stands out of its noise. */
export const responses: TableMaker = (results) => ({
  id: 'responses',
  caption: say`Entries of each block whose derivative is more than twice its standard error away from zero. Pure noise gives about one in twenty.`,
  columns: [
    words('Probe'),
    words('Block'),
    words('Coordinate'),
    numbers('Entries'),
    ...results.parameters.map(({ name }) => numbers(parameterLabel(results, name))),
  ],
  rows: blocksOf(results).map(({ probe, block, vector }) => [
    probeLabel(results, probe),
    vector.label === '' ? { type: 'inlineCode' as const, value: block } : blockLabel(vector.label),
    vector.coordinate === null ? 'none' : withUnit(vector.coordinate, vector.unit),
    String(vector.values.length),
    ...results.parameters.map(({ name }) => clearOf(results, vector, name)),
  ]),
});

export function blocksOf(results: Results): readonly { readonly probe: string; readonly block: string; readonly vector: VectorResult }[] {
  return Object.entries(results.vectors).flatMap(([probe, blocks]) => Object.entries(blocks).map(([block, vector]) => ({ probe, block, vector })));
}

function clearOf(results: Results, vector: VectorResult, name: string): string {
  const derivative = vector.derivatives[name];
  const kind = results.runs[vector.run]?.derivatives[name]?.kind;
  if (derivative === undefined || kind === 'insensitive') return 'insensitive';
  if (kind === 'exact') return 'exact';
  const { value, standardError } = derivative;
  if (standardError === null) return 'noise not known';
  return `${String(clearEntries(value, standardError))} of ${String(value.length)}`;
}

export function clearEntries(value: readonly number[], standardError: readonly number[]): number {
  return value.filter((one, i) => Math.abs(one) > 2 * standardError[i]!).length;
}
