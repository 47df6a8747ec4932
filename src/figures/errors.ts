import { roundTo } from '../results/rounding.js';
import type { Estimate, Results } from '../results/schema.js';
import { horizontalAxis } from './axes.js';
import type { Shown } from './combinations.js';
import { shownCombinations } from './combinations.js';
import type { Drawing } from './drawing.js';
import { compose, finish } from './drawing.js';
import type { Figure } from './figure.js';
import { drawKey, quietItem } from './key.js';
import { parameterName, shortLabels } from './labels.js';
import { logTicks } from './log-ticks.js';
import { lookOf, quiet, warning } from './palette.js';
import { gridFor, gridHeight, pageWidth, placed } from './panels.js';
import { roomBeside } from './room.js';
import { fitted, fittedApart, textWidth } from './text-width.js';

type Parameter = Results['parameters'][number];

/** More panels than this and nuisance parameters are left to the table. */
const mostPanels = 12;

/** Marginalised (filled) and fixed (hollow) errors of every parameter, with references and priors. */
export function errors(results: Results, drawing: Drawing): readonly Figure[] {
  const shown = shownCombinations(results);
  const targets = results.parameters.filter(({ role }) => role === 'target');
  const drawn = results.parameters.length <= mostPanels || targets.length === 0 ? results.parameters : targets;
  const key = drawKey(drawing, [
    quietItem('marginalised, with 95 %', { symbol: { name: 'circle', filled: true }, line: { width: 1.6 } }),
    quietItem('fixed: all other parameters known', { symbol: { name: 'circle', filled: false } }),
    quietItem('reference or prior', { line: { width: 1.2, dash: '4 3' } }),
  ]);
  const grid = gridFor(drawn.length, 72 + 22 * shown.length, key.height + 16, 2);
  const titles = shortLabels(results, marginLeft - 10, 13, true);
  const svgs = drawn.map((parameter) => panel(drawing, titles.get(parameter.name)!, parameter, shown, grid.width, grid.height));
  const panels = [{ svg: key.svg, x: 0, y: 6 }, ...placed(grid, svgs)];
  const svg = compose(drawing, { width: pageWidth, height: gridHeight(grid, svgs.length), panels });
  const left = results.parameters.length - drawn.length;
  return [
    finish(svg, {
      name: 'errors',
      title: 'Forecast errors',
      alternative: sentences(results, drawn, shown),
      caption:
        'Corrected forecast errors: filled marks marginalised with their 95 % interval, hollow marks fixed (all other parameters known). A wide distance between the two says that a degeneracy, not the noise of the data, sets the error. Dashed lines are references and priors.' +
        (left > 0 ? ` ${String(left)} nuisance parameters are in the table only.` : ''),
    }),
  ];
}

function sentences(results: Results, drawn: readonly Parameter[], shown: readonly Shown[]): string {
  return drawn
    .map(({ name }) => {
      const values = shown.map(({ label, result }) => {
        const { corrected, standardError } = result.errors[name]!.marginalised;
        return `${label} ${corrected === null ? 'cannot tell' : roundTo(corrected, standardError)}`;
      });
      return `Marginalised error of ${parameterName(results, name)}: ${values.join(', ')}.`;
    })
    .join(' ');
}

interface ReferenceLine {
  readonly at: number;
  readonly label: string;
}

/** A prior and a reference; where the two agree they share a line. */
function referenceLines({ prior, reference }: Parameter): readonly ReferenceLine[] {
  const named = reference === null ? [] : [{ at: reference.error, label: fitted(reference.label, 110, 11) }];
  if (prior === null) return named;
  const twin = named.find(({ at }) => at === prior);
  return twin === undefined ? [{ at: prior, label: 'prior' }, ...named] : [{ at: prior, label: `prior; ${twin.label}` }];
}

interface Row extends Shown {
  readonly short: string;
  readonly place: number;
  readonly marginalised: Estimate;
  readonly fixed: Estimate;
}

/** Pixels of "cannot tell". */
const wordsWidth = 74;
const marginLeft = 162;
const marginRight = 26;

function panel(drawing: Drawing, title: string, parameter: Parameter, shown: readonly Shown[], width: number, height: number): Element {
  const { document, plot } = drawing;
  const short = fittedApart(shown.map(({ label }) => label), marginLeft - 22);
  const rows = shown.map((one, place): Row => ({ ...one, short: short[place]!, place, ...one.result.errors[parameter.name]! }));
  const lines = referenceLines(parameter);
  const values = [...rows.flatMap(({ marginalised, fixed }) => [marginalised.corrected, fixed.corrected, ...(marginalised.interval95 ?? [])]), ...lines.map(({ at }) => at)].filter((value) => value !== null);
  const domain: [number, number] = values.length === 0 ? [0.1, 1] : [Math.min(...values) / 1.15, Math.max(...values) * 1.15];
  const pixels = width - marginLeft - marginRight;
  return plot.plot({
    document,
    width,
    height,
    marginLeft,
    marginRight,
    marginTop: 38,
    marginBottom: 24,
    x: { type: 'log', domain },
    y: { type: 'linear', domain: [-0.5, rows.length - 0.5], reverse: true, axis: null },
    marks: [
      horizontalAxis(drawing, { ticks: logTicks(domain, 5), label: null }),
      plot.text([`error of ${title}`], { frameAnchor: 'top-left', dx: 12 - marginLeft, dy: -24, textAnchor: 'start', fontWeight: 'bold', fontSize: 13 }),
      plot.ruleX(lines, { x: 'at', stroke: quiet.light, strokeWidth: 1.2, strokeDasharray: '4 3' }),
      ...lineLabels(drawing, lines, domain, pixels),
      ...errorMarks(drawing, rows),
      plot.text(rows, { frameAnchor: 'left', x: domain[0], y: 'place', text: 'short', textAnchor: 'end', dx: -10, fill: (row: Row) => lookOf(row.look).colour }),
      ...rows.filter(({ marginalised }) => marginalised.corrected === null).map((row) => {
        const marks = [row.fixed.corrected].filter((value) => value !== null);
        const { at, anchor, dx } = roomBeside(marks, lines.map(({ at: line }) => line), domain, pixels, wordsWidth);
        return plot.text([row], { x: at, y: 'place', dx, textAnchor: anchor, text: () => 'cannot tell', fill: warning.light, fontStyle: 'italic' });
      }),
    ],
  });
}

/** Names over the lines, one over the other where they would touch. */
function lineLabels({ plot }: Drawing, lines: readonly ReferenceLine[], domain: readonly [number, number], pixels: number) {
  const place = ({ at }: ReferenceLine): number => (Math.log(at / domain[0]) / Math.log(domain[1] / domain[0])) * pixels;
  const sorted = [...lines].sort((a, b) => a.at - b.at);
  let end = -Infinity;
  return sorted.map((line) => {
    const half = textWidth(line.label, 11) / 2;
    const middle = Math.min(place(line), pixels + marginRight - half);
    const isFree = middle - half > end + 4;
    end = Math.max(end, middle + half);
    return plot.text([line], { x: 'at', text: 'label', frameAnchor: 'top', dx: middle - place(line), dy: isFree ? -10 : -24, fill: quiet.light, fontSize: 11 });
  });
}

function errorMarks({ plot }: Drawing, rows: readonly Row[]) {
  const has = (pick: (row: Row) => Estimate): readonly Row[] => rows.filter((row) => pick(row).corrected !== null);
  const colour = (row: Row): string => lookOf(row.look).colour;
  const symbol = (row: Row): ReturnType<typeof lookOf>['symbol'] => lookOf(row.look).symbol;
  const known = has(({ marginalised }) => marginalised);
  return [
    plot.ruleY(known, { y: 'place', x1: (row: Row) => row.marginalised.interval95![0], x2: (row: Row) => row.marginalised.interval95![1], stroke: colour, strokeWidth: 1.6 }),
    plot.dot(has(({ fixed }) => fixed), { x: (row: Row) => row.fixed.corrected, y: 'place', r: 4, stroke: colour, strokeWidth: 1.5, symbol }),
    plot.dot(known, { x: (row: Row) => row.marginalised.corrected, y: 'place', r: 4.8, fill: colour, stroke: 'none', symbol }),
  ];
}
