import type { Element, ElementContent } from 'hast';
import type { MathTree } from './math-tree.js';
import { mathTree } from './math-tree.js';

/** Elements that only show: none links, loads or holds other markup. */
const elements = new Set([
  'math', 'mrow', 'mi', 'mn', 'mo', 'mtext', 'mspace', 'ms', 'mfrac', 'msqrt', 'mroot', 'msub', 'msup', 'msubsup', 'munder', 'mover', 'munderover',
  'mmultiscripts', 'mprescripts', 'none', 'mtable', 'mtr', 'mtd', 'mpadded', 'mphantom', 'menclose', 'mstyle', 'merror',
]); // prettier-ignore

/** No class, id, style, colour or link: the page's policy allows no style attribute, and contrast is the page's business. */
const attributes = new Set([
  'display', 'mathvariant', 'stretchy', 'fence', 'separator', 'form', 'lspace', 'rspace', 'width', 'height', 'depth', 'voffset', 'linethickness', 'accent',
  'accentunder', 'movablelimits', 'largeop', 'symmetric', 'minsize', 'maxsize', 'notation', 'columnalign', 'rowspacing', 'columnspacing', 'displaystyle',
  'scriptlevel',
]); // prettier-ignore

/** TeX as MathML; null where it is not sound. */
export function mathMl(tex: string, display: boolean): Element | null {
  const tree = mathTree(tex, display);
  const made = tree === null ? [] : convert(tree);
  const math = made[0];
  return math?.type === 'element' && math.tagName === 'math' ? math : null;
}

function convert(node: MathTree): ElementContent[] {
  if (node.text !== undefined) return [{ type: 'text', value: node.text }];
  const children = (node.children ?? []).flatMap(convert).filter((child) => !isEmptySpace(child));
  // Anything else gives its content only.
  if (!elements.has(node.type)) return children;
  const kept = Object.entries(node.attributes ?? {}).filter(([name, value]) => attributes.has(name) && isPlain(value));
  const [only] = children;
  // A row of one is that one: half the size of a page with many symbols.
  if (node.type === 'mrow' && kept.length === 0 && children.length === 1 && only?.type === 'element') return [only];
  return [{ type: 'element', tagName: node.type, properties: Object.fromEntries(kept.map(([name, value]) => [name, String(value)])), children }];
}

/** The converter puts spaces of no width into rows, for browsers that slant a lone letter: `mathvariant` says it already. */
function isEmptySpace(node: ElementContent): boolean {
  return node.type === 'element' && node.tagName === 'mspace' && Object.keys(node.properties).length === 0;
}

function isPlain(value: unknown): boolean {
  return typeof value === 'string' || typeof value === 'number' || typeof value === 'boolean';
}
