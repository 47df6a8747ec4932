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
    const panels = [
      { svg: heat(drawing, matrix), x: left, y: top },
      { svg: frame(results, drawing, matrix), x: 0, y: 0 },
    ];
    const svg = compose(drawing, { width: pageWidth, height: top + side + 70, panels });
    const coarse = matrix.entriesPerCell > 1 ? ` Each cell is the mean over ${String(matrix.entriesPerCell)} × ${String(matrix.entriesPerCell)} entries at most.` : '';
    return finish(svg, {
      name: `data-correlation-${suite}`,
      title: `Correlation of the data of suite ${suite}`,
      alternative: describe(results, matrix),
      caption: `Correlation of the entries of the data vector in suite ${suite}: blue positive, brown negative, stronger is denser. Correlations between probes are what a joint analysis can use to predict one probe's noise from the other's.${coarse}`,
    });
  });
}

const left = 190;
const top = 12;
const side = 618;
/** Steps of strength: as many as the eye tells apart, and one path each keeps the file small. */
const levels = 20;

/** Cells of one sign and strength as one path: a thousand rectangles would be half a megabyte. */
export function cellPaths(cells: readonly (readonly number[])[]): ReadonlyMap<number, string> {
  const size = side / cells.length;
  const paths = new Map<number, string>();
  const edge = (k: number): number => Math.round(k * size);
  cells.forEach((values, row) => {
    values.forEach((value, column) => {
      const level = Math.round(levels * value);
      if (level === 0) return;
      const [x, y] = [edge(column), edge(row)];
      const piece = `M${String(x)},${String(y)}h${String(edge(column + 1) - x)}v${String(edge(row + 1) - y)}H${String(x)}z`;
      paths.set(level, (paths.get(level) ?? '') + piece);
    });
  });
  return new Map([...paths].sort(([a], [b]) => a - b));
}

function heat({ document }: Drawing, { cells }: DataCorrelation): Element {
  const namespace = 'http://www.w3.org/2000/svg';
  const svg = document.createElementNS(namespace, 'svg');
  for (const [level, d] of cellPaths(cells)) {
    const path = document.createElementNS(namespace, 'path');
    path.setAttribute('d', d);
    path.setAttribute('fill', tone(level));
    path.setAttribute('fill-opacity', String(Math.abs(level) / levels));
    svg.append(path);
  }
  return svg;
}

/** Blocks in their order, with where they start and end among the cells. */
function spansOf(results: Results, { groups }: DataCorrelation) {
  let place = 0;
  return groups.map((group, k) => {
    const start = place;
    place += group.cells;
    const probe = groups[k - 1]?.probe === group.probe ? '' : (results.probes[group.probe]?.label ?? group.probe);
    return { start, end: place, probe, label: shortened(blockLabel(group.label), 24) };
  });
}

function frame(results: Results, { document, plot }: Drawing, matrix: DataCorrelation): Element {
  const size = matrix.cells.length;
  const spans = spansOf(results, matrix);
  type Span = (typeof spans)[number];
  const middle = (span: Span): number => (span.start + span.end) / 2;
  return plot.plot({
    document,
    width: pageWidth,
    height: top + side + 70,
    marginLeft: left,
    marginTop: top,
    marginRight: pageWidth - left - side,
    marginBottom: 70,
    x: { domain: [0, size], axis: null },
    y: { domain: [0, size], reverse: true, axis: null },
    marks: [
      plot.ruleX(spans.slice(1), { x: 'start', stroke: quiet.light, strokeOpacity: 0.6 }),
      plot.ruleY(spans.slice(1), { y: 'start', stroke: quiet.light, strokeOpacity: 0.6 }),
      plot.frame({ stroke: quiet.light }),
      plot.text(spans, { x: 0, y: middle, text: 'label', textAnchor: 'end', dx: -8 }),
      plot.text(
        spans.filter(({ probe }) => probe !== ''),
        { x: 0, y: 'start', text: (span: Span) => shortened(span.probe, 24), textAnchor: 'end', dx: -8, dy: 9, fontWeight: 'bold' },
      ),
      plot.text(spans, { y: size, x: middle, text: 'label', rotate: -24, textAnchor: 'end', dy: 10 }),
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
