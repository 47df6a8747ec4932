import type { Note, Panel } from './drawing.js';
import { lookOf } from './palette.js';

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

const shapes: Readonly<Record<string, string>> = { circle: '●', square: '■', triangle: '▲', diamond: '◆', star: '★', cross: '✚' };

/** The combinations with their colours and shapes, wrapped over lines from the top. */
export function combinationKey(entries: readonly { readonly label: string; readonly look: number }[]): readonly Note[] {
  let x = 12;
  let y = 18;
  return entries.map(({ label, look }) => {
    const text = `${shapes[lookOf(look).symbol] ?? '●'} ${label}`;
    const needed = 7.2 * Array.from(text).length + 24;
    if (x > 12 && x + needed > pageWidth) {
      x = 12;
      y += 20;
    }
    const note: Note = { x, y, text, colour: lookOf(look).colour, weight: 'bold' };
    x += needed;
    return note;
  });
}

/** Height that a key takes. */
export function keyHeight(notes: readonly Note[]): number {
  return Math.max(18, ...notes.map(({ y }) => y)) + 14;
}

/** Ticks in few digits, whatever the size. */
export function tick(value: number): string {
  if (value === 0) return '0';
  const size = Math.abs(value);
  const text = size >= 1e5 || size < 1e-3 ? value.toExponential(1).replace('.0e', 'e') : String(Number(value.toPrecision(4)));
  return text.replaceAll('-', '\u2212').replace('e+', 'e');
}
