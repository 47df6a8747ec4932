import type { Results } from '../results/schema.js';
import { significant } from '../results/rounding.js';
import { horizontalAxis, verticalAxis } from './axes.js';
import { shownCombinations } from './combinations.js';
import type { Drawing } from './drawing.js';
import { compose, finish } from './drawing.js';
import type { Figure } from './figure.js';
import { combinationItems, drawKey } from './key.js';
import { parameterLabel, parameterName, parameterNames } from './labels.js';
import { logTicks } from './log-ticks.js';
import { lookOf } from './palette.js';
import { gridFor, gridHeight, pageWidth, placed } from './panels.js';

interface Point {
  readonly n: number;
  readonly value: number;
}

/** Raw errors against the number of fiducial realisations, each with its own precision factor. */
export function covarianceConvergence(results: Results, drawing: Drawing): readonly Figure[] {
  const curves = results.covarianceConvergence ?? {};
  const shown = shownCombinations(results).filter(({ name }) => (curves[name]?.realisations.length ?? 0) > 1);
  const parameters = parameterNames(results, 'target');
  if (shown.length === 0 || parameters.length === 0) return [];
  const key = drawKey(drawing, combinationItems(shown, () => true));
  const grid = gridFor(parameters.length, 220, key.height + 16, 3);
  const points = (name: string, parameter: string): readonly Point[] => {
    const { realisations, errors } = curves[name]!;
    return errors[parameter]!.marginalised.flatMap((value, k) => (value === null ? [] : [{ n: realisations[k]!, value }]));
  };
  const svgs = parameters.map((parameter) => panel(results, drawing, parameter, grid.width, grid.height, shown.map((one) => ({ look: one.look, points: points(one.name, parameter) }))));
  const svg = compose(drawing, { width: pageWidth, height: gridHeight(grid, svgs.length), panels: [{ svg: key.svg, x: 0, y: 6 }, ...placed(grid, svgs)] });
  return [
    finish(svg, {
      name: 'covariance-convergence',
      title: 'Errors against the number of fiducial realisations',
      alternative: parameters.map((parameter) => describe(results, parameter, shown.map(({ name, label }) => ({ label, points: points(name, parameter) })))).join(' '),
      caption:
        'Raw marginalised errors with covariances from an eighth, a quarter, half and all of the fiducial realisations, each with its own precision factor. A last step of a few per cent is what the covariance part of the uncertainty allows; a trend says that more are needed.',
    }),
  ];
}

function panel(results: Results, drawing: Drawing, parameter: string, width: number, height: number, lines: readonly { readonly look: number; readonly points: readonly Point[] }[]): Element {
  const { document, plot } = drawing;
  const all = lines.flatMap(({ points }) => points);
  const values = all.map(({ value }) => value);
  const domain: [number, number] = values.length === 0 ? [0.5, 2] : [Math.min(...values) / 1.1, Math.max(...values) * 1.1];
  const counts = [...new Set(all.map(({ n }) => n))].sort((a, b) => a - b);
  return plot.plot({
    document,
    width,
    height,
    marginLeft: 52,
    marginRight: 14,
    marginTop: 28,
    marginBottom: 44,
    x: { type: 'log', domain: counts.length === 0 ? [1, 2] : [counts[0]! / 1.15, counts[counts.length - 1]! * 1.15] },
    y: { type: 'log', domain },
    marks: [
      horizontalAxis(drawing, { ticks: counts.slice(-4), label: 'fiducial realisations', format: String }),
      verticalAxis(drawing, { ticks: logTicks(domain, 6), label: `raw error of ${parameterLabel(results, parameter)}` }),
      ...lines.flatMap(({ look, points }) => {
        const { colour, symbol } = lookOf(look);
        return [
          plot.line(points, { x: 'n', y: 'value', stroke: colour, strokeWidth: 1.6 }),
          plot.dot(points, { x: 'n', y: 'value', fill: colour, stroke: 'none', symbol, r: 3.4 }),
        ];
      }),
    ],
  });
}

function describe(results: Results, parameter: string, lines: readonly { readonly label: string; readonly points: readonly Point[] }[]): string {
  const values = lines.flatMap(({ label, points }) => {
    const [before, last] = points.slice(-2);
    if (before === undefined || last === undefined) return [];
    return [`${label} moves by ${significant(Math.abs(100 * (last.value / before.value - 1)), 2)} % from ${String(before.n)} to ${String(last.n)}`];
  });
  return `${parameterName(results, parameter)}: ${values.join('; ')}.`;
}
