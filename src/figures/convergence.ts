import { roundTo } from '../results/rounding.js';
import type { Results } from '../results/schema.js';
import { horizontalAxis, verticalAxis } from './axes.js';
import type { Shown } from './combinations.js';
import { shownCombinations } from './combinations.js';
import type { Drawing } from './drawing.js';
import { finish } from './drawing.js';
import type { Figure } from './figure.js';
import { drawKey, quietItem } from './key.js';
import { parameterLabel, parameterName, parameterNames } from './labels.js';
import { logTicks } from './log-ticks.js';
import type { Place } from './matrix.js';
import { composeTable } from './matrix.js';
import { lookOf, quiet, warning } from './palette.js';

/** Most panels: beyond these the table serves better. */
const mostPanels = 32;

type Quantity = 'errors' | 'improvements';

interface Case {
  readonly quantity: Quantity;
  readonly parameter: string;
  readonly shown: Shown;
}

/** Raw and corrected errors, and gains, against the number of derivative realisations, with the limit of the fit and the split estimate. */
export function convergence(results: Results, drawing: Drawing): readonly Figure[] {
  return (['errors', 'improvements'] as const).flatMap((quantity) => convergenceOf(results, drawing, quantity));
}

function convergenceOf(results: Results, drawing: Drawing, quantity: Quantity): readonly Figure[] {
  const all = shownCombinations(results).filter(({ name }) => (results.convergence[name]?.[quantity] ?? null) !== null);
  const targets = parameterNames(results, 'target');
  if (all.length === 0 || targets.length === 0) return [];
  const shown = all.slice(0, Math.max(1, Math.floor(mostPanels / targets.length)));
  const parameters = targets.slice(0, mostPanels);
  const key = drawKey(drawing, [
    quietItem('raw', { symbol: { name: 'circle', filled: false } }),
    quietItem('corrected; bars: scatter between disjoint blocks', { symbol: { name: 'circle', filled: true }, line: { width: 1.2 } }),
    quietItem(quantity === 'errors' ? 'fit to the raw, and its limit' : 'ratio of the limits of the fits', { line: { width: 1.4, dash: '4 3' } }),
    quietItem('split estimate', { symbol: { name: 'diamond', filled: false } }),
  ]);
  const svg = composeTable(drawing, key, {
    columns: shown.map(({ label, look }) => ({ text: label, colour: lookOf(look).colour })),
    rows: parameters.map((name) => parameterLabel(results, name)),
    rowHeight: 122,
    foot: 26,
    panel: (row, column, place) => panel(results, drawing, { quantity, parameter: parameters[row]!, shown: shown[column]! }, place),
  });
  const left = all.length * targets.length - shown.length * parameters.length;
  const nuisance = results.parameters.length - targets.length;
  return [
    finish(svg, {
      ...words[quantity],
      alternative: sentences(results, parameters.flatMap((parameter) => shown.map((one) => ({ quantity, parameter, shown: one })))),
      caption:
        words[quantity].caption +
        (nuisance > 0 ? ' Target parameters only.' : '') +
        (left > 0 ? ` ${String(left)} further pairs of a parameter and a combination are in the table.` : ''),
    }),
  ];
}

const words = {
  errors: {
    name: 'convergence',
    title: 'Errors against the number of derivative realisations',
    caption:
      'Marginalised errors from disjoint blocks of derivative realisations. Raw errors (hollow) that still rise to the right are flattered by noise; corrected errors (filled) should be flat, and meet the limit of the fit and the split estimate.',
  },
  improvements: {
    name: 'convergence-gains',
    title: 'Gains against the number of derivative realisations',
    caption:
      'Marginalised gains over the baseline from the same blocks. Raw gains (hollow) that still fall to the right are flattered by noise; corrected gains (filled) should be flat, and meet the other two views.',
  },
} as const;

interface BlockPoint {
  readonly n: number;
  readonly value: number;
  readonly scatter: number;
}

function blockPoints(counts: readonly number[], values: readonly (number | null)[], scatter: readonly (number | null)[]): readonly BlockPoint[] {
  return counts.flatMap((n, k) => {
    const value = values[k] ?? null;
    return value === null ? [] : [{ n, value, scatter: scatter[k] ?? 0 }];
  });
}

function estimateOf(results: Results, { quantity, parameter, shown }: Case) {
  return quantity === 'errors' ? shown.result.errors[parameter]!.marginalised : results.improvements[shown.name]![parameter]!.marginalised;
}

/** Everything that a panel shows, and the range that holds it. */
function contentsOf(results: Results, one: Case) {
  const found = results.convergence[one.shown.name]!;
  const values = found[one.quantity]![one.parameter]!.marginalised;
  const { split, limit: view } = estimateOf(results, one);
  const raw = blockPoints(found.realisations, values.raw, values.rawScatter);
  const corrected = blockPoints(found.realisations, values.corrected, values.correctedScatter);
  const [least, most] = [Math.min(...found.realisations), Math.max(...found.realisations)];
  const curve = values.fit === null ? [] : fittedCurve(values.fit, least, most);
  const limit = view === null ? [] : [view];
  const splits = split === null ? [] : [split];
  // A bar longer than the value itself must not set the scale.
  const points = [...raw, ...corrected].flatMap(({ value, scatter }) => [value + Math.min(scatter, value), Math.max(value - scatter, value / 2)]);
  const all = [...points, ...curve.map(({ value }) => value), ...limit, ...splits];
  const isTold = corrected.some(({ n }) => n === most);
  const [low, high] = all.length === 0 ? [0.5, 2] : [Math.min(...all) / 1.06, Math.max(...all) * 1.06];
  // Room on top for the words that stand in for the corrected value.
  const domain: [number, number] = [low, isTold ? high : high * (high / low) ** 0.35];
  return { realisations: found.realisations, raw, corrected, least, most, curve, limit, splits, isTold, domain };
}

function panel(results: Results, drawing: Drawing, one: Case, { width, height, isLowest }: Place): Element {
  const { document, plot } = drawing;
  const { realisations, raw, corrected, least, most, curve, limit, splits, isTold, domain } = contentsOf(results, one);
  const { colour } = lookOf(one.shown.look);
  const low = ({ value, scatter }: BlockPoint): number => Math.max(value - scatter, domain[0]);
  const high = ({ value, scatter }: BlockPoint): number => Math.min(value + scatter, domain[1]);
  const beside = ({ n }: BlockPoint): number => n * 1.1;
  return plot.plot({
    document,
    width,
    height,
    marginLeft: 46,
    marginRight: 10,
    marginTop: 10,
    marginBottom: isLowest ? 46 : 20,
    x: { type: 'log', domain: [least / 1.25, most * 1.75] },
    y: { type: 'log', domain },
    marks: [
      horizontalAxis(drawing, { ticks: realisations, label: isLowest ? 'derivative realisations' : null, format: (n) => String(Math.round(n)) }),
      verticalAxis(drawing, { ticks: logTicks(domain, 4), label: null }),
      plot.line(curve, { x: 'n', y: 'value', stroke: quiet.light, strokeDasharray: '4 3', strokeWidth: 1.2 }),
      plot.ruleX(raw, { x: 'n', y1: low, y2: high, stroke: quiet.light }),
      plot.ruleX(corrected, { x: beside, y1: low, y2: high, stroke: colour, strokeWidth: 1.4 }),
      plot.dot(raw, { x: 'n', y: 'value', stroke: quiet.light, r: 3.4, strokeWidth: 1.4 }),
      plot.dot(corrected, { x: beside, y: 'value', fill: colour, stroke: 'none', r: 3.8 }),
      plot.ruleY(limit, { y: (value: number) => value, x1: most * 1.45, x2: most * 1.75, stroke: quiet.light, strokeWidth: 2, strokeDasharray: '4 2' }),
      plot.dot(splits, { x: () => most * 1.33, y: (value: number) => value, symbol: 'diamond', r: 3.6, stroke: colour, strokeWidth: 1.4 }),
      ...(isTold ? [] : [plot.text(['corrected: cannot tell'], { frameAnchor: 'top-left', dx: 6, dy: 4, fill: warning.light, fontStyle: 'italic', fontSize: 11 })]),
    ],
  });
}

/** The fitted curve 1/sigma^2 = (1 + b/N)/limit^2 as a line. */
function fittedCurve({ limit, b }: { readonly limit: number; readonly b: number }, least: number, most: number) {
  return Array.from({ length: 25 }, (_, k) => {
    const n = least * (most / least) ** (k / 24);
    return { n, value: limit / Math.sqrt(1 + b / n) };
  }).filter(({ value }) => Number.isFinite(value));
}

function sentences(results: Results, cases: readonly Case[]): string {
  return cases
    .map((one) => {
      const { parameter, shown } = one;
      const { label } = shown;
      const { raw, corrected, limit, split, standardError, status } = estimateOf(results, one);
      const say = (value: number | null): string => (value === null ? 'none' : roundTo(value, standardError));
      return `${parameterName(results, parameter)}, ${label}: raw ${say(raw)}, corrected ${say(corrected)}, limit ${say(limit)}, split ${say(split)}; ${status}.`;
    })
    .join(' ');
}
