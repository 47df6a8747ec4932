import type { Results } from '../../results/schema.js';
import type { CsvTable } from './csv.js';

const kinds = ['marginalised', 'fixed'] as const;

export function scanCsv(results: Results): CsvTable {
  const rows = Object.entries(results.scan).flatMap(([combination, scan]) =>
    results.parameters.flatMap(({ name, unit }) =>
      kinds.flatMap((kind) =>
        scan.at.map((at, i) => {
          const error = scan.errors[name]?.[kind];
          const gain = scan.improvements?.[name]?.[kind];
          return [
            ...[combination, scan.coordinate, scan.unit, scan.keep, at, scan.entries[i] ?? null, name, unit, kind],
            ...[error?.raw[i] ?? null, error?.corrected[i] ?? null, error?.relativeStandardError[i] ?? null, error?.status[i] ?? null],
            ...[gain?.raw[i] ?? null, gain?.corrected[i] ?? null, gain?.relativeStandardError[i] ?? null, gain?.status[i] ?? null],
          ];
        }),
      ),
    ),
  );
  return {
    header: [
      ...['combination', 'coordinate', 'coordinate_unit', 'keep', 'cut', 'entries', 'parameter', 'unit', 'kind'],
      ...['error_raw', 'error_corrected', 'error_relative_standard_error', 'error_status'],
      ...['gain_raw', 'gain_corrected', 'gain_relative_standard_error', 'gain_status'],
    ],
    rows,
  };
}

export function convergenceCsv(results: Results): CsvTable {
  const rows = Object.entries(results.convergence).flatMap(([combination, found]) =>
    results.parameters.flatMap(({ name, unit }) =>
      kinds.flatMap((kind) => {
        const values = found.errors[name]?.[kind];
        if (values === undefined) return [];
        return found.realisations.map((n, i) => [
          ...[combination, name, unit, kind, n, found.blocks[i] ?? null, values.determined[i] ?? null],
          ...[values.raw[i] ?? null, values.rawScatter[i] ?? null, values.corrected[i] ?? null, values.correctedScatter[i] ?? null],
          ...[values.fit?.limit ?? null, values.fit?.b ?? null],
        ]);
      }),
    ),
  );
  return {
    header: [
      ...['combination', 'parameter', 'unit', 'kind', 'realisations', 'blocks', 'blocks_determined'],
      ...['error_raw', 'error_raw_scatter', 'error_corrected', 'error_corrected_scatter', 'fit_limit', 'fit_b'],
    ],
    rows,
  };
}

/** One line an entry of the data vector and a parameter. */
export function responsesCsv(results: Results): CsvTable {
  const rows = Object.entries(results.vectors).flatMap(([probe, blocks]) =>
    Object.entries(blocks).flatMap(([block, vector]) =>
      vector.values.flatMap((coordinate, i) =>
        Object.entries(vector.derivatives).map(([parameter, { value, standardError }]) => [
          ...[probe, block, vector.run, vector.coordinate, vector.unit, coordinate, vector.mean?.[i] ?? null, vector.standardDeviation[i] ?? null],
          ...[parameter, value[i] ?? null, standardError?.[i] ?? null],
        ]),
      ),
    ),
  );
  return {
    header: [
      ...['probe', 'block', 'run', 'coordinate', 'coordinate_unit', 'coordinate_value', 'mean', 'standard_deviation'],
      ...['parameter', 'derivative', 'derivative_standard_error'],
    ],
    rows,
  };
}
