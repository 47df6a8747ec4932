import type { Results } from '../results/schema.js';
import type { Drawing } from './drawing.js';
import type { Figure } from './figure.js';

/** Draws what is in the results; computes no statistic. */
export type FigureMaker = (results: Results, drawing: Drawing) => readonly Figure[];
