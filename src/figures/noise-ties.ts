import type { Results } from '../results/schema.js';
import { percent } from '../results/rounding.js';
import { shownCombinations } from './combinations.js';
import type { Drawing } from './drawing.js';
import { compose, finish } from './drawing.js';
import type { Figure } from './figure.js';
import { axisLabel, shortened } from './labels.js';
import { lookOf, quiet } from './palette.js';
import { combinationKey, gridFor, gridHeight, keyHeight, pageWidth, placed, tick } from './panels.js';

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
  const notes = combinationKey(panels[0]!.lines);
  const grid = gridFor(panels.length, 230, keyHeight(notes), 2);
  const svgs = panels.map((one) => draw(results, drawing, one, grid.width, grid.height));
  const svg = compose(drawing, { width: pageWidth, height: gridHeight(grid, panels.length), panels: placed(grid, svgs), notes });
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

function draw(results: Results, { document, plot }: Drawing, { probe, block, lines }: Panel, width: number, height: number): Element {
  const vector = results.vectors[probe]?.[block];
  const label = results.probes[probe]?.label ?? probe;
  return plot.plot({
    document,
    width,
    height,
    marginLeft: 48,
    marginRight: 14,
    marginTop: 30,
    marginBottom: 44,
    x: { label: axisLabel(vector?.coordinate ?? 'entry', vector?.unit ?? ''), labelAnchor: 'center', labelArrow: 'none', ticks: 5, tickFormat: tick },
    y: { domain: [0, 1], label: 'share of the variance predicted', labelArrow: 'none', ticks: 5, tickFormat: tick },
    marks: [
      plot.text([shortened(`${label}, ${block}`, Math.floor(width / 8))], { frameAnchor: 'top', dy: -18, dx: 60, fontWeight: 'bold' }),
      ...lines.flatMap((line) => {
        const { colour, symbol } = lookOf(line.look);
        return [
          ...(line.chance === null ? [] : [plot.ruleY([line.chance], { stroke: colour, strokeDasharray: '3 3', strokeOpacity: 0.8 })]),
          plot.line(line.points, { x: 'at', y: 'share', stroke: colour, strokeWidth: 1.6 }),
          plot.dot(line.points, { x: 'at', y: 'share', fill: colour, stroke: 'none', symbol, r: 3 }),
        ];
      }),
      plot.ruleY([0], { stroke: quiet.light, strokeOpacity: 0.5 }),
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
