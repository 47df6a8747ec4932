import type { Matrix } from '../arrays/rows.js';
import type { Ensemble, EnsembleDerivative, Node, Realisations, Run } from '../study/study.js';
import type { Key } from './realisations.js';
import { commonKeys, gather, keysOf, positions, sameKeys } from './realisations.js';
import { firstDerivativeWeights } from './stencil.js';

/**
 * Contributions of realisations to a derivative, whose mean over the rows is (a part of) the derivative: [N, D_run].
 * Matched nodes are differenced first and make one strand; unmatched nodes make one strand each, weighted, so that the
 * derivative is the sum of the strands' means and the noise of the nodes adds.
 */
export interface Strand {
  readonly keys: readonly Key[];
  readonly rows: Matrix;
}

type Matching = 'by seed' | 'by index' | 'unmatched' | 'partly matched' | 'does not apply';

/** The derivative of one run's data vector with respect to one parameter. */
export interface RunDerivative {
  readonly kind: 'nodes' | 'per realisation' | 'exact' | 'mean' | 'insensitive';
  /** The part without noise, [D_run]; null where there is none. */
  readonly exact: Float64Array | null;
  readonly strands: readonly Strand[];
  /** For `mean`: realisations behind it, if known, and the standard deviation of one, [D_run], if given. */
  readonly summary: { readonly realisations: number | null; readonly scatter: Float64Array | null } | null;
  readonly nodes: readonly { readonly at: number; readonly weight: number; readonly realisations: number; readonly source: string }[];
  readonly matching: Matching;
  /** Rows of each node over their common realisations; null unless there are nodes. */
  readonly nodeRows: readonly Strand[] | null;
}

const nothing = { exact: null, strands: [], summary: null, nodes: [], matching: 'does not apply', nodeRows: null } as const;

/** The derivative of a run with respect to a parameter, differenced and ready to be averaged. */
export function runDerivative(run: Run, parameter: string, fiducialValue: number): RunDerivative {
  if (run.data.kind === 'moments') {
    const derivative = run.data.derivatives[parameter];
    if (derivative === undefined || derivative.kind === 'insensitive') return { ...nothing, kind: 'insensitive' };
    if (derivative.kind === 'exact') return { ...nothing, kind: 'exact', exact: derivative.values };
    const scatter = derivative.noise === null ? null : rootDiagonal(derivative.noise);
    return { ...nothing, kind: 'mean', exact: derivative.mean, summary: { realisations: derivative.realisations, scatter } };
  }
  const derivative = run.data.derivatives[parameter];
  if (derivative === undefined) return { ...nothing, kind: 'insensitive' };
  return ensembleDerivative(run.data, derivative, fiducialValue);
}

function rootDiagonal(matrix: Matrix): Float64Array {
  return Float64Array.from({ length: matrix.rows }, (_, i) => Math.sqrt(matrix.data[i * matrix.columns + i]!));
}

function ensembleDerivative(ensemble: Ensemble, derivative: EnsembleDerivative, fiducialValue: number): RunDerivative {
  switch (derivative.kind) {
    case 'insensitive':
      return { ...nothing, kind: 'insensitive' };
    case 'exact':
      return { ...nothing, kind: 'exact', exact: derivative.values };
    case 'per realisation': {
      const { realisations } = derivative;
      return { ...nothing, kind: 'per realisation', strands: [allRows(realisations)] };
    }
    case 'nodes':
      return fromNodes(ensemble, derivative.nodes, fiducialValue);
  }
}

function allRows(realisations: Realisations): Strand {
  const keys = keysOf(realisations);
  return pickRows(realisations, keys);
}

function pickRows(realisations: Realisations, keys: readonly Key[]): Strand {
  const places = positions(keysOf(realisations));
  const indices = Int32Array.from(keys, (key) => places.get(key)!);
  const data = gather(realisations.rows, indices);
  return { keys, rows: { data, rows: keys.length, columns: realisations.rows.columns } };
}

function fromNodes(ensemble: Ensemble, nodes: readonly Node[], fiducialValue: number): RunDerivative {
  const weights = firstDerivativeWeights(
    nodes.map((node) => node.at),
    fiducialValue,
  );
  const strands = nodes.map((node) => nodeRows(ensemble, nodes, node));
  const sources = nodes.map((node) => (node.realisations === 'fiducial' ? ensemble.fiducial : node.realisations));
  // A node of weight zero, such as the middle of three even ones, is no part of the derivative and decides nothing.
  const used = strands.map((_, j) => j).filter((j) => weights[j] !== 0);
  const usedStrands = used.map((j) => strands[j]!);
  const matched = usedStrands.every((strand) => sameKeys(strand.keys, usedStrands[0]!.keys));
  const common = commonKeys(strands.map((strand) => strand.keys));
  const overlap = usedStrands.some((strand, k) => usedStrands.slice(k + 1).some((other) => commonKeys([strand.keys, other.keys]).length > 0));
  return {
    ...nothing,
    kind: 'nodes',
    strands: matched
      ? [difference(usedStrands, used.map((j) => weights[j]!))]
      : used.map((j) => scaled(strands[j]!, weights[j]!)),
    nodes: nodes.map((node, j) => ({
      at: node.at,
      weight: weights[j]!,
      realisations: strands[j]!.keys.length,
      source: node.realisations === 'fiducial' ? 'fiducial' : node.realisations.source,
    })),
    matching: matchingOf(
      matched,
      used.map((j) => sources[j]!),
      overlap,
    ),
    nodeRows: common.length >= 3 ? strands.map((strand) => reordered(strand, common)) : null,
  };
}

function matchingOf(matched: boolean, sources: readonly Realisations[], overlap: boolean): Matching {
  if (matched) return sources.every((source) => source.seeds === null) ? 'by index' : 'by seed';
  return overlap ? 'partly matched' : 'unmatched';
}

/** Rows of a node; the fiducial stands in with the realisations that the other nodes have. */
function nodeRows(ensemble: Ensemble, nodes: readonly Node[], node: Node): Strand {
  if (node.realisations !== 'fiducial') return allRows(node.realisations);
  const wanted = new Set(nodes.flatMap((other) => (other.realisations === 'fiducial' ? [] : keysOf(other.realisations))));
  return pickRows(
    ensemble.fiducial,
    keysOf(ensemble.fiducial).filter((key) => wanted.has(key)),
  );
}

function difference(strands: readonly Strand[], weights: readonly number[]): Strand {
  const { keys } = strands[0]!;
  const aligned = strands.map((strand) => reordered(strand, keys));
  const { rows, columns } = aligned[0]!.rows;
  const data = new Float64Array(rows * columns);
  aligned.forEach((strand, j) => {
    for (let k = 0; k < data.length; k += 1) data[k] = data[k]! + weights[j]! * strand.rows.data[k]!;
  });
  return { keys, rows: { data, rows, columns } };
}

function scaled(strand: Strand, weight: number): Strand {
  return { keys: strand.keys, rows: { ...strand.rows, data: strand.rows.data.map((value) => weight * value) } };
}

function reordered(strand: Strand, keys: readonly Key[]): Strand {
  const places = positions(strand.keys);
  const { columns } = strand.rows;
  const data = new Float64Array(keys.length * columns);
  keys.forEach((key, row) => {
    const from = places.get(key)! * columns;
    data.set(strand.rows.data.subarray(from, from + columns), row * columns);
  });
  return { keys, rows: { data, rows: keys.length, columns } };
}
