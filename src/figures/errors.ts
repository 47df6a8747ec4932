import type { Estimate, Results } from '../results/schema.js';
import { roundTo } from '../results/rounding.js';
import { horizontalAxis } from './axes.js';
import type { Shown } from './combinations.js';
import { shownCombinations } from './combinations.js';
import type { Drawing } from './drawing.js';
import { compose, finish } from './drawing.js';
import type { Figure } from './figure.js';
import { parameterLabel, parameterName, shortened } from './labels.js';
import { logTicks } from './log-ticks.js';
import { lookOf, quiet } from './palette.js';
import { gridFor, gridHeight, placed } from './panels.js';

/** Marginalised (filled) and fixed (hollow) errors of every parameter, with references and priors. */
export function errors(results: Results, drawing: Drawing): readonly Figure[] {
  const shown = shownCombinations(results);
  const grid = gridFor(results.parameters.length, 78 + 22 * shown.length, 34, 2);
  const svgs = results.parameters.map((parameter) => panel(drawing, results, parameter, shown, grid.width, grid.height));
  const notes = [{ x: 12, y: 20, text: 'Corrected errors: filled marginalised with 95 % interval, hollow fixed. Dashed: references and priors.', colour: quiet.light }];
  const svg = compose(drawing, { width: 820, height: gridHeight(grid, svgs.length), panels: placed(grid, svgs), notes });
  return [
    finish(svg, {
      name: 'errors',
      title: 'Forecast errors',
      alternative: sentences(results, shown),
      caption:
        'Corrected forecast errors: filled marks marginalised with their 95 % interval, hollow marks fixed (all other parameters known). A wide distance between the two says that a degeneracy, not the noise of the data, sets the error. Dashed lines are references and priors.',
    }),
  ];
}

function sentences(results: Results, shown: readonly Shown[]): string {
  return results.parameters
    .map(({ name }) => {
      const values = shown.map(({ label, result }) => {
        const { corrected, standardError } = result.errors[name]!.marginalised;
        return `${label} ${corrected === null ? 'cannot tell' : roundTo(corrected, standardError)}`;
      });
      return `Marginalised error of ${parameterName(results, name)}: ${values.join(', ')}.`;
    })
    .join(' ');
}

/** A prior and a reference; where the two agree they share a line. */
function referenceLines({ prior, reference }: Results['parameters'][number]) {
  const named = reference === null ? [] : [{ at: reference.error, label: shortened(reference.label, 22) }];
  if (prior === null) return named;
  const twin = named.find(({ at }) => at === prior);
  return twin === undefined ? [{ at: prior, label: 'prior' }, ...named] : [{ at: prior, label: `prior; ${twin.label}` }];
}

function panel(
  drawing: Drawing,
  results: Results,
  parameter: Results['parameters'][number],
  shown: readonly Shown[],
  width: number,
  height: number,
): Element {
  const { document, plot } = drawing;
  const rows = shown.map((one, place) => ({ ...one, place, marginalised: one.result.errors[parameter.name]!.marginalised, fixed: one.result.errors[parameter.name]!.fixed }));
  type Row = (typeof rows)[number];
  const has = (pick: (row: Row) => Estimate): readonly Row[] => rows.filter((row) => pick(row).corrected !== null);
  const lines = referenceLines(parameter);
  const unit = parameter.unit === '' ? '' : ` [${parameter.unit}]`;
  const values = [...rows.flatMap(({ marginalised, fixed }) => [marginalised.corrected, fixed.corrected, ...(marginalised.interval95 ?? [])]), ...lines.map(({ at }) => at)].filter((value) => value !== null);
  const domain: [number, number] = values.length === 0 ? [0.1, 1] : [Math.min(...values) / 1.15, Math.max(...values) * 1.15];
  const colour = (row: Row): string => lookOf(row.look).colour;
  return plot.plot({
    document,
    width,
    height,
    marginLeft: 176,
    marginRight: 18,
    marginTop: 26,
    marginBottom: 44,
    x: { type: 'log', domain },
    y: { type: 'linear', domain: [-0.5, rows.length - 0.5], reverse: true, axis: null },
    marks: [
      horizontalAxis(drawing, { ticks: logTicks(domain, 5), label: `error of ${parameterLabel(results, parameter.name)}${unit}` }),
      plot.ruleX(lines, { x: 'at', stroke: quiet.light, strokeDasharray: '4 3' }),
      plot.text(lines, { x: 'at', text: 'label', frameAnchor: 'top', textAnchor: 'end', dx: 4, dy: -10, fill: quiet.light, fontSize: 11 }),
      plot.ruleY(has(({ marginalised }) => marginalised), { y: 'place', x1: (row: Row) => row.marginalised.interval95![0], x2: (row: Row) => row.marginalised.interval95![1], stroke: colour, strokeWidth: 1.6 }),
      plot.dot(has(({ fixed }) => fixed), { x: (row: Row) => row.fixed.corrected, y: 'place', r: 4, stroke: colour, symbol: (row: Row) => lookOf(row.look).symbol }),
      plot.dot(has(({ marginalised }) => marginalised), { x: (row: Row) => row.marginalised.corrected, y: 'place', r: 4.5, fill: colour, stroke: 'none', symbol: (row: Row) => lookOf(row.look).symbol }),
      plot.text(rows, { frameAnchor: 'left', x: domain[0], y: 'place', text: (row: Row) => shortened(row.label, 26), textAnchor: 'end', dx: -8, fill: colour }),
      plot.text(rows.filter(({ marginalised }) => marginalised.corrected === null), { frameAnchor: 'right', y: 'place', text: () => 'marginalised: cannot tell', textAnchor: 'end', fill: quiet.light, fontSize: 11 }),
    ],
  });
}
