import { roundTo } from '../results/rounding.js';
import type { Improvement, Results } from '../results/schema.js';
import { horizontalAxis } from './axes.js';
import type { Drawing, Note } from './drawing.js';
import { compose, finish } from './drawing.js';
import type { Figure } from './figure.js';
import type { GainHead, GainRow, Kind } from './gain-rows.js';
import { arrangeGains } from './gain-rows.js';
import { gainWords } from './gain-words.js';
import type { KeyItem } from './key.js';
import { drawKey, quietItem } from './key.js';
import { logTicks } from './log-ticks.js';
import { faint, lookOf, quiet, warning } from './palette.js';
import { pageWidth } from './panels.js';
import { roomBeside } from './room.js';
import type { RowLabels } from './row-labels.js';
import { parameterHead, rowLabels } from './row-labels.js';
import { textWidth } from './text-width.js';

/** Columns right of the plot: value with interval, and status. */
const valueWidth = 160;
const statusWidth = 96;
const right = valueWidth + statusWidth;

/** Raw, sham and corrected gain of every parameter and combination over the baseline. */
export function gains(results: Results, drawing: Drawing): readonly Figure[] {
  if (Object.keys(results.improvements).length === 0) return [];
  return (['marginalised', 'fixed'] as const).map((kind) => gainFigure(results, drawing, kind));
}

function gainFigure(results: Results, drawing: Drawing, kind: Kind): Figure {
  const labels = rowLabels(results, Object.keys(results.improvements).map((name) => results.combinations[name]?.label ?? name));
  const arranged = arrangeGains(results, kind, labels.headHeight);
  const key = drawKey(drawing, keyItems());
  const top = key.height + 46;
  const height = top + arranged.height + 48;
  const panels = [
    { svg: key.svg, x: 0, y: 6 },
    { svg: drawRows(drawing, arranged.rows, arranged.heads, labels.left, arranged.height), x: 0, y: top - marginTop },
  ];
  const notes = notesOf(arranged.rows, arranged.heads, labels).map((note) => ({ ...note, y: note.y + top }));
  const svg = compose(drawing, { width: pageWidth, height, panels, notes });
  return finish(svg, gainWords(results, kind, arranged.rows, arranged.leftOut));
}

function keyItems(): readonly KeyItem[] {
  return [
    quietItem('raw: derivative noise and all', { symbol: { name: 'circle', filled: false } }),
    { text: 'sham: what the noise alone would show', sample: { colour: warning.light, symbol: { name: 'times', filled: false } } },
    { text: 'corrected, with 68 % and 95 %', coloured: true, sample: { colour: lookOf(0).colour, symbol: { name: 'circle', filled: true }, line: { width: 1.4 }, within: true } },
  ];
}

function notesOf(rows: readonly GainRow[], heads: readonly GainHead[], labels: RowLabels): readonly Note[] {
  const { left, short } = labels;
  const values = pageWidth - right + 14;
  return [
    { x: values, y: -16, text: 'corrected', colour: quiet.light },
    { x: pageWidth - statusWidth + 2, y: -16, text: 'status', colour: quiet.light },
    ...heads.map(({ kind, parameter, place }): Note =>
      kind === 'nuisance'
        ? { x: 12, y: place, text: 'nuisance parameters', colour: quiet.light, style: 'italic' }
        : parameterHead(labels, parameter, place),
    ),
    ...rows.flatMap(({ label, look, place, gain }): readonly Note[] => [
      { x: left - 12, y: place + 4, text: short.get(label)!, anchor: 'end', colour: lookOf(look).colour },
      ...valueNotes(gain, values, place + 4),
      { x: pageWidth - statusWidth + 2, y: place + 4, text: gain.status, colour: quiet.light },
    ]),
  ];
}

/** The corrected value, and its 95 % interval in quiet ink. */
function valueNotes({ corrected, standardError, interval95 }: Improvement, x: number, y: number): readonly Note[] {
  if (corrected === null) return [{ x, y, text: '–', weight: 'bold' }];
  const text = roundTo(corrected, standardError);
  const value: Note = { x, y, text, weight: 'bold' };
  if (interval95 === null) return [value];
  const [low, high] = interval95.map((end) => roundTo(end, standardError));
  return [value, { x: x + Math.max(44, textWidth(text, 12, true) + 6), y, text: `${low!}–${high!}`, colour: quiet.light, size: 11 }];
}

/** From the marks; an interval may be much wider than they, and is then cut with an arrow. */
export function gainDomain(rows: readonly GainRow[]): [number, number] {
  const marks = [1, ...rows.flatMap(({ gain }) => [gain.raw, gain.sham, gain.corrected])].filter((value) => value !== null);
  const ends = rows.flatMap(({ gain }) => gain.interval95 ?? []);
  const [low, high] = [Math.min(...marks), Math.max(...marks)];
  return [Math.max(Math.min(0.95, low, ...ends), low / 2) / 1.03, Math.min(Math.max(1.15, high, ...ends), high * 2) * 1.03];
}

const marginTop = 24;
/** Pixels of "cannot tell". */
const wordsWidth = 72;

function drawRows(drawing: Drawing, rows: readonly GainRow[], heads: readonly GainHead[], left: number, height: number): Element {
  const { document, plot } = drawing;
  const domain = gainDomain(rows);
  const pixels = pageWidth - left - right;
  return plot.plot({
    document,
    width: pageWidth,
    height: height + marginTop + 48,
    marginLeft: left,
    marginRight: right,
    marginTop,
    marginBottom: 48,
    style: { fontSize: '12px' },
    x: { type: 'log', domain },
    y: { type: 'linear', domain: [0, height], range: [marginTop, marginTop + height], axis: null },
    marks: [
      horizontalAxis(drawing, { ticks: logTicks(domain, Math.floor(pixels / 42)), label: 'gain: error of the baseline / error of the combination' }),
      plot.ruleY(heads.filter(({ kind }, k) => kind === 'parameter' && k > 0), { y: (head: GainHead) => firstPlace(rows, head) - 18, insetLeft: 12 - left, insetRight: 12 - right, stroke: faint.light, strokeWidth: 0.8 }),
      plot.ruleX([1], { stroke: 'currentColor', strokeWidth: 1.2 }),
      plot.text([1], { x: (value: number) => value, frameAnchor: 'top', dy: -12, text: () => 'no gain', fontWeight: 'bold' }),
      plot.text([1], { x: (value: number) => value, frameAnchor: 'top', dy: -12, dx: 30, textAnchor: 'start', text: () => 'better →', fill: quiet.light }),
      ...gainMarks(drawing, rows, domain, pixels),
    ],
  });
}

/** Where the rows of a head begin. */
function firstPlace(rows: readonly GainRow[], { parameter, place }: GainHead): number {
  return Math.min(place, rows.find((row) => row.parameter === parameter)?.place ?? place);
}

function gainMarks({ plot }: Drawing, rows: readonly GainRow[], domain: readonly [number, number], pixels: number) {
  const y = (row: GainRow): number => row.place;
  const known = rows.filter(({ gain }) => gain.corrected !== null);
  const colour = (row: GainRow): string => lookOf(row.look).colour;
  const inside = (value: number): number => Math.min(domain[1], Math.max(domain[0], value));
  const has = (pick: (gain: Improvement) => number | null): readonly GainRow[] => rows.filter(({ gain }) => pick(gain) !== null);
  const cut = (end: 0 | 1): readonly GainRow[] => known.filter(({ gain }) => inside(gain.interval95![end]) !== gain.interval95![end]);
  return [
    plot.ruleY(known, { x1: (row: GainRow) => inside(row.gain.interval95![0]), x2: (row: GainRow) => inside(row.gain.interval95![1]), y, stroke: colour, strokeWidth: 1.4 }),
    plot.ruleY(known, { x1: (row: GainRow) => inside(row.gain.interval![0]), x2: (row: GainRow) => inside(row.gain.interval![1]), y, stroke: colour, strokeWidth: 5 }),
    ...([0, 1] as const).map((end) => plot.dot(cut(end), { x: domain[end], y, symbol: 'triangle', rotate: end === 1 ? 90 : -90, r: 4, fill: colour, stroke: 'none' })),
    plot.dot(known, { x: (row: GainRow) => row.gain.corrected, y, r: 5.2, fill: colour, symbol: (row: GainRow) => lookOf(row.look).symbol, stroke: 'none' }),
    plot.dot(has(({ raw }) => raw), { x: (row: GainRow) => row.gain.raw, y, r: 4.5, stroke: quiet.light, strokeWidth: 1.7 }),
    plot.dot(has(({ sham }) => sham), { x: (row: GainRow) => row.gain.sham, y, symbol: 'times', r: 4, stroke: warning.light, strokeWidth: 1.9 }),
    ...rows.filter(({ gain }) => gain.corrected === null).map((row) => {
      const marks = [row.gain.raw, row.gain.sham].filter((value) => value !== null);
      const { at, anchor, dx } = roomBeside(marks, [1], domain, pixels, wordsWidth);
      return plot.text([row], { x: at, y, dx, textAnchor: anchor, text: () => 'cannot tell', fill: warning.light, fontStyle: 'italic' });
    }),
  ];
}
