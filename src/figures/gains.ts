import type { Improvement, Results } from '../results/schema.js';
import { roundTo } from '../results/rounding.js';
import { horizontalAxis } from './axes.js';
import type { Drawing } from './drawing.js';
import { compose, finish } from './drawing.js';
import type { Figure } from './figure.js';
import { parameterLabel, parameterName, parameterNames, shortened } from './labels.js';
import { logTicks } from './log-ticks.js';
import { lookOf, quiet, warning } from './palette.js';

type Kind = 'marginalised' | 'fixed';

/** One row: a parameter in a combination. */
export interface GainRow {
  readonly parameter: string;
  readonly combination: string;
  readonly label: string;
  readonly place: number;
  readonly look: number;
  readonly gain: Improvement;
}

const rowHeight = 22;
const gap = 16;
const left = 300;
const right = 160;
const width = 820;
const top = 64;

/** Raw, sham and corrected gain of every parameter and combination over the baseline. */
export function gains(results: Results, drawing: Drawing): readonly Figure[] {
  if (Object.keys(results.improvements).length === 0) return [];
  return (['marginalised', 'fixed'] as const).map((kind) => gainFigure(results, drawing, kind));
}

/** Rows from top to bottom, with a gap between parameters. */
export function gainRows(results: Results, kind: Kind): readonly GainRow[] {
  const combinations = Object.keys(results.combinations);
  let place = 0;
  return parameterNames(results).flatMap((parameter, k) => {
    if (k > 0) place += gap;
    return Object.entries(results.improvements).map(([combination, gainsOf]) => {
      place += rowHeight;
      const label = results.combinations[combination]?.label ?? combination;
      return { parameter, combination, label, place, look: combinations.indexOf(combination), gain: gainsOf[parameter]![kind] };
    });
  });
}

function gainFigure(results: Results, drawing: Drawing, kind: Kind): Figure {
  const rows = gainRows(results, kind);
  const height = top + rows[rows.length - 1]!.place + 56;
  const panel = drawRows(drawing, rows, height);
  const heads = rows.filter(({ parameter }, k) => rows[k - 1]?.parameter !== parameter);
  const notes = [
    ...key(),
    ...heads.map((row) => ({
      x: 12,
      y: top + row.place + 4,
      text: shortened(parameterLabel(results, row.parameter), 24),
      weight: 'bold' as const,
      size: 14,
    })),
    ...rows.map((row) => ({
      x: left - 12,
      y: top + row.place + 4,
      text: shortened(row.label, 30),
      anchor: 'end' as const,
      colour: lookOf(row.look).colour,
    })),
    ...rows.map((row) => ({ x: width - right + 56, y: top + row.place + 4, text: valueOf(row.gain), anchor: 'end' as const, weight: 'bold' as const })),
    ...rows.map((row) => ({ x: width - right + 64, y: top + row.place + 4, text: row.gain.status, colour: quiet.light })),
  ];
  const svg = compose(drawing, { width, height, panels: [{ svg: panel, x: 0, y: 0 }], notes });
  return finish(svg, words(results, rows, kind));
}

function valueOf({ corrected, standardError }: Improvement): string {
  return corrected === null ? '–' : roundTo(corrected, standardError);
}

function key() {
  const y = 22;
  return [
    { x: left, y, text: '○ raw', colour: quiet.light },
    { x: left + 62, y, text: '✕ sham: derivative noise alone', colour: warning.light },
    { x: left + 262, y, text: '● corrected, 68 % and 95 %' },
  ];
}

function drawRows(drawing: Drawing, rows: readonly GainRow[], height: number): Element {
  const { document, plot } = drawing;
  const y = (row: GainRow): number => row.place;
  const known = rows.filter(({ gain }) => gain.corrected !== null);
  const unknown = rows.filter(({ gain }) => gain.corrected === null);
  const colour = (row: GainRow): string => lookOf(row.look).colour;
  const values = rows.flatMap(({ gain }) => [gain.raw, gain.sham, ...(gain.interval95 ?? [])]).filter((value) => value !== null);
  const domain: [number, number] = [Math.min(0.9, ...values) / 1.03, Math.max(1.15, ...values) * 1.03];
  return plot.plot({
    document,
    width,
    height,
    marginLeft: left,
    marginRight: right,
    marginTop: top,
    marginBottom: 44,
    style: { fontSize: '12px' },
    x: { type: 'log', domain },
    y: { type: 'linear', domain: [0, rows[rows.length - 1]!.place + rowHeight / 2], range: [top, top + rows[rows.length - 1]!.place + rowHeight / 2], axis: null },
    marks: [
      horizontalAxis(drawing, { ticks: logTicks(domain, 9), label: 'error of the baseline / error of the combination (above 1 is better)' }),
      plot.ruleX([1], { stroke: quiet.light, strokeDasharray: '4 3' }),
      plot.text([1], { x: (value: number) => value, frameAnchor: 'top', dy: -12, text: () => 'no gain', fill: quiet.light }),
      plot.ruleY(known, { x1: (row: GainRow) => row.gain.interval95![0], x2: (row: GainRow) => row.gain.interval95![1], y, stroke: colour, strokeWidth: 1.2 }),
      plot.ruleY(known, { x1: (row: GainRow) => row.gain.interval![0], x2: (row: GainRow) => row.gain.interval![1], y, stroke: colour, strokeWidth: 4 }),
      plot.dot(rows.filter(({ gain }) => gain.sham !== null), { x: (row: GainRow) => row.gain.sham, y, symbol: 'times', r: 4, stroke: warning.light, strokeWidth: 1.8 }),
      plot.dot(rows.filter(({ gain }) => gain.raw !== null), { x: (row: GainRow) => row.gain.raw, y, r: 4.5, stroke: quiet.light, strokeWidth: 1.6 }),
      plot.dot(known, { x: (row: GainRow) => row.gain.corrected, y, r: 5, fill: colour, symbol: (row: GainRow) => lookOf(row.look).symbol, stroke: 'none' }),
      plot.text(unknown, { x: domain[0], y, text: () => 'cannot tell', textAnchor: 'start', dx: 6, fill: warning.light }),
    ],
  });
}

function words(results: Results, rows: readonly GainRow[], kind: Kind) {
  const baseline = results.combinations[results.study.baseline]?.label ?? results.study.baseline;
  const sentences = rows.map(({ parameter, label, gain }) => {
    const name = parameterName(results, parameter);
    const raw = gain.raw === null ? 'none' : roundTo(gain.raw, gain.standardError);
    const sham = gain.sham === null ? 'none' : roundTo(gain.sham, null);
    const corrected = gain.corrected === null ? 'cannot tell' : roundTo(gain.corrected, gain.standardError);
    return `${name}, ${label}: raw ${raw}, sham ${sham}, corrected ${corrected} (${gain.status}).`;
  });
  const others = kind === 'marginalised' ? 'with the other parameters free' : 'with the other parameters known';
  return {
    name: `gains-${kind}`,
    title: `Gain over ${baseline}, ${kind}`,
    alternative: `Gain in each parameter over ${baseline}, ${others}. ${sentences.join(' ')}`,
    caption: `Gain over ${baseline}, ${others}. A raw gain (○) that is no larger than the sham gain (✕) is what derivative noise alone would have shown; the corrected gain (filled) with its interval is the one to quote.`,
  };
}
