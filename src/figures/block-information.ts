import type { Results } from '../results/schema.js';
import { significant } from '../results/rounding.js';
import type { Shown } from './combinations.js';
import { shownCombinations } from './combinations.js';
import type { Drawing } from './drawing.js';
import { compose, finish } from './drawing.js';
import type { Figure } from './figure.js';
import { blockLabel, parameterLabel, parameterName, parameterNames } from './labels.js';
import { lookOf, quiet } from './palette.js';
import { pageWidth } from './panels.js';
import { fitted, fittedApart } from './text-width.js';

interface Cell {
  readonly row: number;
  readonly column: number;
  readonly ratio: number | null;
}

const left = 250;
const rowHeight = 24;

/** How much each marginalised error grows without a block of the data vector: one panel a combination. */
export function blockInformation(results: Results, drawing: Drawing): readonly Figure[] {
  const all = shownCombinations(results).filter(({ name }) => (results.attribution?.[name]?.blocks.length ?? 0) > 1);
  const shown = all.filter(({ name }) => results.attribution![name]!.blocks.some(({ errorRatio }) => Object.values(errorRatio).some((ratio) => ratio !== null)));
  const missing = all.filter((one) => !shown.includes(one));
  if (shown.length === 0) return [];
  let y = 26;
  const panels = shown.map((one) => {
    const svg = panel(results, drawing, one);
    const place = { svg, x: 0, y };
    y += heightOf(results, one);
    return place;
  });
  const notes = [{ x: 12, y: 18, text: 'error without the block / error with it; 1 says that the block adds nothing', colour: quiet.light }];
  const svg = compose(drawing, { width: pageWidth, height: y, panels, notes });
  return [
    finish(svg, {
      name: 'block-information',
      title: 'Information by block',
      alternative: shown.map((one) => describe(results, one)).join(' '),
      caption:
        'How much each marginalised error (corrected) grows when one block is left out. A number below 1 is noise: leaving data out cannot help, so it shows how well the corrected values are known.' +
        (missing.length > 0 ? ` Cannot be told: ${missing.map(({ label }) => label).join(', ')}.` : ''),
    }),
  ];
}

/** More columns than this leave no room for a number: targets only. */
const mostColumns = 18;

function drawnParameters(results: Results): readonly string[] {
  const targets = parameterNames(results, 'target');
  return results.parameters.length <= mostColumns || targets.length === 0 ? parameterNames(results) : targets;
}

function heightOf(results: Results, { name }: Shown): number {
  return 62 + rowHeight * results.attribution![name]!.blocks.length;
}

function panel(results: Results, { document, plot }: Drawing, one: Shown): Element {
  const { blocks } = results.attribution![one.name]!;
  const parameters = drawnParameters(results);
  const cells: Cell[] = blocks.flatMap(({ errorRatio }, row) => parameters.map((name, column) => ({ row, column, ratio: errorRatio[name] ?? null })));
  const domain = (count: number): number[] => Array.from({ length: count }, (_, k) => k);
  const rowNames = fittedApart(
    blocks.map(({ probe, block }) => {
      const label = results.vectors[probe]?.[block]?.label ?? block;
      return `${results.probes[probe]?.label ?? probe}: ${label === '' ? block : blockLabel(label)}`;
    }),
    left - 24,
  );
  const columnNames = fittedApart(parameters.map((name) => parameterLabel(results, name)), (pageWidth - left - 12) / parameters.length - 4);
  const { colour } = lookOf(one.look);
  return plot.plot({
    document,
    width: pageWidth,
    height: heightOf(results, one),
    marginLeft: left,
    marginRight: 12,
    marginTop: 40,
    marginBottom: 10,
    x: { type: 'band', domain: domain(parameters.length), axis: 'top', tickSize: 0, label: null, tickFormat: (k: number) => columnNames[k] ?? '', padding: 0.06 },
    y: { type: 'band', domain: domain(blocks.length), tickSize: 0, label: null, tickFormat: (k: number) => rowNames[k] ?? '', padding: 0.08 },
    opacity: { type: 'identity' },
    marks: [
      plot.text([fitted(one.label, pageWidth - left, 12, true)], { frameAnchor: 'top', dy: -34, fontWeight: 'bold', fill: colour }),
      plot.cell(cells, { x: 'column', y: 'row', fill: colour, fillOpacity: ({ ratio }: Cell) => strength(ratio) }),
      plot.text(cells, { x: 'column', y: 'row', fontSize: 11, text: ({ ratio }: Cell) => (ratio === null ? '–' : significant(ratio, 3)) }),
    ],
  });
}

/** Nothing at 1, full at a doubling; text stays readable on it. */
function strength(ratio: number | null): number {
  return ratio === null ? 0 : Math.min(0.45, Math.max(0.03, 0.45 * Math.log2(Math.max(1, ratio))));
}

function describe(results: Results, one: Shown): string {
  const { blocks } = results.attribution![one.name]!;
  const sentences = parameterNames(results, 'target').map((parameter) => {
    const known = blocks.flatMap(({ probe, block, errorRatio }) => {
      const ratio = errorRatio[parameter] ?? null;
      return ratio === null ? [] : [{ name: `${results.probes[probe]?.label ?? probe}, ${block}`, ratio }];
    });
    const largest = [...known].sort((a, b) => b.ratio - a.ratio)[0];
    return largest === undefined ? '' : `${parameterName(results, parameter)} needs ${largest.name} most: ${significant(largest.ratio, 3)} without it.`;
  });
  return `${one.label}: ${sentences.join(' ')}`;
}
