import type { Results } from '../results/schema.js';
import { significant } from '../results/rounding.js';
import { horizontalAxis } from './axes.js';
import type { Shown } from './combinations.js';
import { shownCombinations } from './combinations.js';
import type { Drawing } from './drawing.js';
import { compose, finish } from './drawing.js';
import type { Figure } from './figure.js';
import { drawKey, quietItem } from './key.js';
import { parameterName, parameterNames } from './labels.js';
import { logTicks } from './log-ticks.js';
import { lookOf } from './palette.js';
import { pageWidth } from './panels.js';
import { parameterHead, rowLabels } from './row-labels.js';

/** One bar: the two parts of a marginalised gain, as natural logarithms. */
interface AttributionRow {
  readonly parameter: string;
  readonly one: Shown;
  readonly place: number;
  readonly response: number;
  readonly degeneracy: number;
}

const rowHeight = 24;
const gap = 14;
const marginTop = 14;

/** Sharper response and broken degeneracies of every gain on a target parameter, as stacked bars on a logarithmic axis. */
export function attribution(results: Results, drawing: Drawing): readonly Figure[] {
  const labels = rowLabels(results, Object.values(results.combinations).map(({ label }) => label));
  const rows = attributionRows(results, labels.headHeight);
  if (rows.length === 0) return [];
  const key = drawKey(drawing, [
    quietItem('sharper response (fixed gain)', { line: { width: 9 } }),
    quietItem('degeneracies that break', { band: true }),
    { text: 'marginalised gain: both together', sample: { colour: 'currentColor', symbol: { name: 'tick', filled: false } } },
  ]);
  const top = key.height + 12;
  const end = rows[rows.length - 1]!.place + rowHeight / 2;
  const heads = rows.filter(({ parameter }, k) => rows[k - 1]?.parameter !== parameter);
  const notes = [
    ...heads.map((row) => parameterHead(labels, row.parameter, top + marginTop + row.place - labels.headHeight)),
    ...rows.map((row) => ({ x: labels.left - 12, y: top + marginTop + row.place + 4, text: labels.short.get(row.one.label)!, anchor: 'end' as const, colour: lookOf(row.one.look).colour })),
  ];
  const panels = [
    { svg: key.svg, x: 0, y: 6 },
    { svg: bars(drawing, rows, labels.left, end), x: 0, y: top },
  ];
  const svg = compose(drawing, { width: pageWidth, height: top + marginTop + end + 48, panels, notes });
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
export function attributionRows(results: Results, headHeight: number): readonly AttributionRow[] {
  let place = rowHeight / 2 - gap - rowHeight;
  return parameterNames(results, 'target').flatMap((parameter) => {
    const own = shownCombinations(results).flatMap((one) => {
      const shares = results.attribution?.[one.name]?.parameters[parameter]?.shares ?? null;
      return shares === null ? [] : [{ parameter, one, response: shares.response, degeneracy: shares.degeneracy }];
    });
    if (own.length > 0) place += gap + headHeight;
    return own.map((row) => {
      place += rowHeight;
      return { ...row, place };
    });
  });
}

function bars(drawing: Drawing, rows: readonly AttributionRow[], left: number, height: number): Element {
  const { document, plot } = drawing;
  const right = 24;
  const ends = rows.flatMap(({ response, degeneracy }) => [0, response, response + degeneracy]);
  const domain: [number, number] = [Math.min(...ends) - 0.05, Math.max(...ends, 0.1) + 0.05];
  const ticks = logTicks([Math.exp(domain[0]), Math.exp(domain[1])], Math.floor((pageWidth - left - right) / 46)).map(Math.log);
  const colour = (row: AttributionRow): string => lookOf(row.one.look).colour;
  return plot.plot({
    document,
    width: pageWidth,
    height: marginTop + height + 48,
    marginLeft: left,
    marginRight: right,
    marginTop,
    marginBottom: 48,
    x: { domain },
    y: { domain: [0, height], range: [marginTop, marginTop + height], axis: null },
    marks: [
      horizontalAxis(drawing, { ticks, label: 'gain: error of the baseline / error of the combination', format: (log) => String(Number(Math.exp(log).toPrecision(3))) }),
      plot.rect(rows, { x1: () => 0, x2: 'response', y1: (row: AttributionRow) => row.place - 8, y2: (row: AttributionRow) => row.place + 1, fill: colour }),
      plot.rect(rows, { x1: 'response', x2: (row: AttributionRow) => row.response + row.degeneracy, y1: (row: AttributionRow) => row.place, y2: (row: AttributionRow) => row.place + 8, stroke: colour, fill: colour, fillOpacity: 0.12 }),
      plot.ruleX([0], { stroke: 'currentColor', strokeWidth: 1.2 }),
      plot.ruleX(rows, { x: (row: AttributionRow) => row.response + row.degeneracy, y1: (row: AttributionRow) => row.place - 10, y2: (row: AttributionRow) => row.place + 10, stroke: 'currentColor', strokeWidth: 1.8 }),
    ],
  });
}

function sentence(results: Results, { parameter, one, response, degeneracy }: AttributionRow): string {
  const factor = (log: number): string => significant(Math.exp(log), 3);
  return `${parameterName(results, parameter)}, ${one.label}: gain ${factor(response + degeneracy)}, of which ${factor(response)} from a sharper response and ${factor(degeneracy)} from broken degeneracies.`;
}
