import type { Results } from '../results/schema.js';
import { significant } from '../results/rounding.js';
import { horizontalAxis } from './axes.js';
import type { Shown } from './combinations.js';
import { shownCombinations } from './combinations.js';
import type { Drawing } from './drawing.js';
import { compose, finish } from './drawing.js';
import type { Figure } from './figure.js';
import { parameterLabel, parameterName, parameterNames, shortened } from './labels.js';
import { lookOf, quiet } from './palette.js';
import { pageWidth } from './panels.js';

/** One bar: the two parts of a marginalised gain, as natural logarithms. */
export interface AttributionRow {
  readonly parameter: string;
  readonly one: Shown;
  readonly place: number;
  readonly response: number;
  readonly degeneracy: number;
}

const rowHeight = 24;
const gap = 14;
const left = 300;
const top = 56;

/** Sharper response and broken degeneracies of every gain on a target parameter, as stacked bars on a logarithmic axis. */
export function attribution(results: Results, drawing: Drawing): readonly Figure[] {
  const rows = attributionRows(results);
  if (rows.length === 0) return [];
  const height = top + rows[rows.length - 1]!.place + 60;
  const heads = rows.filter(({ parameter }, k) => rows[k - 1]?.parameter !== parameter);
  const notes = [
    { x: left, y: 20, text: '■ sharper response (fixed gain)' },
    { x: left + 220, y: 20, text: '□ degeneracies that break', colour: quiet.light },
    { x: left, y: 38, text: '| marginalised gain: both together', colour: quiet.light },
    ...heads.map((row) => ({ x: 12, y: top + row.place + 4, text: shortened(parameterLabel(results, row.parameter), 24), weight: 'bold' as const, size: 14 })),
    ...rows.map((row) => ({ x: left - 12, y: top + row.place + 4, text: shortened(row.one.label, 30), anchor: 'end' as const, colour: lookOf(row.one.look).colour })),
  ];
  const svg = compose(drawing, { width: pageWidth, height, panels: [{ svg: bars(drawing, rows, height), x: 0, y: 0 }], notes });
  return [
    finish(svg, {
      name: 'attribution',
      title: 'Where each gain comes from',
      alternative: rows.map((row) => sentence(results, row)).join(' '),
      caption:
        'Each marginalised gain (corrected) as a product of two: the fixed gain, a sharper response (filled), and the degeneracies that break (open). A bar to the left of 1 takes away. A gain that is all open depends on what else is marginalised over, and on the priors.',
    }),
  ];
}

/** Rows from top to bottom; gains whose parts do not exist are left out, as the table says. */
export function attributionRows(results: Results): readonly AttributionRow[] {
  let place = 0;
  return parameterNames(results, 'target').flatMap((parameter, k) => {
    if (k > 0) place += gap;
    return shownCombinations(results).flatMap((one) => {
      const shares = results.attribution?.[one.name]?.parameters[parameter]?.shares ?? null;
      if (shares === null) return [];
      place += rowHeight;
      return [{ parameter, one, place, response: shares.response, degeneracy: shares.degeneracy }];
    });
  });
}

function bars({ document, plot, ...rest }: Drawing, rows: readonly AttributionRow[], height: number): Element {
  const ends = rows.flatMap(({ response, degeneracy }) => [0, response, response + degeneracy]);
  const domain: [number, number] = [Math.min(...ends) - 0.05, Math.max(...ends, 0.1) + 0.05];
  const factors = [0.5, 0.6, 0.7, 0.8, 0.9, 1, 1.1, 1.2, 1.3, 1.4, 1.5, 1.7, 2, 2.5, 3, 4, 5, 7, 10].filter((factor) => Math.log(factor) >= domain[0] && Math.log(factor) <= domain[1]);
  const colour = (row: AttributionRow): string => lookOf(row.one.look).colour;
  return plot.plot({
    document,
    width: pageWidth,
    height,
    marginLeft: left,
    marginRight: 24,
    marginTop: top,
    marginBottom: 46,
    x: { domain },
    y: { domain: [0, rows[rows.length - 1]!.place + rowHeight / 2], range: [top, top + rows[rows.length - 1]!.place + rowHeight / 2], axis: null },
    marks: [
      horizontalAxis({ document, plot, ...rest }, { ticks: factors.map(Math.log), label: 'gain (factor)', format: (log) => String(Number(Math.exp(log).toPrecision(2))) }),
      plot.ruleX([0], { stroke: quiet.light, strokeDasharray: '4 3' }),
      plot.rect(rows, { x1: () => 0, x2: 'response', y1: (row: AttributionRow) => row.place - 8, y2: (row: AttributionRow) => row.place + 1, fill: colour }),
      plot.rect(rows, { x1: 'response', x2: (row: AttributionRow) => row.response + row.degeneracy, y1: (row: AttributionRow) => row.place, y2: (row: AttributionRow) => row.place + 8, stroke: colour, fill: colour, fillOpacity: 0.12 }),
      plot.ruleX(rows, { x: (row: AttributionRow) => row.response + row.degeneracy, y1: (row: AttributionRow) => row.place - 10, y2: (row: AttributionRow) => row.place + 10, stroke: 'currentColor', strokeWidth: 1.6 }),
    ],
  });
}

function sentence(results: Results, { parameter, one, response, degeneracy }: AttributionRow): string {
  const factor = (log: number): string => significant(Math.exp(log), 3);
  return `${parameterName(results, parameter)}, ${one.label}: gain ${factor(response + degeneracy)}, of which ${factor(response)} from a sharper response and ${factor(degeneracy)} from broken degeneracies.`;
}
