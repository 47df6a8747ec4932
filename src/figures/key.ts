import type { Shown } from './combinations.js';
import type { Drawing } from './drawing.js';
import { lookOf, quiet } from './palette.js';
import { pageWidth } from './panels.js';
import { fitted, textWidth } from './text-width.js';

type Symbol = ReturnType<typeof lookOf>['symbol'] | 'times' | 'plus' | 'tick';

/** What stands before a word of the key, drawn as it is drawn in the figure. */
export interface Sample {
  readonly colour: string;
  readonly symbol?: { readonly name: Symbol; readonly filled: boolean };
  readonly line?: { readonly width: number; readonly dash?: string };
  /** A thick line within a thin one: 68 % within 95 %. */
  readonly within?: boolean;
  readonly band?: boolean;
}

export interface KeyItem {
  readonly text: string;
  /** Follows the text, and stays when that is cut. */
  readonly suffix?: string;
  readonly sample: Sample;
  /** Words in the sample's colour. */
  readonly coloured?: boolean;
}

export interface Key {
  readonly svg: Element;
  readonly height: number;
}

const sampleWidth = 26;
const lineHeight = 20;

interface Placed extends KeyItem {
  readonly x: number;
  readonly y: number;
}

/** A key drawn with marks, wrapped over lines: Plot's own keys are not SVG. `column` puts each item on its own line. */
export function drawKey(drawing: Drawing, items: readonly KeyItem[], width = pageWidth, column = false): Key {
  const placed = placeItems(items, width, column);
  const height = Math.max(lineHeight, ...placed.map(({ y }) => y + lineHeight / 2));
  return { svg: plotKey(drawing, placed, width, height), height };
}

function placeItems(items: readonly KeyItem[], width: number, column: boolean): readonly Placed[] {
  let x = 12;
  let y = lineHeight / 2;
  return items.map((item, k) => {
    const suffix = item.suffix ?? '';
    const text = fitted(item.text, width - 64 - textWidth(suffix, 12, item.coloured), 12, item.coloured) + suffix;
    const needed = sampleWidth + 6 + textWidth(text, 12, item.coloured) + 18;
    if (k > 0 && (column || x + needed > width)) {
      x = 12;
      y += lineHeight;
    }
    const place = { ...item, text, x, y };
    x += needed;
    return place;
  });
}

function plotKey({ document, plot }: Drawing, items: readonly Placed[], width: number, height: number): Element {
  const start = (item: Placed): number => item.x;
  const end = (item: Placed): number => item.x + sampleWidth;
  const middle = (item: Placed): number => item.x + sampleWidth / 2;
  const colour = ({ sample }: Placed): string => sample.colour;
  const lines = items.filter(({ sample }) => sample.line !== undefined);
  return plot.plot({
    document,
    width,
    height,
    margin: 0,
    x: { type: 'identity', axis: null },
    y: { type: 'identity', axis: null },
    marks: [
      plot.rect(items.filter(({ sample }) => sample.band === true), { x1: start, x2: end, y1: (item: Placed) => item.y - 5, y2: (item: Placed) => item.y + 5, fill: colour, fillOpacity: 0.22 }),
      ...lines.map((item) => plot.ruleY([item], { y: 'y', x1: start, x2: end, stroke: item.sample.colour, strokeWidth: item.sample.line!.width, strokeDasharray: dashOf(item.sample.line!.dash) })),
      plot.ruleY(items.filter(({ sample }) => sample.within === true), { y: 'y', x1: (item: Placed) => item.x + 6, x2: (item: Placed) => item.x + sampleWidth - 6, stroke: colour, strokeWidth: 5 }),
      ...([true, false] as const).map((filled) =>
        plot.dot(items.filter(({ sample }) => sample.symbol?.filled === filled && sample.symbol.name !== 'tick'), {
          x: middle,
          y: 'y',
          r: 4.5,
          symbol: ({ sample }: Placed) => sample.symbol!.name as Exclude<Symbol, 'tick'>,
          ...(filled ? { fill: colour, stroke: 'none' } : { stroke: colour, strokeWidth: 1.7 }),
        }),
      ),
      plot.ruleX(items.filter(({ sample }) => sample.symbol?.name === 'tick'), { x: middle, y1: (item: Placed) => item.y - 7, y2: (item: Placed) => item.y + 7, stroke: colour, strokeWidth: 1.8 }),
      ...items.map((item) => plot.text([item], { x: end, y: 'y', dx: 6, text: 'text', textAnchor: 'start', ...(item.coloured === true ? { fill: item.sample.colour, fontWeight: 'bold' } : {}) })),
    ],
  });
}

export function dashOf(dash: string | undefined): string {
  return dash === undefined || dash === '' ? 'none' : dash;
}

/** Combinations as they look; those without a corrected value say so. */
export function combinationItems(shown: readonly Pick<Shown, 'label' | 'look'>[], isKnown: (index: number) => boolean): readonly KeyItem[] {
  return shown.map(({ label, look }, k) => {
    const { colour, symbol, dash } = lookOf(look);
    if (!isKnown(k)) return { text: label, suffix: ' (cannot tell)', coloured: true, sample: { colour } };
    return { text: label, coloured: true, sample: { colour, symbol: { name: symbol, filled: true }, line: { width: 2, dash } } };
  });
}

/** An item in quiet ink: how a kind of line or mark is to be read. */
export function quietItem(text: string, sample: Omit<Sample, 'colour'>): KeyItem {
  return { text, sample: { ...sample, colour: quiet.light } };
}
