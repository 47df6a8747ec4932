/** The words of a figure. */
export interface FigureWords {
  /** File name stem and anchor, stable: `gains-marginalised`. */
  readonly name: string;
  readonly title: string;
  /** Says the finding, for those who do not see the drawing. */
  readonly alternative: string;
  /** Says what to see, and what it means for the decision. */
  readonly caption: string;
}

/** A drawn figure with the words that belong to it. */
export interface Figure extends FigureWords {
  /** A whole SVG file with its own background. */
  readonly standalone: string;
  /** The same for inlining: colours follow the page. */
  readonly inline: string;
}
