import type { Estimate, Results } from '../../results/schema.js';
import type { Cell, CsvTable } from './csv.js';

const kinds = ['marginalised', 'fixed'] as const;

const estimateHeader = [
  'raw',
  'corrected',
  'standard_error',
  'relative_standard_error',
  'relative_standard_error_derivatives',
  'relative_standard_error_covariance',
  'relative_bias_of_inversion',
  'low_68',
  'high_68',
  'low_95',
  'high_95',
  'limit',
  'split',
  'status',
  'why',
  'derivative_realisations_needed',
];

function estimateCells(one: Estimate): readonly Cell[] {
  const { parts, interval, interval95 } = one;
  return [
    one.raw,
    one.corrected,
    one.standardError,
    one.relativeStandardError,
    parts.derivatives,
    parts.covariance,
    parts.bias,
    interval?.[0] ?? null,
    interval?.[1] ?? null,
    interval95?.[0] ?? null,
    interval95?.[1] ?? null,
    one.limit,
    one.split,
    one.status,
    one.why,
    one.derivativeRealisationsNeeded,
  ];
}

/** Errors are in the unit of their parameter, which stands in a column of its own. */
export function errorsCsv(results: Results): CsvTable {
  return {
    header: ['parameter', 'unit', 'role', 'combination', 'kind', ...estimateHeader],
    rows: results.parameters.flatMap(({ name, unit, role }) =>
      Object.entries(results.combinations).flatMap(([combination, { errors }]) =>
        kinds.flatMap((kind) => {
          const one = errors[name]?.[kind];
          return one === undefined ? [] : [[name, unit, role, combination, kind, ...estimateCells(one)]];
        }),
      ),
    ),
  };
}

export function improvementsCsv(results: Results): CsvTable {
  return {
    header: ['parameter', 'role', 'combination', 'baseline', 'kind', ...estimateHeader, 'sham', 'sham_low', 'sham_high', 'sham_why'],
    rows: results.parameters.flatMap(({ name, role }) =>
      Object.entries(results.improvements).flatMap(([combination, gains]) =>
        kinds.flatMap((kind) => {
          const one = gains[name]?.[kind];
          if (one === undefined) return [];
          const sham = [one.sham, one.shamInterval?.[0] ?? null, one.shamInterval?.[1] ?? null, one.shamWhy];
          return [[name, role, combination, results.study.baseline, kind, ...estimateCells(one), ...sham]];
        }),
      ),
    ),
  };
}

export function claimsCsv({ claims, parameters }: Results): CsvTable {
  return {
    header: [
      ...['id', 'text', 'parameter', 'unit', 'combination', 'against', 'error', 'quantity', 'test', 'threshold_low', 'threshold_high', 'verdict'],
      ...['raw', 'estimate', 'relative_standard_error', 'low_68', 'high_68', 'low_95', 'high_95', 'status', 'why'],
    ],
    rows: claims.map((one) => {
      const unit = one.quantity === 'size' ? (parameters.find(({ name }) => name === one.parameter)?.unit ?? '') : '';
      const thresholds = typeof one.threshold === 'number' ? [one.threshold, null] : one.threshold;
      const [low, high] = one.test === 'at most' ? [thresholds[1], thresholds[0]] : thresholds;
      return [
        ...[one.id, one.text, one.parameter, unit, one.combination, one.against, one.error, one.quantity, one.test, low, high, one.verdict],
        ...[one.raw, one.estimate, one.relativeStandardError, one.interval?.[0] ?? null, one.interval?.[1] ?? null],
        ...[one.interval95?.[0] ?? null, one.interval95?.[1] ?? null, one.status, one.why],
      ].map((cell) => cell ?? null);
    }),
  };
}
