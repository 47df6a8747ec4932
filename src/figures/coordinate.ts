import type { Markish } from '@observablehq/plot';
import type { VectorResult } from '../results/schema.js';
import { horizontalAxis } from './axes.js';
import type { Drawing } from './drawing.js';
import { axisLabel } from './labels.js';
import { logTicks } from './log-ticks.js';
import { tick } from './panels.js';

/** Positive coordinates over more than a decade are the trade's cue for a logarithmic axis. */
function isLogarithmic({ values, coordinate }: VectorResult): boolean {
  return coordinate !== null && values.every((value) => value > 0) && Math.max(...values) / Math.min(...values) > 10;
}

/** Horizontal scale of a block: its coordinate, or the entry where it has none. */
export function coordinateScale(vector: VectorResult) {
  return isLogarithmic(vector)
    ? { type: 'log' as const }
    : { type: 'linear' as const, ticks: 4, tickFormat: tick, label: labelOf(vector), labelAnchor: 'center' as const, labelArrow: 'none' as const };
}

/** The axis that a logarithmic coordinate needs beside its scale. */
export function coordinateAxis(drawing: Drawing, vector: VectorResult): readonly Markish[] {
  if (!isLogarithmic(vector)) return [];
  const ticks = logTicks([Math.min(...vector.values), Math.max(...vector.values)], 4);
  return [horizontalAxis(drawing, { ticks, label: labelOf(vector) })];
}

function labelOf({ coordinate, unit }: VectorResult): string {
  return axisLabel(coordinate ?? 'entry', unit);
}
