import type { RootContent } from 'mdast';
import type { Results } from '../../results/schema.js';

/** Words about the results. */
export type SentenceMaker = (results: Results) => readonly RootContent[];

/** Words about one combination. */
export type CombinationSentenceMaker = (results: Results, combination: string) => readonly RootContent[];
