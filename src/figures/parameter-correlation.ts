import type { Results } from '../results/schema.js';
import type { Shown } from './combinations.js';
import { shownCombinations } from './combinations.js';
import type { Drawing } from './drawing.js';
import { compose, finish } from './drawing.js';
import type { Figure } from './figure.js';
import { parameterLabel, parameterName, shortened } from './labels.js';
import { negative, positive, quiet } from './palette.js';
import { gridFor, gridHeight, pageWidth, placed } from './panels.js';

interface Cell {
  readonly row: number;
  readonly column: number;
  readonly value: number;
}

/** Correlation matrix of the parameters in each combination, corrected. */
export function parameterCorrelation(results: Results, drawing: Drawing): readonly Figure[] {
  const shown = shownCombinations(results).filter(({ result }) => result.correlation.corrected !== null);
  if (shown.length === 0 || results.parameters.length < 2) return [];
  const across = results.parameters.length > 12 ? 1 : results.parameters.length > 6 ? 2 : 3;
  const grid = gridFor(shown.length, Math.floor(pageWidth / Math.min(across, Math.max(shown.length, 1))) - 10, 10, across);
  const svgs = shown.map((one) => panel(results, drawing, one, grid.width, grid.height));
  const svg = compose(drawing, { width: pageWidth, height: gridHeight(grid, svgs.length), panels: placed(grid, svgs) });
  return [
    finish(svg, {
      name: 'parameter-correlation',
      title: 'Correlations of the parameters',
      alternative: describe(results, shown),
      caption:
        'Correlation of the parameters, corrected and with priors, in hundredths. A pair near ±100 is a degeneracy: its marginalised errors stand and fall together, and with any knowledge of either.',
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

function panel(results: Results, { document, plot }: Drawing, one: Shown, width: number, height: number): Element {
  const cells = cellsOf(one);
  const names = one.result.parameters.map((name) => shortened(parameterLabel(results, name), 10));
  const size = names.length;
  const domain = Array.from({ length: size }, (_, k) => k);
  const label = (k: number): string => names[k] ?? '';
  const text = (cell: Cell): string => (cell.row === cell.column ? '1' : String(Math.round(100 * cell.value)).replace('-', '\u2212'));
  return plot.plot({
    document,
    width,
    height,
    marginLeft: 58,
    marginBottom: 34,
    marginTop: 28,
    marginRight: 8,
    x: { type: 'band', domain, tickFormat: label, tickSize: 0, label: null, padding: 0.04 },
    y: { type: 'band', domain, tickFormat: label, tickSize: 0, label: null, padding: 0.04 },
    marks: [
      plot.text([shortened(one.label, Math.floor(width / 8))], { frameAnchor: 'top', dy: -18, fontWeight: 'bold' }),
      plot.cell(cells, { x: 'column', y: 'row', fill: (cell: Cell) => tone(cell.value), fillOpacity: (cell: Cell) => 0.06 + 0.5 * Math.abs(cell.value) }),
      ...(size <= 20 ? [plot.text(cells, { x: 'column', y: 'row', text, fontSize: size > 12 ? 9 : 11 })] : []),
      plot.frame({ stroke: quiet.light, strokeOpacity: 0.3 }),
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
