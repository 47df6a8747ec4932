import { add } from '../linalg/small.js';
import type { Combined } from './combined.js';
import { restricted } from './combined.js';
import { solve } from './log-errors.js';
import type { Part } from './part.js';
import type { Members } from './subset.js';
import { countOf, subsetFisher } from './subset.js';

/** Log errors of one block of realisations, by quantity; null where they do not exist. */
interface BlockLogs {
  readonly raw: readonly (number | null)[];
  readonly corrected: readonly (number | null)[];
}

/** Errors from disjoint blocks of realisations, at an eighth, a quarter, half and all of them. */
export interface Convergence {
  /** Mean realisations in a block, of the strand that has the fewest. */
  readonly realisations: readonly number[];
  /** [sizes][blocks] */
  readonly levels: readonly (readonly BlockLogs[])[];
  /** By quantity: 1/sigma^2(N) = (1 + b/N)/limit^2 fitted to the raw values. */
  readonly fits: readonly (Fit | null)[];
}

export interface Fit {
  readonly logLimit: number;
  readonly b: number;
}

const divisions = [8, 4, 2, 1] as const;

/**
 * Raw and corrected errors against the number of derivative realisations, from disjoint blocks (nested subsets would
 * hide the scatter). Realisations are dealt out in turn within each set that the same strands share, so that every strand has its
 * share of every block. null without noise.
 */
export function convergenceOf(combined: Combined): Convergence | null {
  const strands = combined.parts.flatMap((part) => part.strands);
  if (!combined.assessable || strands.length === 0) return null;
  const turns = combined.parts.map(dealt);
  const levels = divisions
    .map((division) => Array.from({ length: division }, (_, remainder) => blockLogs(combined, turns, division, remainder)))
    .flatMap((blocks, k) => {
      const whole = blocks.filter((block) => block !== null);
      return whole.length === blocks.length ? [{ blocks: whole, division: divisions[k]! }] : [];
    });
  const fewest = Math.min(...strands.map((strand) => strand.seeds.length));
  const realisations = levels.map(({ division }) => fewest / division);
  return {
    realisations,
    levels: levels.map(({ blocks }) => blocks),
    fits: combined.active.flatMap((_, a) => [2 * a, 2 * a + 1]).map((q) => fit(levels, realisations, q)),
  };
}

/** Turn of each realisation of a part's suite: numbered through the sets of realisations that the same strands share. */
function dealt(part: Part): Int32Array {
  const count = part.suite.derivativeSeeds.size;
  const sets = new Map<string, number[]>();
  for (let s = 0; s < count; s += 1) {
    const owners = part.strands.flatMap((strand, u) => (strand.rowOf[s]! < 0 ? [] : [u])).join(' ');
    const set = sets.get(owners);
    if (set === undefined) sets.set(owners, [s]);
    else set.push(s);
  }
  const turns = new Int32Array(count);
  [...sets.values()].flat().forEach((s, turn) => {
    turns[s] = turn;
  });
  return turns;
}

function blockLogs(combined: Combined, turns: readonly Int32Array[], division: number, remainder: number): BlockLogs | null {
  const { active, prior } = combined;
  const fishers = combined.parts.map((part, k) => {
    const members: Members = Uint8Array.from(turns[k]!, (turn) => (turn % division === remainder ? 1 : 0));
    return part.strands.some((strand) => countOf(strand, members) < 2) ? null : subsetFisher(part, members);
  });
  const present = fishers.filter((fisher) => fisher !== null);
  if (present.length < fishers.length) return null;
  const total = (pick: (fisher: (typeof present)[number]) => (typeof present)[number]['raw']) =>
    solve(add([1, prior], ...present.map((fisher) => [1, restricted(pick(fisher), active)] as const))).logs;
  return { raw: total((fisher) => fisher.raw), corrected: total((fisher) => fisher.corrected) };
}

/**
 * Least squares of y(N) = A + B/N through the mean of 1/sigma^2 over the blocks of each size: limit = 1/sqrt(A),
 * b = B/A. For a fixed error the raw mean follows this law exactly; marginalised, it is the trade's habit.
 * null with fewer than three sizes, a missing value, or A <= 0.
 * Source: common practice, no source.
 */
function fit(levels: readonly { readonly blocks: readonly BlockLogs[] }[], realisations: readonly number[], quantity: number): Fit | null {
  if (levels.length < 3) return null;
  const points: { readonly x: number; readonly y: number }[] = [];
  for (const [k, { blocks }] of levels.entries()) {
    let sum = 0;
    for (const block of blocks) {
      const log = block.raw[quantity];
      if (log === null || log === undefined) return null;
      sum += Math.exp(-2 * log);
    }
    points.push({ x: 1 / realisations[k]!, y: sum / blocks.length });
  }
  const meanX = points.reduce((sum, { x }) => sum + x, 0) / points.length;
  const meanY = points.reduce((sum, { y }) => sum + y, 0) / points.length;
  const slope =
    points.reduce((sum, { x, y }) => sum + (x - meanX) * (y - meanY), 0) /
    points.reduce((sum, { x }) => sum + (x - meanX) ** 2, 0);
  const intercept = meanY - slope * meanX;
  return intercept > 0 ? { logLimit: -Math.log(intercept) / 2, b: slope / intercept } : null;
}
