import type { CombinationResult, Results } from '../../results/schema.js';
import type { Cell, CsvTable } from './csv.js';

/** Every element of the Fisher matrices and of their inverses, one a line; what is not known is left out. */
export function fisherCsv(results: Results): CsvTable {
  return {
    header: ['combination', 'matrix', 'row', 'column', 'value'],
    rows: Object.entries(results.combinations).flatMap(([name, found]) => matricesOf(found).flatMap(([label, matrix]) => cells(name, label, found.parameters, matrix))),
  };
}

type Matrix = readonly (readonly number[])[];

function matricesOf({ fisher, covariance, correlation }: CombinationResult): readonly (readonly [string, Matrix | null])[] {
  return [
    ['fisher raw', fisher.raw],
    ['fisher corrected', fisher.corrected],
    ['prior', fisher.prior],
    ['covariance raw', covariance.raw],
    ['covariance corrected', covariance.corrected],
    ['correlation raw', correlation.raw],
    ['correlation corrected', correlation.corrected],
  ];
}

function cells(combination: string, label: string, parameters: readonly string[], matrix: Matrix | null): Cell[][] {
  return (matrix ?? []).flatMap((row, i) => row.map((value, j) => [combination, label, parameters[i] ?? null, parameters[j] ?? null, value]));
}
