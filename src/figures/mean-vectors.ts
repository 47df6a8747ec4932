import type { Results, VectorResult } from '../results/schema.js';
import { verticalAxis } from './axes.js';
import { coordinateAxis, coordinateScale } from './coordinate.js';
import type { Drawing } from './drawing.js';
import { compose, finish } from './drawing.js';
import type { Figure } from './figure.js';
import { drawKey } from './key.js';
import { blockLabel } from './labels.js';
import { linearTicks, logTicks } from './log-ticks.js';
import { lookOf } from './palette.js';
import { gridFor, gridHeight, pageWidth, placed } from './panels.js';
import { wrapped } from './text-width.js';

interface Block {
  readonly title: string;
  readonly vector: VectorResult;
}

/** A spread of more than this on a linear axis hides its small end: a decade and a half. */
const widestLinear = 30;

/** Mean data vector of every block with the scatter of one realisation. */
export function meanVectors(results: Results, drawing: Drawing): readonly Figure[] {
  const blocks = Object.entries(results.vectors).flatMap(([probe, all]) =>
    Object.entries(all).flatMap(([block, vector]) => {
      const label = results.probes[probe]?.label ?? probe;
      return vector.mean === null ? [] : [{ title: `${label}, ${vector.label === '' ? block : blockLabel(vector.label)}`, vector }];
    }),
  );
  if (blocks.length === 0) return [];
  const { colour } = lookOf(0);
  const key = drawKey(drawing, [
    { text: 'mean over the fiducial realisations', sample: { colour, line: { width: 1.7 } } },
    { text: 'one standard deviation of one realisation', sample: { colour, band: true } },
  ]);
  const grid = gridFor(blocks.length, 196, key.height + 12, 3);
  const svgs = blocks.map((block) => panel(drawing, block, grid.width, grid.height));
  const panels = [{ svg: key.svg, x: 0, y: 6 }, ...placed(grid, svgs)];
  const svg = compose(drawing, { width: pageWidth, height: gridHeight(grid, blocks.length), panels });
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
  const means = points.map(({ mean }) => mean);
  const isWide = points.every(({ low }) => low > 0) && Math.max(...means) / Math.min(...means) > widestLinear;
  const [low, high] = [Math.min(...points.map((point) => point.low)), Math.max(...points.map((point) => point.high))];
  const domain: [number, number] = low < high ? [low, high] : [low - 1, high + 1];
  const ticks = isWide ? logTicks(domain, 5) : linearTicks(domain[0], domain[1], 5);
  const { colour } = lookOf(0);
  const lines = wrapped(title, width - 30, 2, 12, true);
  return plot.plot({
    document,
    width,
    height,
    marginLeft: 60,
    marginRight: 18,
    marginTop: 46,
    marginBottom: 42,
    x: coordinateScale(vector),
    y: { type: isWide ? 'log' : 'linear', domain },
    marks: [
      coordinateAxis(drawing, vector),
      verticalAxis(drawing, { ticks, label: null }),
      plot.areaY(points, { x: 'at', y1: 'low', y2: 'high', fill: colour, fillOpacity: 0.22 }),
      plot.line(points, { x: 'at', y: 'mean', stroke: colour, strokeWidth: 1.7 }),
      ...lines.map((line, k) => plot.text([line], { frameAnchor: 'top', dx: -20, dy: -16 - 15 * (lines.length - 1 - k), fontWeight: 'bold', fontSize: 12 })),
    ],
  });
}

function describe(title: string, { mean, values }: VectorResult): string {
  const [low, high] = [Math.min(...mean!), Math.max(...mean!)];
  return `${title}: ${String(values.length)} entries, means from ${low.toPrecision(3)} to ${high.toPrecision(3)}.`;
}
