import type { Element, ElementContent, Nodes, Parents, Root } from 'hast';
import { visit } from 'unist-util-visit';
import { mathMl } from './mathml.js';

function classesOf(node: Element): readonly string[] {
  const { className } = node.properties;
  return Array.isArray(className) ? className.map(String) : [];
}

export function element(tagName: string, properties: Element['properties'], children: ElementContent[]): Element {
  return { type: 'element', tagName, properties, children };
}

function textOf(node: Nodes): string {
  if (node.type === 'text') return node.value;
  return 'children' in node ? node.children.map(textOf).join('') : '';
}

/** Formulae as MathML, after sanitising, which knows nothing of it. TeX was found sound when the tree was made. */
export function placeMath(tree: Root): void {
  visit(tree, 'element', (node, index, parent) => {
    if (node.tagName !== 'code' || parent === undefined || index === undefined) return;
    const display = classesOf(node).includes('math-display');
    if (!display && !classesOf(node).includes('math-inline')) return;
    const math = mathMl(textOf(node), display);
    if (math === null) throw new Error(`no sound TeX: ${textOf(node)}`);
    replace(parent, index, math);
  });
  // A displayed formula stands in a block of its own that may scroll.
  visit(tree, 'element', (node) => {
    const only = node.children[0];
    if (node.tagName !== 'pre' || only?.type !== 'element' || only.tagName !== 'math') return;
    node.tagName = 'div';
    node.properties = { className: ['formula'], tabIndex: 0, role: 'group', ariaLabel: 'Formula' };
  });
}

/** The drawings in place of their pictures: ours, so they pass unsanitised. */
export function placeFigures(tree: Root, drawings: ReadonlyMap<string, string>): void {
  visit(tree, 'element', (node) => {
    if (node.tagName !== 'figure' || !classesOf(node).includes('plot')) return;
    node.children = node.children.map((child): ElementContent => {
      const picture = child.type === 'element' ? child.children.find((one) => one.type === 'element' && one.tagName === 'img') : undefined;
      const drawing = picture?.type === 'element' ? drawings.get(String(picture.properties.src)) : undefined;
      if (drawing === undefined) return child;
      return element('div', { className: ['drawing'], tabIndex: 0, role: 'group', ariaLabel: 'Figure, scrolls where it is wider than the page' }, [
        { type: 'raw', value: drawing } as unknown as ElementContent,
      ]);
    });
  });
}

/** Headings of rows and columns get their scope; a wide table scrolls in a region of its own, never the page. */
export function placeTables(tree: Root): void {
  visit(tree, 'element', (node, index, parent) => {
    if (node.tagName !== 'table' || parent === undefined || index === undefined) return;
    const ours = parent.type === 'element' && parent.tagName === 'figure';
    for (const row of rowsOf(node)) scopeRow(row, ours);
    const caption = ours ? `${String(parent.properties.id)}-caption` : undefined;
    const name: Element['properties'] = caption === undefined ? { ariaLabel: 'Table' } : { ariaLabelledBy: [caption] };
    if (caption !== undefined) node.properties = { ...node.properties, ariaLabelledBy: [caption] };
    replace(parent, index, element('div', { className: ['scroll'], role: 'region', tabIndex: 0, ...name }, [node]));
    return index + 1;
  });
}

function rowsOf(table: Element): readonly Element[] {
  const rows: Element[] = [];
  visit(table, 'element', (node) => {
    if (node.tagName === 'tr') rows.push(node);
  });
  return rows;
}

function scopeRow(row: Element, headed: boolean): void {
  const cells = row.children.filter((child): child is Element => child.type === 'element');
  cells.forEach((cell, i) => {
    const right = cell.properties.align === 'right';
    const rest = { ...cell.properties };
    delete rest.align;
    const column = cell.tagName === 'th';
    if (!column && headed && i === 0) cell.tagName = 'th';
    const scope = cell.tagName === 'th' ? { scope: column ? 'col' : 'row' } : {};
    cell.properties = { ...rest, ...scope, ...(right ? { className: ['number'] } : {}) };
    if (cell.tagName === 'th') speak(cell);
  });
}

/** Not every reader aloud knows MathML in a heading: there the letters of a formula are said, and the formula is shown. */
function speak(heading: Element): void {
  const [only, ...others] = heading.children;
  if (only?.type !== 'element' || only.tagName !== 'math' || others.length > 0) return;
  only.properties = { ...only.properties, ariaHidden: 'true' };
  heading.children.push(element('span', { className: ['spoken'] }, [{ type: 'text', value: textOf(only) }]));
}

function replace(parent: Parents, index: number, node: ElementContent): void {
  parent.children.splice(index, 1, node);
}
