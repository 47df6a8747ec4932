import type { DataCorrelation, Results } from '../results/schema.js';
import type { Drawing } from './drawing.js';
import { compose, finish } from './drawing.js';
import type { Figure } from './figure.js';
import { blockLabel, shortened } from './labels.js';
import { tone } from './parameter-correlation.js';
import { quiet } from './palette.js';
import { pageWidth } from './panels.js';

/** Correlation matrix of the data of each suite, with the blocks marked. */
export function dataCorrelation(results: Results, drawing: Drawing): readonly Figure[] {
  return Object.entries(results.dataCorrelation).map(([suite, matrix]) => {
    const svg = compose(drawing, { width: pageWidth, height: 700, panels: [{ svg: panel(results, drawing, matrix), x: 0, y: 0 }] });
    const coarse = matrix.entriesPerCell > 1 ? ` Each cell is the mean over ${String(matrix.entriesPerCell)} × ${String(matrix.entriesPerCell)} entries at most.` : '';
    return finish(svg, {
      name: `data-correlation-${suite}`,
      title: `Correlation of the data of suite ${suite}`,
      alternative: describe(results, matrix),
      caption: `Correlation of the entries of the data vector in suite ${suite}: blue positive, brown negative, stronger is denser. Correlations between probes are what a joint analysis can use to predict one probe's noise from the other's.${coarse}`,
    });
  });
}

interface Cell {
  readonly x1: number;
  readonly x2: number;
  readonly y1: number;
  readonly y2: number;
  readonly value: number;
}

function panel(results: Results, { document, plot }: Drawing, matrix: DataCorrelation): Element {
  const cells: Cell[] = matrix.cells.flatMap((values, row) =>
    values.map((value, column) => ({ x1: column, x2: column + 1, y1: row, y2: row + 1, value })),
  );
  const size = matrix.cells.length;
  let place = 0;
  const spans = matrix.groups.map((group) => {
    const start = place;
    place += group.cells;
    const probe = results.probes[group.probe]?.label ?? group.probe;
    return { start, end: place, label: shortened(`${probe}: ${blockLabel(group.label)}`, 24) };
  });
  return plot.plot({
    document,
    width: pageWidth,
    height: 700,
    marginLeft: 190,
    marginTop: 12,
    marginRight: 10,
    marginBottom: 70,
    x: { domain: [0, size], axis: null },
    y: { domain: [0, size], reverse: true, axis: null },
    opacity: { type: 'identity' },
    marks: [
      plot.rect(
        cells.filter(({ value }) => Math.abs(value) >= 0.02),
        { x1: 'x1', x2: 'x2', y1: 'y1', y2: 'y2', inset: 0, fill: (cell: Cell) => tone(cell.value), fillOpacity: (cell: Cell) => Math.round(20 * Math.abs(cell.value)) / 20 },
      ),
      plot.ruleX(spans.slice(1), { x: 'start', stroke: quiet.light, strokeOpacity: 0.6 }),
      plot.ruleY(spans.slice(1), { y: 'start', stroke: quiet.light, strokeOpacity: 0.6 }),
      plot.frame({ stroke: quiet.light }),
      plot.text(spans, { frameAnchor: 'left', x: 0, y: (span) => (span.start + span.end) / 2, text: 'label', textAnchor: 'end', dx: -8 }),
      plot.text(spans, { frameAnchor: 'bottom', y: size, x: (span) => (span.start + span.end) / 2, text: 'label', rotate: -24, textAnchor: 'end', dy: 8 }),
    ],
  });
}

function describe(results: Results, matrix: DataCorrelation): string {
  const owner = matrix.groups.flatMap((group) => Array.from({ length: group.cells }, () => group));
  let strongest = { value: 0, a: '', b: '' };
  matrix.cells.forEach((values, row) => {
    values.forEach((value, column) => {
      const [a, b] = [owner[row]!, owner[column]!];
      if (a.probe !== b.probe && Math.abs(value) > Math.abs(strongest.value)) strongest = { value, a: a.probe, b: b.probe };
    });
  });
  const label = (probe: string): string => results.probes[probe]?.label ?? probe;
  return strongest.a === ''
    ? `One probe with ${String(owner.length)} cells.`
    : `The strongest correlation between two probes is ${strongest.value.toFixed(2)}, of ${label(strongest.a)} with ${label(strongest.b)}.`;
}
