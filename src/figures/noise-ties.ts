import type { Results } from '../results/schema.js';
import { percent } from '../results/rounding.js';
import { shownCombinations } from './combinations.js';
import type { Drawing } from './drawing.js';
import { compose, finish } from './drawing.js';
import type { Figure } from './figure.js';
import { verticalAxis } from './axes.js';
import { coordinateAxis, coordinateScale } from './coordinate.js';
import { combinationItems, drawKey, quietItem } from './key.js';
import { blockLabel } from './labels.js';
import { lookOf, quiet } from './palette.js';
import { gridFor, gridHeight, pageWidth, placed, tick } from './panels.js';
import { wrapped } from './text-width.js';

interface Point {
  readonly at: number;
  readonly share: number;
}

interface Line {
  readonly label: string;
  readonly look: number;
  readonly chance: number | null;
  readonly points: readonly Point[];
}

interface Panel {
  readonly probe: string;
  readonly block: string;
  readonly lines: readonly Line[];
}

/** Share of each baseline entry's variance that the added entries predict, by scale. */
export function noiseTies(results: Results, drawing: Drawing): readonly Figure[] {
  const panels = panelsOf(results);
  if (panels.length === 0) return [];
  const seen = new Map(panels.flatMap(({ lines }) => lines.map((line) => [line.look, line] as const)));
  const key = drawKey(drawing, [
    ...combinationItems([...seen.values()], () => true).map((item) => ({ ...item, sample: { ...item.sample, line: { width: 1.8 } } })),
    quietItem('by chance', { line: { width: 1.2, dash: '3 3' } }),
  ]);
  const grid = gridFor(panels.length, 236, key.height + 16, 2);
  const svgs = panels.map((one) => draw(results, drawing, one, grid.width, grid.height));
  const svg = compose(drawing, { width: pageWidth, height: gridHeight(grid, panels.length), panels: [{ svg: key.svg, x: 0, y: 6 }, ...placed(grid, svgs)] });
  return [
    finish(svg, {
      name: 'noise-ties',
      title: "How far the added entries predict the baseline's noise",
      alternative: panels.map((one) => describe(results, one)).join(' '),
      caption:
        "Share of the variance of each baseline entry that the added entries predict, by scale. Only what they predict can be cancelled; dashed lines are what independent data would show by chance. Near the dashed line there is no cancellation of sample variance, whatever was expected.",
    }),
  ];
}

function panelsOf(results: Results): readonly Panel[] {
  const blocks = new Map<string, { probe: string; block: string; lines: Line[] }>();
  for (const { name, label, look } of shownCombinations(results)) {
    for (const tie of results.attribution?.[name]?.ties ?? []) {
      const owners = new Set(tie.predicted.map(({ probe, block }) => `${probe} ${block}`));
      for (const owner of owners) {
        const [probe = '', block = ''] = owner.split(' ');
        const own = tie.predicted.filter((one) => one.probe === probe && one.block === block);
        const panel = blocks.get(owner) ?? { probe, block, lines: [] };
        panel.lines.push({ label, look, chance: tie.chance, points: own.map(({ at, share }, k) => ({ at: at ?? k + 1, share })).sort((a, b) => a.at - b.at) });
        blocks.set(owner, panel);
      }
    }
  }
  return [...blocks.values()];
}

function draw(results: Results, drawing: Drawing, { probe, block, lines }: Panel, width: number, height: number): Element {
  const { document, plot } = drawing;
  const vector = results.vectors[probe]?.[block];
  const along = { values: lines.flatMap(({ points }) => points.map(({ at }) => at)), coordinate: vector?.coordinate ?? null, unit: vector?.unit ?? '' };
  const label = vector === undefined || vector.label === '' ? block : blockLabel(vector.label);
  const title = wrapped(`${results.probes[probe]?.label ?? probe}, ${label}`, width - 40, 2, 12, true);
  return plot.plot({
    document,
    width,
    height,
    marginLeft: 52,
    marginRight: 20,
    marginTop: 42,
    marginBottom: 44,
    x: coordinateScale(along),
    y: { domain: [0, 1] },
    marks: [
      coordinateAxis(drawing, along),
      verticalAxis(drawing, { ticks: [0, 0.2, 0.4, 0.6, 0.8, 1], label: 'share predicted', isCentred: true }),
      ...title.map((line, k) => plot.text([line], { frameAnchor: 'top', dx: -16, dy: -14 - 15 * (title.length - 1 - k), fontWeight: 'bold' })),
      ...lines.flatMap((line) => {
        const { colour, symbol } = lookOf(line.look);
        return [
          ...(line.chance === null ? [] : [plot.ruleY([line.chance], { stroke: colour, strokeDasharray: '3 3', strokeWidth: 1.2 })]),
          plot.line(line.points, { x: 'at', y: 'share', stroke: colour, strokeWidth: 1.8 }),
          plot.dot(line.points, { x: 'at', y: 'share', fill: colour, stroke: 'none', symbol, r: 3.2 }),
        ];
      }),
      plot.ruleY([0], { stroke: quiet.light }),
    ],
  });
}

function describe(results: Results, { probe, lines }: Panel): string {
  const label = results.probes[probe]?.label ?? probe;
  const values = lines.map((line) => {
    const largest = line.points.reduce((best, point) => (point.share > best.share ? point : best), line.points[0]!);
    const chance = line.chance === null ? '' : `, by chance ${percent(line.chance)}`;
    return `${line.label} predicts at most ${percent(largest.share)}, at ${tick(largest.at)}${chance}`;
  });
  return `${label}: ${values.join('; ')}.`;
}
