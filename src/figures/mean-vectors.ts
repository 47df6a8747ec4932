import type { Results, VectorResult } from '../results/schema.js';
import { verticalAxis } from './axes.js';
import { coordinateAxis, coordinateScale } from './coordinate.js';
import type { Drawing } from './drawing.js';
import { compose, finish } from './drawing.js';
import type { Figure } from './figure.js';
import { blockLabel, shortened } from './labels.js';
import { logTicks } from './log-ticks.js';
import { lookOf, quiet } from './palette.js';
import { gridFor, gridHeight, pageWidth, placed, tick } from './panels.js';

interface Block {
  readonly title: string;
  readonly vector: VectorResult;
}

/** Mean data vector of every block with the scatter of one realisation. */
export function meanVectors(results: Results, drawing: Drawing): readonly Figure[] {
  const blocks = Object.entries(results.vectors).flatMap(([probe, all]) =>
    Object.entries(all).flatMap(([block, vector]) => {
      const label = results.probes[probe]?.label ?? probe;
      return vector.mean === null ? [] : [{ title: `${label}, ${vector.label === '' ? block : blockLabel(vector.label)}`, vector }];
    }),
  );
  if (blocks.length === 0) return [];
  const grid = gridFor(blocks.length, 176, 30, 3);
  const svgs = blocks.map((block) => panel(drawing, block, grid.width, grid.height));
  const notes = [{ x: 12, y: 18, text: 'mean over the fiducial realisations; band: one standard deviation of one realisation', colour: quiet.light }];
  const svg = compose(drawing, { width: pageWidth, height: gridHeight(grid, blocks.length), panels: placed(grid, svgs), notes });
  return [
    finish(svg, {
      name: 'mean-vectors',
      title: 'Mean data vector',
      alternative: blocks.map(({ title, vector }) => describe(title, vector)).join(' '),
      caption: 'Mean data vector with a band of one standard deviation of one realisation: what was measured, before any derivative. A kink or an empty bin here shows up in everything below.',
    }),
  ];
}

function panel(drawing: Drawing, { title, vector }: Block, width: number, height: number): Element {
  const { document, plot } = drawing;
  const points = vector.values.map((at, i) => {
    const [mean, deviation] = [vector.mean![i]!, vector.standardDeviation[i]!];
    return { at, mean, low: mean - deviation, high: mean + deviation };
  });
  const positive = points.every(({ low }) => low > 0) && Math.max(...points.map(({ mean }) => mean)) / Math.min(...points.map(({ mean }) => mean)) > 30;
  const domain: [number, number] = [Math.min(...points.map(({ low }) => low)), Math.max(...points.map(({ high }) => high))];
  const { colour } = lookOf(0);
  return plot.plot({
    document,
    width,
    height,
    marginLeft: 56,
    marginRight: 10,
    marginTop: 28,
    marginBottom: 42,
    x: coordinateScale(vector),
    y: positive ? { type: 'log', domain } : { label: null, ticks: 5, tickFormat: tick },
    marks: [
      ...coordinateAxis(drawing, vector),
      ...(positive ? [verticalAxis(drawing, { ticks: logTicks(domain, 5), label: null })] : []),
      plot.areaY(points, { x: 'at', y1: 'low', y2: 'high', fill: colour, fillOpacity: 0.22 }),
      plot.line(points, { x: 'at', y: 'mean', stroke: colour, strokeWidth: 1.6 }),
      plot.text([shortened(title, 38)], { frameAnchor: 'top', dy: -16, fontWeight: 'bold', fontSize: 11 }),
    ],
  });
}

function describe(title: string, { mean, values }: VectorResult): string {
  const [low, high] = [Math.min(...mean!), Math.max(...mean!)];
  return `${title}: ${String(values.length)} entries, means from ${low.toPrecision(3)} to ${high.toPrecision(3)}.`;
}
