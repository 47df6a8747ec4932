import type { PhrasingContent } from 'mdast';
import { percent } from '../../results/rounding.js';
import type { Results } from '../../results/schema.js';
import { cleanInline } from '../markdown/clean.js';
import { say } from '../markdown/nodes.js';
import { combinationLabel } from './labels.js';

/** Values that a template can have in a line. */
export const valueMakers: Readonly<Record<string, (results: Results, combination: string | null) => readonly PhrasingContent[]>> = {
  title: ({ study }) => cleanInline(study.title),
  baseline: (results) => combinationLabel(results, results.study.baseline),
  combination: (results, name) => combinationLabel(results, name ?? results.study.baseline),
  tolerance: ({ study }) => say`${percent(study.tolerance)}`,
};
