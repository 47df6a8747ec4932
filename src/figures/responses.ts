import type { Results, VectorResult } from '../results/schema.js';
import { coordinateAxis, coordinateScale } from './coordinate.js';
import type { Drawing } from './drawing.js';
import { compose, finish } from './drawing.js';
import type { Figure } from './figure.js';
import { blockLabel, parameterLabel, parameterName, shortened } from './labels.js';
import { lookOf, quiet } from './palette.js';
import { gridFor, gridHeight, pageWidth, placed, tick } from './panels.js';

/** One derivative along a block, in units of the data's standard deviation. */
interface Point {
  readonly at: number;
  readonly value: number;
  readonly low: number;
  readonly high: number;
}

interface Block {
  readonly probe: string;
  readonly block: string;
  readonly vector: VectorResult;
}

function blocksOf(results: Results, probe: string): readonly Block[] {
  return Object.entries(results.vectors[probe] ?? {}).map(([block, vector]) => ({ probe, block, vector }));
}

function titleOf({ block, vector }: Block): string {
  return vector.label === '' ? block : blockLabel(vector.label);
}

/** Derivatives of each block, one figure a probe: rows are parameters, columns blocks. */
export function responses(results: Results, drawing: Drawing): readonly Figure[] {
  return Object.keys(results.vectors).map((probe) => {
    const blocks = blocksOf(results, probe);
    const across = Math.min(blocks.length, 4);
    const cases = chunks(blocks, across).flatMap((row) => results.parameters.flatMap(({ name }) => row.map((block) => ({ name, block }))));
    const grid = gridFor(cases.length, 140, 34, across);
    const svgs = cases.map(({ name, block }) => panel(results, drawing, name, block, grid.width, grid.height));
    const label = results.probes[probe]?.label ?? probe;
    const notes = [{ x: 12, y: 20, text: `${label}: derivative / (standard deviation of the entry); band: its noise, one standard error`, colour: quiet.light }];
    const svg = compose(drawing, { width: pageWidth, height: gridHeight(grid, cases.length), panels: placed(grid, svgs), notes });
    return finish(svg, {
      name: `responses-${probe}`,
      title: `Responses of ${label}`,
      alternative: describe(results, label, blocks),
      caption: `${label}: derivative by each parameter in units of the data's standard deviation, with a band of one standard error of the derivative. Where the band is as wide as the curve is tall, the entry adds noise that looks like information.`,
    });
  });
}

function chunks<T>(values: readonly T[], size: number): readonly (readonly T[])[] {
  return Array.from({ length: Math.ceil(values.length / size) }, (_, k) => values.slice(k * size, (k + 1) * size));
}

function pointsOf({ vector }: Block, parameter: string): readonly Point[] {
  const { value, standardError } = vector.derivatives[parameter]!;
  return vector.values.map((at, i) => {
    const deviation = vector.standardDeviation[i]!;
    const middle = value[i]! / deviation;
    const error = (standardError?.[i] ?? 0) / deviation;
    return { at, value: middle, low: middle - error, high: middle + error };
  });
}

function panel(results: Results, drawing: Drawing, parameter: string, block: Block, width: number, height: number): Element {
  const { document, plot } = drawing;
  const points = pointsOf(block, parameter);
  const { colour } = lookOf(0);
  const { vector } = block;
  return plot.plot({
    document,
    width,
    height,
    marginLeft: 50,
    marginRight: 10,
    marginTop: 22,
    marginBottom: 40,
    x: coordinateScale(vector),
    y: { label: null, ticks: 4, tickFormat: tick, nice: true },
    marks: [
      ...coordinateAxis(drawing, vector),
      plot.ruleY([0], { stroke: quiet.light, strokeDasharray: '3 3' }),
      plot.areaY(points, { x: 'at', y1: 'low', y2: 'high', fill: colour, fillOpacity: 0.22 }),
      plot.line(points, { x: 'at', y: 'value', stroke: colour, strokeWidth: 1.6 }),
      plot.text([`${parameterLabel(results, parameter)}  ${shortened(titleOf(block), 18)}`], { frameAnchor: 'top', dy: -14, fontWeight: 'bold', fontSize: 11 }),
    ],
  });
}

function describe(results: Results, label: string, blocks: readonly Block[]): string {
  const sentences = results.parameters.map(({ name }) => {
    const all = blocks.flatMap((block) => pointsOf(block, name));
    const largest = all.reduce((best, point) => (Math.abs(point.value) > Math.abs(best.value) ? point : best), all[0]!);
    const loud = all.filter(({ value, high }) => Math.abs(value) < high - value).length;
    return `${parameterName(results, name)}: largest response ${largest.value.toPrecision(2)} standard deviations a unit, at ${tick(largest.at)}; ${String(loud)} of ${String(all.length)} entries are below their own noise.`;
  });
  return `${label}. ${sentences.join(' ')}`;
}
