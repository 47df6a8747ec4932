import { describe, expect, it } from 'vitest';
import { runDerivative } from '../../src/forecast/derivatives.js';
import type { EnsembleDerivative, Node, Realisations, Run } from '../../src/study/study.js';
import { columnsOf, ensembleRun, momentsRun, realisations } from '../fixtures/memory-study.js';
import { shuffled, seededBits } from '../../src/forecast/random.js';
import { distance, picked, range, seededRealisations } from './seeded-study.js';

const size = 3;

function runWith(derivative: EnsembleDerivative, fiducial: Realisations = rowsAt(0, range(12))): Run {
  return ensembleRun('run', columnsOf('base', size), fiducial, { p: derivative });
}

/** Quadratic response, so that a wrong weight shows; noise that depends on the seed alone. */
function rowsAt(at: number, seeds: readonly number[], columns = size): Realisations {
  return seededRealisations(seeds, columns, (i) => (i + 1) * at + 0.25 * at * at, { shared: 1, own: 0, salt: 0 });
}

function nodesAt(...nodes: readonly (readonly [number, Realisations | 'fiducial'])[]): EnsembleDerivative {
  return { kind: 'nodes', nodes: nodes.map(([at, rows]): Node => ({ at, realisations: rows })) };
}

function unseeded(rows: Realisations): Realisations {
  return { ...rows, seeds: null };
}

describe('a derivative from nodes', () => {
  it('is the difference of matched rows over the step, by hand', () => {
    const minus = realisations(Float64Array.from([1, 2, 3, 5, 6, 7]), 3, [4, 9]);
    const plus = realisations(Float64Array.from([2, 4, 3, 5, 8, 11]), 3, [4, 9]);
    const { strands, nodes, matching, exact } = runDerivative(runWith(nodesAt([0.9, minus], [1.4, plus])), 'p', 1.1);
    expect(matching).toBe('by seed');
    expect(exact).toBeNull();
    expect(strands).toHaveLength(1);
    // Steps of 0.5: (x_plus - x_minus) / 0.5. 0.9 and 1.4 are not binary fractions: a few units in the last place.
    expect(distance(strands[0]!.rows.data, [2, 4, 0, 0, 4, 8])).toBeLessThan(1e-14);
    expect(nodes.map(({ at, realisations: count, source }) => [at, count, source])).toEqual([
      [0.9, 2, 'memory.npy'],
      [1.4, 2, 'memory.npy'],
    ]);
    expect(nodes.map(({ weight }) => weight)).toEqual([expect.closeTo(-2, 12), expect.closeTo(2, 12)]);
  });

  it('is the same from seeds in any order, at any node', () => {
    const seeds = range(10, 50);
    const lists = [1, 2, 3].map((salt) => Array.from(shuffled(10, seededBits(String(salt)))));
    const sorted = runDerivative(runWith(nodesAt([-1, rowsAt(-1, seeds)], [1, rowsAt(1, seeds)], [2, rowsAt(2, seeds)])), 'p', 0);
    const mixed = runDerivative(
      runWith(nodesAt([-1, picked(rowsAt(-1, seeds), lists[0]!)], [1, picked(rowsAt(1, seeds), lists[1]!)], [2, picked(rowsAt(2, seeds), lists[2]!)])),
      'p',
      0,
    );
    expect(mixed.matching).toBe('by seed');
    const [a] = sorted.strands;
    const [b] = mixed.strands;
    const order = a!.keys.map((key) => b!.keys.indexOf(key));
    const aligned = order.flatMap((row) => Array.from(b!.rows.data.subarray(row * size, (row + 1) * size)));
    expect(aligned).toEqual(Array.from(a!.rows.data));
  });

  it('takes the fiducial rows with the seeds of the other nodes', () => {
    const seeds = [3, 7, 5, 11];
    const derivative = nodesAt([-1, rowsAt(-1, seeds)], [0, 'fiducial'], [2, rowsAt(2, [11, 5, 3, 7])]);
    const { strands, nodes, matching } = runDerivative(runWith(derivative), 'p', 0);
    expect(matching).toBe('by seed');
    // Noise is that of the seed at every node and cancels, as the weights of a first derivative add up to 0;
    // three nodes are exact for a quadratic response: the derivative at 0 is i + 1 for every realisation.
    expect(distance(strands[0]!.rows.data, seeds.flatMap(() => [1, 2, 3]))).toBeLessThan(1e-14);
    expect(nodes[1]).toEqual({ at: 0, weight: expect.closeTo(0.5, 14) as number, realisations: 4, source: 'fiducial' });
    expect(nodes[0]!.weight).toBeCloseTo(-2 / 3, 14);
    expect(nodes[2]!.weight).toBeCloseTo(1 / 6, 14);
  });

  it('is partly matched where the fiducial lacks a seed', () => {
    const seeds = [3, 7, 40];
    const { strands, matching } = runDerivative(runWith(nodesAt([0, 'fiducial'], [1, rowsAt(1, seeds)])), 'p', 0);
    expect(matching).toBe('partly matched');
    expect(strands.map(({ keys }) => keys)).toEqual([[3, 7], [3, 7, 40]]);
  });

  it('has one weighted strand a node where seeds differ', () => {
    const lower = rowsAt(-1, range(4));
    const upper = rowsAt(1, range(5, 20));
    const { strands, matching, nodeRows } = runDerivative(runWith(nodesAt([-1, lower], [1, upper])), 'p', 0);
    expect(matching).toBe('unmatched');
    expect(nodeRows).toBeNull();
    expect(strands.map(({ rows }) => rows.rows)).toEqual([4, 5]);
    expect(Array.from(strands[0]!.rows.data)).toEqual(Array.from(lower.rows.read(0, 4), (value) => -0.5 * value));
    expect(Array.from(strands[1]!.rows.data)).toEqual(Array.from(upper.rows.read(0, 5), (value) => 0.5 * value));
  });

  it('is matched by index where there are no seeds, and never where one node has them', () => {
    const bare = nodesAt([-1, unseeded(rowsAt(-1, range(4)))], [1, unseeded(rowsAt(1, range(4)))]);
    expect(runDerivative(runWith(bare), 'p', 0).matching).toBe('by index');
    const mixed = nodesAt([-1, unseeded(rowsAt(-1, range(4)))], [1, rowsAt(1, range(4))]);
    expect(runDerivative(runWith(mixed), 'p', 0).matching).toBe('unmatched');
  });

  it('keeps common rows as evidence from three on', () => {
    const overlapping = (common: number): number =>
      runDerivative(runWith(nodesAt([-1, rowsAt(-1, range(6))], [1, rowsAt(1, range(6, 6 - common))])), 'p', 0).nodeRows?.[0]?.keys.length ?? 0;
    expect([2, 3, 4].map(overlapping)).toEqual([0, 3, 4]);
  });

  it('does not change with the order of the nodes', () => {
    const seeds = range(5);
    const up = runDerivative(runWith(nodesAt([-1, rowsAt(-1, seeds)], [1, rowsAt(1, seeds)], [3, rowsAt(3, seeds)])), 'p', 0);
    const down = runDerivative(runWith(nodesAt([3, rowsAt(3, seeds)], [1, rowsAt(1, seeds)], [-1, rowsAt(-1, seeds)])), 'p', 0);
    expect(distance(down.strands[0]!.rows.data, up.strands[0]!.rows.data)).toBeLessThan(1e-14);
  });

  it('survives an offset of 1e8: differencing first keeps the response', () => {
    const lift = (rows: Realisations): Realisations => realisations(rows.rows.read(0, rows.rows.rows).map((value) => value + 1e8), size, Array.from(rows.seeds!));
    const seeds = range(5);
    const { strands } = runDerivative(runWith(nodesAt([-1, lift(rowsAt(-1, seeds))], [1, lift(rowsAt(1, seeds))])), 'p', 0);
    // 1e8 in double precision is known to 1.5e-8; two values and a weight of one half each.
    expect(distance(strands[0]!.rows.data, seeds.flatMap(() => [1, 2, 3]))).toBeLessThan(2e-8);
  });
});

describe('a derivative that needs no nodes', () => {
  it('per realisation is its rows', () => {
    const rows = rowsAt(1, [9, 4, 6]);
    const { kind, strands, matching, nodes } = runDerivative(runWith({ kind: 'per realisation', realisations: rows }), 'p', 0);
    expect([kind, matching, nodes]).toEqual(['per realisation', 'does not apply', []]);
    expect(strands[0]!.keys).toEqual([9, 4, 6]);
    expect(Array.from(strands[0]!.rows.data)).toEqual(Array.from(rows.rows.read(0, 3)));
  });

  it('exact has no strand, insensitive has nothing', () => {
    const values = Float64Array.from([1, 2, 3]);
    expect(runDerivative(runWith({ kind: 'exact', values }), 'p', 0)).toMatchObject({ kind: 'exact', exact: values, strands: [] });
    expect(runDerivative(runWith({ kind: 'insensitive' }), 'p', 0)).toMatchObject({ kind: 'insensitive', exact: null, strands: [] });
  });

  it('from moments is the mean, with the scatter of one realisation where it is given', () => {
    const covariance = { data: Float64Array.from([1, 0, 0, 1]), rows: 2, columns: 2 };
    const noise = { data: Float64Array.from([4, 1, 1, 9]), rows: 2, columns: 2 };
    const mean = Float64Array.from([5, 6]);
    const run = (of: typeof noise | null): Run =>
      momentsRun('run', columnsOf('base', 2), { covariance, realisations: 50, derivatives: { p: { kind: 'mean', mean, realisations: 20, noise: of } } });
    expect(runDerivative(run(noise), 'p', 0)).toMatchObject({ kind: 'mean', exact: mean, strands: [], summary: { realisations: 20, scatter: Float64Array.from([2, 3]) } });
    expect(runDerivative(run(null), 'p', 0).summary).toEqual({ realisations: 20, scatter: null });
  });
});
