import type { Markish } from '@observablehq/plot';
import type { Drawing } from './drawing.js';
import { faint } from './palette.js';
import { tick } from './panels.js';

/** Ticks of an axis, all labelled, and what the axis shows; null leaves the label out. */
interface Axis {
  readonly ticks: readonly number[];
  readonly label: string | null;
  readonly format?: (value: number) => string;
  /** A vertical axis: the label along its middle, turned; else above it. */
  readonly isCentred?: boolean;
}

/**
 * Axes with exactly the given ticks, all labelled, and faint lines at them. Plot leaves labels out on a logarithmic scale where it
 * thinks them too close, and a reader then has to guess.
 */
export function horizontalAxis({ plot }: Drawing, { ticks, label, format = tick }: Axis): Markish {
  return [
    plot.ruleX(ticks, { stroke: faint.light, strokeWidth: 0.7 }),
    plot.axisX([...ticks], { text: format, label, labelAnchor: 'center', labelArrow: 'none', tickSize: 4 }),
  ];
}

export function verticalAxis({ plot }: Drawing, { ticks, label, format = tick, isCentred = false }: Axis): Markish {
  return [
    plot.ruleY(ticks, { stroke: faint.light, strokeWidth: 0.7 }),
    plot.axisY([...ticks], { text: format, label, labelAnchor: isCentred ? 'center' : 'top', labelArrow: 'none', tickSize: 4 }),
  ];
}
