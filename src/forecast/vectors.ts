import type { Matrix } from '../arrays/rows.js';
import { dot } from '../linalg/dot.js';
import type { DerivativeResult, VectorResult } from '../results/schema.js';
import type { Run, Study } from '../study/study.js';
import type { RunDerivative, Strand } from './derivatives.js';
import type { Suite } from './suite.js';
import { columnOffset } from './suite.js';

/** Mean data vector, scatter and derivatives of every block, by probe. */
export function vectorResults(study: Study, suites: readonly Suite[]): Record<string, Record<string, VectorResult>> {
  const vectors: Record<string, Record<string, VectorResult>> = {};
  for (const suite of suites) {
    for (const run of suite.runs) {
      for (const [probe, block] of blocksOf(run)) {
        vectors[probe] = { ...vectors[probe], [block]: vectorOf(study, suite, run, probe, block) };
      }
    }
  }
  return vectors;
}

function blocksOf(run: Run): readonly (readonly [string, string])[] {
  const seen = new Map(run.columns.map(({ probe, block }) => [`${probe}/${block}`, [probe, block] as const]));
  return [...seen.values()];
}

function vectorOf(study: Study, suite: Suite, run: Run, probe: string, block: string): VectorResult {
  const indices = run.columns.flatMap((column, i) => (column.probe === probe && column.block === block ? [i] : []));
  const first = run.columns[indices[0]!]!;
  const { covariance, mean, runs } = suite.covarianceOf([run]);
  const offset = columnOffset(runs, run);
  const derivatives = suite.derivatives.get(run.name)!;
  return {
    run: run.name,
    label: first.label,
    coordinate: first.coordinate?.name ?? null,
    unit: first.coordinate?.unit ?? '',
    values: indices.map((i, k) => run.columns[i]!.coordinate?.value ?? k + 1),
    mean: mean === null ? null : indices.map((i) => mean[offset + i]!),
    standardDeviation: indices.map((i) => Math.sqrt(covariance.data[(offset + i) * (covariance.columns + 1)]!)),
    derivatives: Object.fromEntries(
      study.parameters.map(({ name }) => {
        const { value, standardError } = meanDerivative(derivatives.get(name)!, run.columns.length);
        return [
          name,
          {
            value: indices.map((i) => value[i]!),
            standardError: standardError === null ? null : indices.map((i) => standardError[i]!),
          },
        ];
      }),
    ),
  };
}

/**
 * Mean derivative of each entry and its standard error. The contributions of one realisation to all strands are summed
 * before they are squared, so that nodes which share realisations share noise: se^2 = sum_s g_s^2 n/(n - 1),
 * g_s = sum_u (w_us - mean_u)/N_u.
 */
function meanDerivative(
  derivative: RunDerivative,
  size: number,
): { readonly value: Float64Array; readonly standardError: Float64Array | null } {
  const value = derivative.exact === null ? new Float64Array(size) : Float64Array.from(derivative.exact);
  if (derivative.strands.length === 0) return { value, standardError: summaryError(derivative, size) };
  const contributions = new Map<number | string, Float64Array>();
  for (const strand of derivative.strands) addContributions(strand, value, contributions, size);
  const fewest = Math.min(...derivative.strands.map(({ keys }) => keys.length));
  const variance = new Float64Array(size);
  for (const one of contributions.values()) {
    for (let i = 0; i < size; i += 1) variance[i] = variance[i]! + one[i]! ** 2;
  }
  return { value, standardError: variance.map((sum) => Math.sqrt((sum * fewest) / (fewest - 1))) };
}

function addContributions(
  { keys, rows }: Strand,
  value: Float64Array,
  contributions: Map<number | string, Float64Array>,
  size: number,
): void {
  const mean = new Float64Array(size);
  keys.forEach((_, row) => {
    for (let i = 0; i < size; i += 1) mean[i] = mean[i]! + rows.data[row * size + i]! / keys.length;
  });
  for (let i = 0; i < size; i += 1) value[i] = value[i]! + mean[i]!;
  keys.forEach((key, row) => {
    const one = contributions.get(key) ?? new Float64Array(size);
    for (let i = 0; i < size; i += 1) one[i] = one[i]! + (rows.data[row * size + i]! - mean[i]!) / keys.length;
    contributions.set(key, one);
  });
}

function summaryError({ kind, summary }: RunDerivative, size: number): Float64Array | null {
  if (kind === 'exact' || kind === 'insensitive') return new Float64Array(size);
  if (summary?.scatter === null || summary?.realisations === null || summary === null) return null;
  const root = Math.sqrt(summary.realisations);
  return summary.scatter.map((sigma) => sigma / root);
}

/** How a run's derivative was made, with the evidence that its nodes are matched. */
export function derivativeResult(derivative: RunDerivative): DerivativeResult {
  const counts = derivative.strands.map(({ keys }) => keys.length);
  return {
    kind: derivative.kind,
    nodes: derivative.nodes.map((node) => ({ ...node })),
    matching: derivative.matching,
    realisations: counts.length > 0 ? Math.min(...counts) : (derivative.summary?.realisations ?? null),
    ...matchingEvidence(derivative),
  };
}

function matchingEvidence({ nodeRows, nodes }: RunDerivative): {
  readonly nodeCorrelation: number | null;
  readonly noiseReduction: number | null;
} {
  if (nodeRows === null) return { nodeCorrelation: null, noiseReduction: null };
  const { columns } = nodeRows[0]!.rows;
  const correlations: number[] = [];
  const reductions: number[] = [];
  for (let i = 0; i < columns; i += 1) {
    const series = nodeRows.map(({ rows }) => centredColumn(rows, i));
    const last = series.length - 1;
    const products = series.map((one) => series.map((other) => scalarProduct(one, other)));
    const spread = Math.sqrt(products[0]![0]! * products[last]![last]!);
    if (spread > 0) correlations.push(products[0]![last]! / spread);
    let apart = 0;
    let together = 0;
    products.forEach((row, j) => {
      row.forEach((product, k) => {
        const term = nodes[j]!.weight * nodes[k]!.weight * product;
        together += term;
        if (j === k) apart += term;
      });
    });
    if (together > 0) reductions.push(apart / together);
  }
  return { nodeCorrelation: median(correlations), noiseReduction: median(reductions) };
}

/** One entry over the realisations, less its mean. */
function centredColumn({ data, rows, columns }: Matrix, entry: number): Float64Array {
  const column = new Float64Array(rows);
  let mean = 0;
  for (let row = 0; row < rows; row += 1) {
    column[row] = data[row * columns + entry]!;
    mean += column[row]! / rows;
  }
  for (let row = 0; row < rows; row += 1) column[row] = column[row]! - mean;
  return column;
}

function scalarProduct(a: Float64Array, b: Float64Array): number {
  return dot(a, 0, b, 0, 0, a.length);
}

function median(values: readonly number[]): number | null {
  if (values.length === 0) return null;
  const sorted = [...values].sort((a, b) => a - b);
  const middle = Math.floor(sorted.length / 2);
  return sorted.length % 2 === 1 ? sorted[middle]! : (sorted[middle - 1]! + sorted[middle]!) / 2;
}
