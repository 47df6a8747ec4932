import { marks, shiftedSize } from './glyphs.js';

/** Two decimals of a pixel are more than a printer shows. */
const decimals = 2;

/**
 * Makes an SVG small, stable and safe to inline: coordinates with two decimals, no style elements, ids that carry the figure's name, no labels on
 * groups (a screen reader gets the title and the description), shifted spans for sub- and superscripts.
 */
export function tidy(svg: Element, name: string, title: string, description: string): void {
  for (const style of svg.querySelectorAll('style')) style.remove();
  for (const element of [svg, ...svg.querySelectorAll('*')]) cleanAttributes(element);
  for (const text of svg.querySelectorAll('text, tspan')) shiftMarks(text);
  renumberIds(svg, name);
  svg.setAttribute('role', 'img');
  svg.setAttribute('aria-labelledby', `${name}-title ${name}-desc`);
  const make = (tag: string, id: string, content: string): Element => {
    const element = svg.ownerDocument.createElementNS('http://www.w3.org/2000/svg', tag);
    element.setAttribute('id', id);
    element.textContent = content;
    return element;
  };
  svg.prepend(make('title', `${name}-title`, title), make('desc', `${name}-desc`, description));
}

const numeric = new Set(['d', 'x', 'y', 'x1', 'x2', 'y1', 'y2', 'cx', 'cy', 'r', 'width', 'height', 'transform', 'points', 'dx', 'dy', 'stroke-width', 'font-size']);
const dropped = new Set(['class', 'aria-label', 'aria-hidden', 'aria-description', 'style']);

function cleanAttributes(element: Element): void {
  for (const { name: attribute, value } of [...element.attributes]) {
    if (dropped.has(attribute)) element.removeAttribute(attribute);
    else if (numeric.has(attribute)) element.setAttribute(attribute, shorter(value));
  }
}

function shorter(text: string): string {
  return text.replaceAll(/-?\d*\.\d+(?:e-?\d+)?/g, (number) => String(Number(Number(number).toFixed(decimals))));
}

function renumberIds(svg: Element, name: string): void {
  const ids = new Map<string, string>();
  for (const element of svg.querySelectorAll('[id]')) {
    const fresh = `${name}-${String(ids.size + 1)}`;
    ids.set(element.id, fresh);
    element.setAttribute('id', fresh);
  }
  for (const element of svg.querySelectorAll('[clip-path]')) {
    const old = /url\(#(.*)\)/.exec(element.getAttribute('clip-path') ?? '')?.[1];
    const fresh = old === undefined ? undefined : ids.get(old);
    if (fresh !== undefined) element.setAttribute('clip-path', `url(#${fresh})`);
  }
}

/** Text with marks becomes spans: smaller, and lower or higher by a third of the letter. */
function shiftMarks(element: Element): void {
  for (const node of [...element.childNodes]) {
    if (node.nodeType !== 3) continue;
    const text = node.textContent ?? '';
    if (!/[\uE000-\uE002]/.test(text)) continue;
    let shift = 0;
    for (const [, mark = '', run = ''] of text.matchAll(/([\uE000-\uE002]?)([^\uE000-\uE002]*)/g)) {
      const target = mark === marks.sub ? 0.3 : mark === marks.sup ? -0.4 : 0;
      if (run === '') continue;
      const span = element.ownerDocument.createElementNS('http://www.w3.org/2000/svg', 'tspan');
      // An em of the span is its own size, and spans off the line are smaller.
      const size = target === 0 ? 1 : shiftedSize;
      if (target !== shift) span.setAttribute('dy', `${String(Number(((target - shift) / size).toFixed(2)))}em`);
      if (target !== 0) span.setAttribute('font-size', `${String(100 * shiftedSize)}%`);
      span.textContent = run;
      element.insertBefore(span, node);
      shift = target;
    }
    node.remove();
  }
}
