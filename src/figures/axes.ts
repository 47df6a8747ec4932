import type { Markish } from '@observablehq/plot';
import type { Drawing } from './drawing.js';
import { tick } from './panels.js';

/** Ticks of an axis, all labelled, and what the axis shows; null leaves the label out. */
interface Axis {
  readonly ticks: readonly number[];
  readonly label: string | null;
  readonly format?: (value: number) => string;
}

/**
 * Axes with exactly the given ticks, all labelled. Plot leaves labels out on a logarithmic scale where it thinks them too
 * close, and a reader then has to guess.
 */
export function horizontalAxis({ plot }: Drawing, { ticks, label, format = tick }: Axis): Markish {
  return plot.axisX([...ticks], { text: format, label, labelAnchor: 'center', labelArrow: 'none' });
}

export function verticalAxis({ plot }: Drawing, { ticks, label, format = tick }: Axis): Markish {
  return plot.axisY([...ticks], { text: format, label, labelArrow: 'none' });
}
