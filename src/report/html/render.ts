import type { Root } from 'mdast';
import type { Figure } from '../../figures/figure.js';
import { page } from './page.js';
import { placeFigures, placeMath, placeTables } from './places.js';
import { sanitise } from './sanitise.js';
import { toHtml } from './to-html.js';

/** The report's tree as one HTML file. */
export function renderHtml(tree: Root, figures: readonly Figure[], title: string, style: string): string {
  const html = sanitise(toHtml(tree));
  placeMath(html);
  placeFigures(html, new Map(figures.map(({ name, inline }) => [`figures/${name}.svg`, inline])));
  placeTables(html);
  return page(html, title, style);
}
