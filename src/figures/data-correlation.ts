import type { DataCorrelation, Results } from '../results/schema.js';
import type { Drawing } from './drawing.js';
import { compose, finish, stem } from './drawing.js';
import type { Figure } from './figure.js';
import { blockLabel } from './labels.js';
import { tone } from './parameter-correlation.js';
import { quiet } from './palette.js';
import { pageWidth } from './panels.js';
import { fitted, wrapped } from './text-width.js';

const left = 208;
const top = 12;
const side = 536;
const bottom = 72;

/** Correlation matrix of the data of each suite, with the blocks marked. */
export function dataCorrelation(results: Results, drawing: Drawing): readonly Figure[] {
  return Object.entries(results.dataCorrelation).map(([suite, matrix]) => {
    const panels = [
      { svg: heat(drawing, cellPaths(matrix.cells)), x: left, y: top },
      { svg: frame(results, drawing, matrix), x: 0, y: 0 },
      { svg: heat(drawing, scalePaths()), x: left + side + 24, y: top },
      { svg: scaleAxis(drawing), x: left + side + 24, y: 0 },
    ];
    const svg = compose(drawing, { width: pageWidth, height: top + side + bottom, panels });
    const coarse = matrix.entriesPerCell > 1 ? ` Each cell is the mean over ${String(matrix.entriesPerCell)} × ${String(matrix.entriesPerCell)} entries at most.` : '';
    return finish(svg, {
      name: `data-correlation-${stem(suite)}`,
      title: `Correlation of the data of suite ${suite}`,
      alternative: describe(results, matrix),
      caption: `Correlation of the entries of the data vector in suite ${suite}: blue positive, brown negative, stronger is denser. Correlations between probes are what a joint analysis can use to predict one probe's noise from the other's.${coarse}`,
    });
  });
}

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

const scaleWidth = 12;

/** The scale beside the matrix, 1 on top, in the steps of the matrix. */
function scalePaths(): ReadonlyMap<number, string> {
  const edge = (level: number): number => Math.round(((levels - level) / (2 * levels)) * side);
  const steps = Array.from({ length: 2 * levels }, (_, k) => levels - k).filter((level) => level !== 0);
  return new Map(steps.map((level) => [level, `M0,${String(edge(level))}h${String(scaleWidth)}V${String(edge(level - 1))}H0z`]));
}

function scaleAxis({ document, plot }: Drawing): Element {
  return plot.plot({
    document,
    width: 48,
    height: top + side + 10,
    marginLeft: 0,
    marginRight: 48 - scaleWidth,
    marginTop: top,
    marginBottom: 10,
    x: { domain: [0, 1], axis: null },
    y: { domain: [-1, 1] },
    marks: [
      plot.axisY([-1, -0.5, 0, 0.5, 1], { anchor: 'right', tickSize: 3, label: null, text: (value: number) => String(value).replace('-', '\u2212') }),
      plot.frame({ stroke: quiet.light, strokeOpacity: 0.6 }),
    ],
  });
}

function heat({ document }: Drawing, paths: ReadonlyMap<number, string>): Element {
  const namespace = 'http://www.w3.org/2000/svg';
  const svg = document.createElementNS(namespace, 'svg');
  for (const [level, d] of paths) {
    const path = document.createElementNS(namespace, 'path');
    path.setAttribute('d', d);
    path.setAttribute('fill', tone(level));
    path.setAttribute('fill-opacity', String(Math.abs(level) / levels));
    svg.append(path);
  }
  return svg;
}

interface Span {
  readonly start: number;
  readonly end: number;
  readonly label: string;
}

const blockRoom = 88;
const probeRoom = left - blockRoom - 24;

/** Blocks in their order, with where they start and end among the cells. */
function blockSpans({ groups }: DataCorrelation): readonly Span[] {
  let place = 0;
  return groups.map((group) => {
    const start = place;
    place += group.cells;
    return { start, end: place, label: fitted(group.label === '' ? group.block : blockLabel(group.label), blockRoom) };
  });
}

/** Probes likewise: neighbouring blocks of one probe together. */
function probeSpans(results: Results, matrix: DataCorrelation): readonly Span[] {
  const spans: Span[] = [];
  blockSpans(matrix).forEach(({ start, end }, k) => {
    const { probe } = matrix.groups[k]!;
    const last = spans[spans.length - 1];
    if (last !== undefined && matrix.groups[k - 1]?.probe === probe) spans[spans.length - 1] = { ...last, end };
    else spans.push({ start, end, label: results.probes[probe]?.label ?? probe });
  });
  return spans;
}

function middle({ start, end }: Span): number {
  return (start + end) / 2;
}

function frame(results: Results, { document, plot }: Drawing, matrix: DataCorrelation): Element {
  const size = matrix.cells.length;
  const [blocks, probes] = [blockSpans(matrix), probeSpans(results, matrix)];
  // Labels of blocks too thin for a line of text are left out.
  const labelled = blocks.filter(({ start, end }) => ((end - start) / size) * side >= 13);
  return plot.plot({
    document,
    width: pageWidth,
    height: top + side + bottom,
    marginLeft: left,
    marginTop: top,
    marginRight: pageWidth - left - side,
    marginBottom: bottom,
    x: { domain: [0, size], axis: null },
    y: { domain: [0, size], reverse: true, axis: null },
    marks: [
      plot.ruleX(blocks.slice(1), { x: 'start', stroke: quiet.light, strokeOpacity: 0.5, strokeWidth: 0.8 }),
      plot.ruleY(blocks.slice(1), { y: 'start', stroke: quiet.light, strokeOpacity: 0.5, strokeWidth: 0.8 }),
      plot.ruleX(probes.slice(1), { x: 'start', stroke: 'currentColor', strokeWidth: 1.2 }),
      plot.ruleY(probes.slice(1), { y: 'start', stroke: 'currentColor', strokeWidth: 1.2, insetLeft: 12 - left }),
      plot.frame({ stroke: quiet.light }),
      plot.text(labelled, { x: 0, y: middle, text: 'label', textAnchor: 'end', dx: -8 }),
      ...probes.flatMap((probe) => probeLines(probe, size).map((text, k, lines) => plot.text([probe], { x: 0, y: middle, text: () => text, textAnchor: 'start', dx: 12 - left, dy: 15 * (k - (lines.length - 1) / 2), fontWeight: 'bold' }))),
      plot.text(labelled, { y: size, x: middle, text: 'label', rotate: -28, textAnchor: 'end', dy: 10 }),
    ],
  });
}

/** A probe's name over as many lines as its blocks have room for. */
function probeLines({ label, start, end }: Span, size: number): readonly string[] {
  const lines = Math.min(3, Math.floor((((end - start) / size) * side) / 15));
  return lines < 1 ? [] : wrapped(label, probeRoom, lines, 12, true);
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
