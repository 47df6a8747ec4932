import type { CheckResult, Results } from '../../results/schema.js';
import type { Study } from '../../study/study.js';
import type { Combined } from '../combined.js';
import type { Suite } from '../suite.js';

/** What a check may look at. One check a file, all of this signature; `all.ts` lists them. */
export interface CheckInput {
  readonly study: Study;
  readonly suites: readonly Suite[];
  readonly combined: readonly Combined[];
  /** What was measured for the results, and is judged here. */
  readonly measured: Pick<Results, 'gaussianity' | 'derivativeTests' | 'smallestDirections'>;
}

export type Check = (input: CheckInput) => readonly CheckResult[];
