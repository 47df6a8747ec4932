import type { CombinationResult, Results } from '../results/schema.js';

/** A combination with the number of its look, which is the same in every figure. */
export interface Shown {
  readonly name: string;
  readonly label: string;
  readonly look: number;
  readonly result: CombinationResult;
}

/** Combinations in the order of the study. */
export function shownCombinations(results: Results): readonly Shown[] {
  return Object.entries(results.combinations).map(([name, result], look) => ({ name, label: result.label, look, result }));
}
