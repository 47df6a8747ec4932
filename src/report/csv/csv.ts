/** A cell: a number in full, a word, or nothing where there is no number. */
export type Cell = number | string | null;

export interface CsvTable {
  /** The header row; units in brackets. */
  readonly header: readonly string[];
  readonly rows: readonly (readonly Cell[])[];
}

/**
 * RFC 4180 with line feeds: numbers as the shortest decimal that reads back as the same double, nothing for a number that does not exist. A
 * word that a spreadsheet would take for a formula gets an apostrophe before it.
 */
export function writeCsv({ header, rows }: CsvTable): string {
  return [header, ...rows].map((row) => `${row.map(cellText).join(',')}\n`).join('');
}

function cellText(cell: Cell): string {
  if (cell === null) return '';
  if (typeof cell === 'number') return String(cell);
  const inert = /^[\s]*[=+\-@|\t\r]/.test(cell) ? `'${cell}` : cell;
  return /[",\n\r]/.test(inert) ? `"${inert.replaceAll('"', '""')}"` : inert;
}
