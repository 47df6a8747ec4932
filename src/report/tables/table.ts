import type { AlignType, PhrasingContent, TableCell } from 'mdast';
import type { Results } from '../../results/schema.js';
import type { Frame, Said } from '../markdown/nodes.js';
import { paragraph, say } from '../markdown/nodes.js';
import type { Numbering } from '../numbering.js';
import { numbered } from '../numbering.js';

/** A table as it is shown. The first cell of a row is its heading. */
export interface ReportTable {
  /** Without the "table-" before it. */
  readonly id: string;
  readonly caption: readonly PhrasingContent[];
  readonly columns: readonly Column[];
  readonly rows: readonly (readonly Said[])[];
}

export interface Column {
  readonly heading: Said;
  /** Numbers stand to the right. */
  readonly align: 'left' | 'right';
}

/** A table of the results; null where there is nothing to show. */
export type TableMaker = (results: Results) => ReportTable | null;

/** A table of one combination. */
export type CombinationTableMaker = (results: Results, combination: string) => ReportTable;

export function words(heading: Said): Column {
  return { heading, align: 'left' };
}

export function numbers(heading: Said): Column {
  return { heading, align: 'right' };
}

/** The numbered table with its caption above. */
export function tableFrame(table: ReportTable, numbering: Numbering, fail: (what: string) => Error): Frame {
  const id = `table-${table.id}`;
  const label = numbered(numbering, 'Table', id, fail);
  const align: AlignType[] = table.columns.map((column) => column.align);
  const rows = [table.columns.map(({ heading }) => heading), ...table.rows];
  return {
    type: 'frame',
    data: { hName: 'figure', hProperties: { id, className: ['table'] } },
    children: [
      { ...paragraph(...say`${label} ${table.caption}`), data: { hName: 'figcaption', hProperties: { id: `${id}-caption` } } },
      { type: 'table', align, children: rows.map((row) => ({ type: 'tableRow', children: row.map(cell) })) },
    ],
  };
}

function cell(content: Said): TableCell {
  return { type: 'tableCell', children: say`${content}` };
}
