import type { Results } from '../results/schema.js';
import { roundTo } from '../results/rounding.js';
import { horizontalAxis, verticalAxis } from './axes.js';
import { shownCombinations } from './combinations.js';
import type { Drawing } from './drawing.js';
import { compose, finish } from './drawing.js';
import type { Figure } from './figure.js';
import { parameterLabel, parameterName, parameterNames, shortened } from './labels.js';
import { logTicks } from './log-ticks.js';
import { lookOf, quiet } from './palette.js';
import { gridFor, gridHeight, pageWidth, placed } from './panels.js';

/** Most panels: beyond these the table serves better. */
const mostPanels = 24;

interface Case {
  readonly parameter: string;
  readonly combination: string;
  readonly label: string;
  readonly look: number;
}

/** Raw and corrected errors against the number of derivative realisations, with the fit, its limit and the split estimate. */
export function convergence(results: Results, drawing: Drawing): readonly Figure[] {
  const all: Case[] = parameterNames(results, 'target').flatMap((parameter) =>
    shownCombinations(results)
      .filter(({ name }) => results.convergence[name] !== undefined)
      .map(({ name, label, look }) => ({ parameter, combination: name, label, look })),
  );
  if (all.length === 0) return [];
  const cases = all.slice(0, mostPanels);
  const across = Math.min(4, Object.keys(results.convergence).length);
  const grid = gridFor(cases.length, 190, 48, across);
  const svgs = cases.map((one) => panel(results, drawing, one, grid.width, grid.height));
  const left = all.length - cases.length;
  const notes = [
    { x: 12, y: 18, text: '○ raw, ● corrected: mean over disjoint blocks, bars one standard deviation between blocks', colour: quiet.light },
    { x: 12, y: 36, text: 'dashed: fit to the raw errors, with its limit at the right edge (–);  ◇ split estimate', colour: quiet.light },
  ];
  const svg = compose(drawing, { width: pageWidth, height: gridHeight(grid, cases.length), panels: placed(grid, svgs), notes });
  return [
    finish(svg, {
      name: 'convergence',
      title: 'Errors against the number of derivative realisations',
      alternative: sentences(results, cases),
      caption: `Marginalised errors from disjoint blocks of derivative realisations. Raw errors (hollow) that still rise to the right are flattered by noise; corrected errors (filled) should be flat, and meet the limit of the fit and the split estimate.${left > 0 ? ` ${String(left)} further panels are in the table only.` : ''}`,
    }),
  ];
}

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

function panel(results: Results, drawing: Drawing, { parameter, combination, label, look }: Case, width: number, height: number): Element {
  const { document, plot } = drawing;
  const found = results.convergence[combination]!;
  const values = found.errors[parameter]!.marginalised;
  const { split } = results.combinations[combination]!.errors[parameter]!.marginalised;
  const raw = blockPoints(found.realisations, values.raw, values.rawScatter);
  const corrected = blockPoints(found.realisations, values.corrected, values.correctedScatter);
  const most = Math.max(...found.realisations);
  const least = Math.min(...found.realisations);
  const curve = values.fit === null ? [] : fitted(values.fit, least, most);
  const shown = [...[...raw, ...corrected].flatMap(({ value, scatter }) => [value, value + scatter, Math.max(value - scatter, value / 4)]), ...curve.map(({ value }) => value), ...(values.fit === null ? [] : [values.fit.limit]), ...(split === null ? [] : [split])];
  const domain: [number, number] = shown.length === 0 ? [0.5, 2] : [Math.min(...shown) / 1.08, Math.max(...shown) * 1.08];
  const { colour } = lookOf(look);
  return plot.plot({
    document,
    width,
    height,
    marginLeft: 52,
    marginRight: 22,
    marginTop: 34,
    marginBottom: 38,
    x: { type: 'log', domain: [least / 1.25, most * 1.6] },
    y: { type: 'log', domain },
    marks: [
      horizontalAxis(drawing, { ticks: found.realisations, label: 'derivative realisations', format: (n) => String(Math.round(n)) }),
      verticalAxis(drawing, { ticks: logTicks(domain, 5), label: null }),
      plot.text([`${parameterLabel(results, parameter)}: ${shortened(label, Math.floor((width - 60) / 7.5) - 4)}`], { frameAnchor: 'top', dy: -18, fill: colour, fontWeight: 'bold' }),
      plot.line(curve, { x: 'n', y: 'value', stroke: quiet.light, strokeDasharray: '4 3' }),
      plot.ruleX(raw, { x: 'n', y1: (p: BlockPoint) => Math.max(p.value - p.scatter, domain[0]), y2: (p: BlockPoint) => p.value + p.scatter, stroke: quiet.light }),
      plot.ruleX(corrected, { x: (p: BlockPoint) => p.n * 1.09, y1: (p: BlockPoint) => Math.max(p.value - p.scatter, domain[0]), y2: (p: BlockPoint) => Math.min(p.value + p.scatter, domain[1]), stroke: colour }),
      plot.dot(raw, { x: 'n', y: 'value', stroke: quiet.light, r: 3.6, fill: 'none' }),
      plot.dot(corrected, { x: (p: BlockPoint) => p.n * 1.09, y: 'value', fill: colour, stroke: 'none', r: 3.6 }),
      plot.ruleY(values.fit === null ? [] : [values.fit.limit], { y: (value: number) => value, x1: most * 1.35, x2: most * 1.6, stroke: quiet.light, strokeWidth: 2 }),
      plot.dot(split === null ? [] : [split], { x: () => most * 1.25, y: (value: number) => value, symbol: 'diamond', r: 3.6, stroke: colour }),
    ],
  });
}

/** The fitted curve 1/sigma^2 = (1 + b/N)/limit^2 as a line. */
function fitted({ limit, b }: { readonly limit: number; readonly b: number }, least: number, most: number) {
  return Array.from({ length: 25 }, (_, k) => {
    const n = least * (most / least) ** (k / 24);
    return { n, value: limit / Math.sqrt(1 + b / n) };
  }).filter(({ value }) => Number.isFinite(value));
}

function sentences(results: Results, cases: readonly Case[]): string {
  return cases
    .map(({ parameter, combination, label }) => {
      const { raw, corrected, limit, split, standardError, status } = results.combinations[combination]!.errors[parameter]!.marginalised;
      const say = (value: number | null): string => (value === null ? 'none' : roundTo(value, standardError));
      return `${parameterName(results, parameter)}, ${label}: raw ${say(raw)}, corrected ${say(corrected)}, limit ${say(limit)}, split ${say(split)}; ${status}.`;
    })
    .join(' ');
}
