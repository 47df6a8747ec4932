import type { RootContent } from 'mdast';
import type { Results } from '../../results/schema.js';

/** Words about the results, or about one combination. */
export type SentenceMaker = (results: Results, combination: string | null) => readonly RootContent[];
