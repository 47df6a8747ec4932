import type { Drawing, Note, Panel } from './drawing.js';
import { compose } from './drawing.js';
import type { Key } from './key.js';
import { pageWidth } from './panels.js';
import { fittedApart, textWidth, wrapped } from './text-width.js';

/** Where a panel stands in a table of panels. */
export interface Place {
  readonly width: number;
  readonly height: number;
  /** The lowest of its column: here the horizontal axis gets its label. */
  readonly isLowest: boolean;
}

interface Head {
  readonly text: string;
  readonly colour?: string;
}

/** Panels in rows and columns with a head for each. */
export interface PanelTable {
  readonly columns: readonly Head[];
  readonly rows: readonly string[];
  readonly rowHeight: number;
  /** Room that the lowest row needs for its label. */
  readonly foot: number;
  readonly panel: (row: number, column: number, place: Place) => Element;
}

/** Beyond this a panel is too narrow to read; further columns go below. */
const mostAcross = 4;
const headHeight = 34;

/** The table under its key; columns that do not fit across make further tables below, of like width. */
export function composeTable(drawing: Drawing, key: Key, table: PanelTable): Element {
  const { columns, rows, rowHeight, foot } = table;
  const labelWidth = Math.min(110, Math.max(28, ...rows.map((row) => textWidth(row, 13, true)))) + 16;
  const labels = fittedApart(rows, labelWidth - 16, 13, true);
  const chunks = Math.ceil(columns.length / mostAcross);
  const across = Math.ceil(columns.length / chunks);
  const width = Math.floor((pageWidth - labelWidth) / across);
  const panels: Panel[] = [{ svg: key.svg, x: 0, y: 6 }];
  const notes: Note[] = [];
  let y = key.height + 14;
  for (let start = 0; start < columns.length; start += across) {
    const own = columns.slice(start, start + across);
    own.forEach((head, k) => {
      const lines = wrapped(head.text, width - 24, 2, 12, true);
      lines.forEach((text, line) => {
        const middle = labelWidth + k * width + 26 + (width - 36) / 2;
        notes.push({ x: middle, y: y + headHeight - 8 - 15 * (lines.length - 1 - line), text, anchor: 'middle', weight: 'bold', ...(head.colour === undefined ? {} : { colour: head.colour }) });
      });
    });
    y += headHeight;
    labels.forEach((label, row) => {
      const isLowest = row === rows.length - 1;
      const height = rowHeight + (isLowest ? foot : 0);
      notes.push({ x: 12, y: y + rowHeight / 2, text: label, weight: 'bold', size: 13 });
      own.forEach((_, k) => panels.push({ svg: table.panel(row, start + k, { width, height, isLowest }), x: labelWidth + k * width, y }));
      y += height;
    });
    y += 10;
  }
  return compose(drawing, { width: pageWidth, height: y, panels, notes });
}
