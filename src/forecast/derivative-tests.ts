import type { Matrix } from '../arrays/rows.js';
import type { Run } from '../study/study.js';
import type { RunDerivative } from './derivatives.js';
import { gather, keysOf, positions } from './realisations.js';
import { derivativeWeights } from './stencil.js';

/**
 * A test of a derivative, as a share of the response itself: the projection of a difference on the response,
 * t = sum_j d_j delta_j/var_j / sum_j d_j^2/var_j, averaged over realisations, with its standard error.
 * 0.03 says that the response would come out 3 % larger. Entries are weighted by their own variance, so that no covariance has to be inverted.
 */
export interface DerivativeTest {
  readonly kind: 'step size' | 'one-sided' | 'curvature';
  readonly share: number;
  readonly standardError: number;
  readonly realisations: number;
}

/** Simulations at one value of the parameter, over common realisations. */
interface Place {
  readonly at: number;
  readonly rows: Matrix;
}

/**
 * What the nodes of one derivative say about its truncation, each in its own error:
 * step size, the derivative from the inner two nodes less that from the outer two (with at least four); one-sided, the forward
 * difference from the fiducial less the central one; curvature, half of f'' (per unit of the parameter: times sigma it is the
 * departure from a straight line over one sigma). The fiducial rows join where they have the same seeds.
 * Source: methods, section 2; the projection on the response is our own.
 */
export function derivativeTests(run: Run, derivative: RunDerivative, variance: Float64Array, fiducialValue: number): readonly DerivativeTest[] {
  const places = placesOf(run, derivative, fiducialValue);
  if (places === null) return [];
  const response = meanOf(combination(places, weightsAt(places, fiducialValue, 1)));
  const norm = normOf(response, variance);
  if (!(norm > 0)) return [];
  const test = (kind: DerivativeTest['kind'], weights: Float64Array | null): readonly DerivativeTest[] =>
    weights === null ? [] : [projected(kind, combination(places, weights), response, variance, norm)];
  return [
    ...test('step size', stepWeights(places, fiducialValue)),
    ...test('one-sided', sidedWeights(places, fiducialValue)),
    ...test('curvature', curvatureWeights(places, fiducialValue)),
  ];
}

function placesOf(run: Run, derivative: RunDerivative, fiducialValue: number): readonly Place[] | null {
  const { nodes, nodeRows } = derivative;
  if (nodeRows === null || run.data.kind !== 'ensemble') return null;
  const places = nodes.map(({ at }, j) => ({ at, rows: nodeRows[j]!.rows }));
  if (!places.some(({ at }) => at === fiducialValue)) {
    const { fiducial } = run.data;
    const known = positions(keysOf(fiducial));
    const { keys } = nodeRows[0]!;
    const seeded = fiducial.seeds !== null && typeof keys[0] === 'number';
    if (seeded && keys.every((key) => known.has(key))) {
      const data = gather(fiducial.rows, Int32Array.from(keys, (key) => known.get(key)!));
      places.push({ at: fiducialValue, rows: { data, rows: keys.length, columns: fiducial.rows.columns } });
    }
  }
  return [...places].sort((a, b) => a.at - b.at);
}

function weightsAt(places: readonly Place[], centre: number, order: number): Float64Array {
  return derivativeWeights(
    places.map(({ at }) => at),
    centre,
    order,
  );
}

/** Weights over all places from weights over some of them. */
function spread(places: readonly Place[], chosen: readonly Place[], centre: number): Float64Array {
  const weights = weightsAt(chosen, centre, 1);
  return Float64Array.from(places, (place) => (chosen.includes(place) ? weights[chosen.indexOf(place)]! : 0));
}

function less(a: Float64Array, b: Float64Array): Float64Array {
  return a.map((value, i) => value - b[i]!);
}

function sides(places: readonly Place[], centre: number) {
  return { below: places.filter(({ at }) => at < centre), above: places.filter(({ at }) => at > centre) };
}

function stepWeights(places: readonly Place[], centre: number): Float64Array | null {
  const { below, above } = sides(places, centre);
  if (below.length < 2 || above.length < 2) return null;
  const inner = spread(places, [below[below.length - 1]!, above[0]!], centre);
  const outer = spread(places, [below[0]!, above[above.length - 1]!], centre);
  return less(inner, outer);
}

function sidedWeights(places: readonly Place[], centre: number): Float64Array | null {
  const { below, above } = sides(places, centre);
  const middle = places.find(({ at }) => at === centre);
  const left = below[below.length - 1];
  const right = above[0];
  if (middle === undefined || left === undefined || right === undefined) return null;
  return less(spread(places, [middle, right], centre), spread(places, [left, right], centre));
}

function curvatureWeights(places: readonly Place[], centre: number): Float64Array | null {
  return places.length < 3 ? null : weightsAt(places, centre, 2).map((weight) => weight / 2);
}

/** Weighted sum of the places' rows, realisation by realisation. */
function combination(places: readonly Place[], weights: Float64Array): Matrix {
  const { rows, columns } = places[0]!.rows;
  const data = new Float64Array(rows * columns);
  places.forEach((place, j) => {
    const weight = weights[j]!;
    if (weight === 0) return;
    for (let k = 0; k < data.length; k += 1) data[k] = data[k]! + weight * place.rows.data[k]!;
  });
  return { data, rows, columns };
}

function meanOf({ data, rows, columns }: Matrix): Float64Array {
  const mean = new Float64Array(columns);
  for (let k = 0; k < data.length; k += 1) mean[k % columns] = mean[k % columns]! + data[k]! / rows;
  return mean;
}

/** sum_j d_j^2/var_j over the entries that vary; 0 where nothing responds. */
function normOf(response: Float64Array, variance: Float64Array): number {
  return response.reduce((sum, value, i) => (variance[i]! > 0 ? sum + value ** 2 / variance[i]! : sum), 0);
}

function projected(
  kind: DerivativeTest['kind'],
  delta: Matrix,
  response: Float64Array,
  variance: Float64Array,
  norm: number,
): DerivativeTest {
  const { data, rows, columns } = delta;
  const shares = Float64Array.from({ length: rows }, (_, row) => {
    let sum = 0;
    for (let i = 0; i < columns; i += 1) {
      if (variance[i]! > 0) sum += (response[i]! * data[row * columns + i]!) / variance[i]!;
    }
    return sum / norm;
  });
  const mean = shares.reduce((sum, share) => sum + share, 0) / rows;
  const spreadOf = shares.reduce((sum, share) => sum + (share - mean) ** 2, 0) / (rows - 1);
  return { kind, share: mean, standardError: Math.sqrt(spreadOf / rows), realisations: rows };
}
