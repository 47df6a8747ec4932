import type { Markish } from '@observablehq/plot';
import type { VectorResult } from '../results/schema.js';
import { horizontalAxis } from './axes.js';
import type { Drawing } from './drawing.js';
import { axisLabel } from './labels.js';
import { linearTicks, logTicks } from './log-ticks.js';

/** Positive coordinates over more than a decade are the trade's cue for a logarithmic axis. */
export function isLogarithmic(values: readonly number[]): boolean {
  return values.every((value) => value > 0) && Math.max(...values) / Math.min(...values) > 10;
}

type Along = Pick<VectorResult, 'values' | 'coordinate'>;

/** Horizontal scale of a block: its coordinate, or the entry where it has none. */
export function coordinateScale({ values, coordinate }: Along): { readonly type: 'log' | 'linear'; readonly domain: [number, number] } {
  const [low, high] = [Math.min(...values), Math.max(...values)];
  const type = coordinate !== null && isLogarithmic(values) ? 'log' : 'linear';
  if (low < high) return { type, domain: [low, high] };
  return { type, domain: type === 'log' ? [low / 2, low * 2] : [low - 1, low + 1] };
}

/** The axis of a block; without a label where another panel below has it. */
export function coordinateAxis(drawing: Drawing, vector: Along & Pick<VectorResult, 'unit'>, hasLabel = true): Markish {
  const { type, domain } = coordinateScale(vector);
  const ticks = type === 'log' ? logTicks(domain, 4) : linearTicks(domain[0], domain[1], 5);
  return horizontalAxis(drawing, { ticks, label: hasLabel ? axisLabel(vector.coordinate ?? 'entry', vector.unit) : null });
}
