import type * as PlotModule from '@observablehq/plot';
import type { Figure, FigureWords } from './figure.js';
import { serialise } from './serialise.js';
import { tidy } from './tidy.js';

/** The one document that everything is drawn in, and the library that draws. */
export interface Drawing {
  readonly document: Document;
  readonly plot: typeof PlotModule;
}

/** Loads what draws. It takes a second, so nothing else may import it. */
export async function openDrawing(): Promise<Drawing> {
  const [{ JSDOM }, plot] = await Promise.all([import('jsdom'), import('@observablehq/plot')]);
  return { document: new JSDOM('').window.document, plot };
}

/** One plot of a figure, at its place. */
export interface Panel {
  readonly svg: Element;
  readonly x: number;
  readonly y: number;
}

/** Words at a place of the figure. */
export interface Note {
  readonly x: number;
  readonly y: number;
  readonly text: string;
  readonly anchor?: 'start' | 'middle' | 'end';
  readonly weight?: 'bold';
  readonly style?: 'italic';
  readonly colour?: string;
  readonly size?: number;
}

export interface Layout {
  readonly width: number;
  readonly height: number;
  readonly panels: readonly Panel[];
  readonly notes?: readonly Note[];
}

const namespace = 'http://www.w3.org/2000/svg';

/** Puts panels and notes into one SVG. */
export function compose({ document }: Drawing, layout: Layout): Element {
  const { width, height } = layout;
  const svg = document.createElementNS(namespace, 'svg');
  const attributes = {
    xmlns: namespace,
    viewBox: `0 0 ${String(width)} ${String(height)}`,
    width: String(width),
    height: String(height),
    fill: 'currentColor',
    'font-family': 'system-ui, "Segoe UI", "Helvetica Neue", Arial, sans-serif',
    'font-size': '12',
    'text-anchor': 'middle',
  };
  for (const [name, value] of Object.entries(attributes)) svg.setAttribute(name, value);
  for (const { svg: panel, x, y } of layout.panels) {
    const group = document.createElementNS(namespace, 'g');
    group.setAttribute('transform', `translate(${String(x)},${String(y)})`);
    group.append(...panel.childNodes);
    svg.append(group);
  }
  for (const note of layout.notes ?? []) svg.append(drawNote(document, note));
  return svg;
}

function drawNote(document: Document, note: Note): Element {
  const text = document.createElementNS(namespace, 'text');
  text.setAttribute('x', String(note.x));
  text.setAttribute('y', String(note.y));
  text.setAttribute('text-anchor', note.anchor ?? 'start');
  if (note.weight !== undefined) text.setAttribute('font-weight', note.weight);
  if (note.style !== undefined) text.setAttribute('font-style', note.style);
  if (note.colour !== undefined) text.setAttribute('fill', note.colour);
  if (note.size !== undefined) text.setAttribute('font-size', String(note.size));
  text.textContent = note.text;
  return text;
}

/** A finished figure from what was composed. */
export function finish(svg: Element, words: FigureWords): Figure {
  tidy(svg, words.name, words.title, words.alternative);
  const inline = serialise(svg);
  const ground = svg.ownerDocument.createElementNS(namespace, 'rect');
  for (const [name, value] of [['width', '100%'], ['height', '100%'], ['fill', 'white']] as const) ground.setAttribute(name, value);
  const [, description] = svg.children;
  description?.after(ground);
  return { ...words, inline, standalone: `${serialise(svg)}\n` };
}

/** A name of the study as part of a file name and of an id. */
export function stem(name: string): string {
  return name.replaceAll(/[^A-Za-z0-9_-]+/g, '-');
}
