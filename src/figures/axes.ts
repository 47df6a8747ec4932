import type { Markish } from '@observablehq/plot';
import type { Drawing } from './drawing.js';
import { tick } from './panels.js';

/**
 * Axes with exactly the given ticks, all labelled. Plot leaves labels out on a logarithmic scale where it thinks them too
 * close, and a reader then has to guess.
 */
export function horizontalAxis({ plot }: Drawing, ticks: readonly number[], format: (value: number) => string = tick): Markish {
  return plot.axisX([...ticks], { text: format, label: null });
}

export function verticalAxis({ plot }: Drawing, ticks: readonly number[], format: (value: number) => string = tick): Markish {
  return plot.axisY([...ticks], { text: format, label: null });
}
