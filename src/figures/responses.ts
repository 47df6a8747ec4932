import type { Results, VectorResult } from '../results/schema.js';
import { verticalAxis } from './axes.js';
import { coordinateAxis, coordinateScale } from './coordinate.js';
import type { Drawing } from './drawing.js';
import { finish, stem } from './drawing.js';
import type { Figure } from './figure.js';
import { drawKey } from './key.js';
import { blockLabel, parameterLabel, parameterName, parameterNames } from './labels.js';
import { linearTicks } from './log-ticks.js';
import type { Place } from './matrix.js';
import { composeTable } from './matrix.js';
import { lookOf, quiet } from './palette.js';
import { tick } from './panels.js';

/** One derivative along a block, in units of the data's standard deviation. */
interface Point {
  readonly at: number;
  readonly value: number;
  readonly low: number;
  readonly high: number;
}

interface Block {
  readonly block: string;
  readonly vector: VectorResult;
}

/** Most rows of panels; beyond it nuisance parameters are left out. */
const mostRows = 10;

function titleOf({ block, vector }: Block): string {
  return vector.label === '' ? block : blockLabel(vector.label);
}

/** Derivatives of each block, one figure a probe: rows are parameters, columns blocks. */
export function responses(results: Results, drawing: Drawing): readonly Figure[] {
  const targets = parameterNames(results, 'target');
  const drawn = results.parameters.length <= mostRows || targets.length === 0 ? parameterNames(results) : targets;
  return Object.entries(results.vectors).map(([probe, vectors]) => {
    const blocks = Object.entries(vectors).map(([block, vector]): Block => ({ block, vector }));
    const label = results.probes[probe]?.label ?? probe;
    const isNoisy = blocks.some(({ vector }) => Object.values(vector.derivatives).some(({ standardError }) => standardError !== null));
    const { colour } = lookOf(0);
    const key = drawKey(drawing, [
      { text: 'derivative / standard deviation of the entry', sample: { colour, line: { width: 1.6 } } },
      ...(isNoisy ? [{ text: 'its noise: one standard error', sample: { colour, band: true } }] : []),
    ]);
    const domains = drawn.map((name) => rangeOf(blocks.flatMap((block) => pointsOf(block, name))));
    const svg = composeTable(drawing, key, {
      columns: blocks.map((block) => ({ text: titleOf(block) })),
      rows: drawn.map((name) => parameterLabel(results, name)),
      rowHeight: 104,
      foot: 26,
      panel: (row, column, place) => panel(drawing, drawn[row]!, blocks[column]!, domains[row]!, place),
    });
    const left = results.parameters.length - drawn.length;
    return finish(svg, {
      name: `responses-${stem(probe)}`,
      title: `Responses of ${label}`,
      alternative: describe(results, label, blocks),
      caption:
        `${label}: derivative by each parameter in units of the data's standard deviation` +
        (isNoisy
          ? ', with a band of one standard error of the derivative. Where the band is as wide as the curve is tall, the entry adds noise that looks like information.'
          : '. The derivatives came without realisations, so that their noise is not known.') +
        (left > 0 ? ` ${String(left)} nuisance parameters are not drawn.` : ''),
    });
  });
}

function pointsOf({ vector }: Block, parameter: string): readonly Point[] {
  const derivative = vector.derivatives[parameter];
  if (derivative === undefined) return [];
  return vector.values.flatMap((at, i) => {
    const deviation = vector.standardDeviation[i]!;
    if (!(deviation > 0)) return [];
    const middle = derivative.value[i]! / deviation;
    const error = (derivative.standardError?.[i] ?? 0) / deviation;
    return [{ at, value: middle, low: middle - error, high: middle + error }];
  });
}

/** One range for all blocks, so that they can be compared; zero is always in it. */
function rangeOf(points: readonly Point[]): [number, number] {
  const [low, high] = [Math.min(0, ...points.map((point) => point.low)), Math.max(0, ...points.map((point) => point.high))];
  const room = high > low ? 0.06 * (high - low) : 1;
  return [low - room, high + room];
}

function panel(drawing: Drawing, parameter: string, block: Block, domain: [number, number], { width, height, isLowest }: Place): Element {
  const { document, plot } = drawing;
  const points = pointsOf(block, parameter);
  const { colour } = lookOf(0);
  return plot.plot({
    document,
    width,
    height,
    marginLeft: 48,
    marginRight: 18,
    marginTop: 8,
    marginBottom: isLowest ? 46 : 20,
    x: coordinateScale(block.vector),
    y: { domain },
    marks: [
      coordinateAxis(drawing, block.vector, isLowest),
      verticalAxis(drawing, { ticks: linearTicks(domain[0], domain[1], 4), label: null }),
      plot.ruleY([0], { stroke: quiet.light, strokeWidth: 1 }),
      plot.areaY(points, { x: 'at', y1: 'low', y2: 'high', fill: colour, fillOpacity: 0.22 }),
      plot.line(points, { x: 'at', y: 'value', stroke: colour, strokeWidth: 1.7 }),
    ],
  });
}

function describe(results: Results, label: string, blocks: readonly Block[]): string {
  const sentences = results.parameters.map(({ name }) => {
    const all = blocks.flatMap((block) => pointsOf(block, name));
    const [first] = all;
    if (first === undefined) return `${parameterName(results, name)}: no response.`;
    const largest = all.reduce((best, point) => (Math.abs(point.value) > Math.abs(best.value) ? point : best), first);
    const loud = all.filter(({ value, high }) => Math.abs(value) < high - value).length;
    return `${parameterName(results, name)}: largest response ${largest.value.toPrecision(2)} standard deviations a unit, at ${tick(largest.at)}; ${String(loud)} of ${String(all.length)} entries are below their own noise.`;
  });
  return `${label}. ${sentences.join(' ')}`;
}
