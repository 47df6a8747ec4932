import type { Markish } from '@observablehq/plot';
import type { VectorResult } from '../results/schema.js';
import { horizontalAxis } from './axes.js';
import type { Drawing } from './drawing.js';
import { logTicks } from './log-ticks.js';
import { tick } from './panels.js';

/** Positive coordinates over more than a decade are the trade's cue for a logarithmic axis. */
function isLogarithmic({ values, coordinate }: VectorResult): boolean {
  return coordinate !== null && values.every((value) => value > 0) && Math.max(...values) / Math.min(...values) > 10;
}

/** Scale options of a block's coordinate. */
export function coordinateScale(vector: VectorResult) {
  return isLogarithmic(vector) ? { type: 'log' as const, ticks: [] } : { type: 'linear' as const, ticks: 4, tickFormat: tick };
}

/** The axis that a logarithmic coordinate needs beside its scale. */
export function coordinateAxis(drawing: Drawing, vector: VectorResult): readonly Markish[] {
  if (!isLogarithmic(vector)) return [];
  return [horizontalAxis(drawing, logTicks([Math.min(...vector.values), Math.max(...vector.values)], 4))];
}
