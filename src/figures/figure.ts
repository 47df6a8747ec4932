import type { Results } from '../results/schema.js';
import type { Drawing } from './drawing.js';

/** A drawn figure with the words that belong to it. */
export interface Figure {
  /** File name stem and anchor, stable: `gains-marginalised`. */
  readonly name: string;
  /** A whole SVG file with its own background. */
  readonly standalone: string;
  /** The same for inlining: colours follow the page. */
  readonly inline: string;
  readonly title: string;
  /** Says the finding, for those who do not see the drawing. */
  readonly alternative: string;
  /** Says what to see, and what it means for the decision. */
  readonly caption: string;
}

/** Draws what is in the results; computes no statistic. */
export type FigureMaker = (results: Results, drawing: Drawing) => readonly Figure[];
