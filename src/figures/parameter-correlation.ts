import type { Results } from '../results/schema.js';
import type { Shown } from './combinations.js';
import { shownCombinations } from './combinations.js';
import type { Drawing } from './drawing.js';
import { compose, finish } from './drawing.js';
import type { Figure } from './figure.js';
import { parameterLabel, parameterName, shortLabels } from './labels.js';
import { lookOf, negative, positive } from './palette.js';
import { gridFor, gridHeight, pageWidth, placed } from './panels.js';
import { textWidth, wrapped } from './text-width.js';

interface Cell {
  readonly row: number;
  readonly column: number;
  readonly value: number;
}

const top = 44;
const right = 12;

/** Sizes of a matrix with its labels; tilted ones need more room below. */
interface Shape {
  readonly left: number;
  readonly bottom: number;
  readonly width: number;
  readonly tilted: boolean;
}

/** Beyond this many parameters numbers do not fit into the cells. */
const mostNumbers = 20;

/** Correlation matrix of the parameters in each combination, corrected. */
export function parameterCorrelation(results: Results, drawing: Drawing): readonly Figure[] {
  const all = shownCombinations(results);
  const shown = all.filter(({ result }) => result.correlation.corrected !== null);
  const count = results.parameters.length;
  if (shown.length === 0 || count < 2) return [];
  const across = count > 12 ? 1 : count > 6 ? 2 : 3;
  const width = Math.floor(pageWidth / across);
  const widest = Math.max(...results.parameters.map(({ name }) => textWidth(parameterLabel(results, name))));
  const left = Math.min(90, widest) + 12;
  const side = Math.min(width, 720) - left - right;
  const tilted = left - 12 > side / count;
  const shape: Shape = { left, bottom: tilted ? (left - 12) * 0.6 + 24 : 26, width: Math.min(width, 720), tilted };
  const grid = { ...gridFor(shown.length, top + side + shape.bottom + 10, 0, across), width };
  const svgs = shown.map((one) => panel(results, drawing, one, shape));
  const svg = compose(drawing, { width: pageWidth, height: gridHeight(grid, svgs.length), panels: placed(grid, svgs) });
  const missing = all.filter(({ result }) => result.correlation.corrected === null);
  return [
    finish(svg, {
      name: 'parameter-correlation',
      title: 'Correlations of the parameters',
      alternative: describe(results, shown),
      caption:
        'Correlation of the parameters, corrected and with priors, in hundredths: blue positive, brown negative, stronger is denser. A pair near ±100 is a degeneracy: its marginalised errors stand and fall together, and with any knowledge of either.' +
        (missing.length > 0 ? ` Cannot be told: ${missing.map(({ label }) => label).join(', ')}.` : ''),
    }),
  ];
}

function cellsOf({ result }: Shown): readonly Cell[] {
  return result.correlation.corrected!.flatMap((values, row) =>
    values.flatMap((value, column) => (column <= row ? [{ row, column, value }] : [])),
  );
}

/** Strength as opacity, sign as hue: it stays readable in grey, where the number tells the sign. */
export function tone(value: number): string {
  return value < 0 ? negative.light : positive.light;
}

function panel(results: Results, { document, plot }: Drawing, one: Shown, { left, bottom, width, tilted }: Shape): Element {
  const cells = cellsOf(one);
  const labels = shortLabels(results, left - 12, 12, false);
  const names = one.result.parameters.map((name) => labels.get(name)!);
  const size = names.length;
  const domain = Array.from({ length: size }, (_, k) => k);
  const label = (k: number): string => names[k] ?? '';
  const text = (cell: Cell): string => (cell.row === cell.column ? '1' : String(Math.round(100 * cell.value)).replace('-', '\u2212'));
  const title = wrapped(one.label, width - 40, 2, 12, true);
  return plot.plot({
    document,
    width,
    height: top + (width - left - right) + bottom,
    marginLeft: left,
    marginBottom: bottom,
    marginTop: top,
    marginRight: right,
    x: { type: 'band', domain, tickFormat: label, tickSize: 0, label: null, padding: 0.04, tickRotate: tilted ? -40 : 0 },
    y: { type: 'band', domain, tickFormat: label, tickSize: 0, label: null, padding: 0.04 },
    marks: [
      ...title.map((line, k) => plot.text([line], { frameAnchor: 'top', dx: -left / 2, dy: -16 - 15 * (title.length - 1 - k), fontWeight: 'bold', fill: lookOf(one.look).colour })),
      plot.cell(cells, { x: 'column', y: 'row', fill: (cell: Cell) => tone(cell.value), fillOpacity: (cell: Cell) => 0.06 + 0.5 * Math.abs(cell.value) }),
      ...(size <= mostNumbers ? [plot.text(cells, { x: 'column', y: 'row', text, fontSize: 11 })] : []),
    ],
    opacity: { type: 'identity' },
  });
}

function describe(results: Results, shown: readonly Shown[]): string {
  return shown
    .map((one) => {
      const pairs = cellsOf(one).filter(({ row, column }) => row !== column);
      const strongest = [...pairs].sort((a, b) => Math.abs(b.value) - Math.abs(a.value))[0];
      if (strongest === undefined) return '';
      const [a, b] = [strongest.column, strongest.row].map((k) => parameterName(results, one.result.parameters[k]!));
      return `${one.label}: the strongest correlation is ${strongest.value.toFixed(2)}, of ${a!} with ${b!}.`;
    })
    .join(' ');
}
