import type { Panel } from './drawing.js';

/** Small multiples: equal panels in rows, with room above for a key. */
export interface Grid {
  readonly columns: number;
  readonly width: number;
  readonly height: number;
  /** Room above the first row. */
  readonly top: number;
}

/** Width of a figure on the page. */
export const pageWidth = 820;

/** A grid for a number of panels, so many across at most. */
export function gridFor(count: number, height: number, top: number, most = 3): Grid {
  const columns = Math.max(1, Math.min(most, count));
  return { columns, width: Math.floor(pageWidth / columns), height, top };
}

export function placed(grid: Grid, svgs: readonly Element[]): readonly Panel[] {
  return svgs.map((svg, k) => ({
    svg,
    x: (k % grid.columns) * grid.width,
    y: grid.top + Math.floor(k / grid.columns) * grid.height,
  }));
}

export function gridHeight(grid: Grid, count: number): number {
  return grid.top + Math.ceil(count / grid.columns) * grid.height;
}

/** Ticks in few digits, whatever the size. */
export function tick(value: number): string {
  if (value === 0) return '0';
  const size = Math.abs(value);
  const text = size >= 1e5 || size < 1e-3 ? value.toExponential(1).replace('.0e', 'e') : String(Number(value.toPrecision(4)));
  return text.replaceAll('-', '\u2212').replace('e+', 'e');
}
