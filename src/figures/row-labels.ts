import type { Results } from '../results/schema.js';
import type { Note } from './drawing.js';
import { parameterLabel } from './labels.js';
import { pageWidth } from './panels.js';
import { fittedApart, textWidth } from './text-width.js';

/** Room for the names of parameters and combinations left of a plot of rows. */
export interface RowLabels {
  /** Where the plot begins. */
  readonly left: number;
  /** Height that a parameter's name takes above its rows; 0 where it stands beside them. */
  readonly headHeight: number;
  /** Labels of combinations as they fit. */
  readonly short: ReadonlyMap<string, string>;
  /** Labels of parameters, likewise. */
  readonly heads: ReadonlyMap<string, string>;
}

const widestLabel = 210;
/** A parameter's name that is wider stands over its rows. */
const widestBeside = 72;
const headSize = 15;

export function rowLabels(results: Results, labels: readonly string[]): RowLabels {
  const names = Math.max(...results.parameters.map(({ name }) => textWidth(parameterLabel(results, name), headSize, true)));
  const isBeside = names <= widestBeside;
  const distinct = [...new Set(labels)];
  const room = Math.min(widestLabel, Math.max(...distinct.map((label) => textWidth(label))));
  const short = fittedApart(distinct, room);
  const heads = fittedApart(results.parameters.map(({ name }) => parameterLabel(results, name)), pageWidth / 2, headSize, true);
  return {
    left: 12 + (isBeside ? names + 14 : 10) + room + 14,
    headHeight: isBeside ? 0 : 24,
    short: new Map(distinct.map((label, k) => [label, short[k]!])),
    heads: new Map(results.parameters.map(({ name }, k) => [name, heads[k]!])),
  };
}

/** The name of a parameter at its place. */
export function parameterHead({ heads }: RowLabels, parameter: string, y: number): Note {
  return { x: 12, y: y + 5, text: heads.get(parameter)!, weight: 'bold', size: headSize };
}
