import { createHash } from 'node:crypto';
import type { Element, ElementContent, Root, RootContent } from 'hast';
import rehypeStringify from 'rehype-stringify';
import { unified } from 'unified';
import { element } from './places.js';

/** The whole page: head with its policy, header, contents, sections, footer. */
export function page(tree: Root, title: string, style: string): string {
  const parts = partsOf(tree);
  const body = element('body', {}, [
    element('a', { className: ['skip'], href: '#main' }, [text('Skip to the report')]),
    element('header', {}, parts.head),
    ...parts.nav,
    element('main', { id: 'main' }, [...sections(parts.main), ...parts.sources]),
    ...parts.footer,
  ]);
  const html = element('html', { lang: 'en' }, [head(title, style), body]);
  const document: Root = { type: 'root', children: [{ type: 'doctype' }, html] };
  return `${unified().use(rehypeStringify, { allowDangerousHtml: true }).stringify(document)}\n`;
}

/** One style element, known by its digest; nothing else may style, load, run or lead the page elsewhere. */
function head(title: string, style: string): Element {
  if (/<\/?style|<!--/i.test(style)) throw new Error('the style sheet holds markup');
  const digest = createHash('sha256').update(style).digest('base64');
  const policy = `default-src 'none'; img-src data:; style-src 'sha256-${digest}'; base-uri 'none'; form-action 'none'`;
  return element('head', {}, [
    element('meta', { charSet: 'utf-8' }, []),
    element('meta', { httpEquiv: ['Content-Security-Policy'], content: policy }, []),
    element('meta', { name: 'viewport', content: 'width=device-width, initial-scale=1' }, []),
    element('meta', { name: 'color-scheme', content: 'light dark' }, []),
    element('title', {}, [text(title)]),
    element('style', {}, [text(style)]),
  ]);
}

interface Parts {
  readonly head: ElementContent[];
  readonly nav: ElementContent[];
  readonly main: ElementContent[];
  readonly sources: ElementContent[];
  readonly footer: ElementContent[];
}

/** What stands before the contents is the header; sources and footer come last. */
function partsOf(tree: Root): Parts {
  const parts: Parts = { head: [], nav: [], main: [], sources: [], footer: [] };
  for (const node of tree.children) {
    if (!isContent(node)) continue;
    if (isElement(node, 'nav')) parts.nav.push(node);
    else if (isElement(node, 'footer')) parts.footer.push(node);
    else if (isElement(node, 'section')) parts.sources.push(node);
    else if (parts.nav.length === 0) parts.head.push(node);
    else parts.main.push(node);
  }
  return parts;
}

/** A section for each heading of level 2, named by it. */
function sections(nodes: readonly ElementContent[]): ElementContent[] {
  const made: ElementContent[] = [];
  let section: Element | null = null;
  for (const node of nodes) {
    if (isElement(node, 'h2')) {
      section = element('section', { ariaLabelledBy: [String(node.properties.id)] }, []);
      made.push(section);
    }
    if (section === null) made.push(node);
    else section.children.push(node);
  }
  return made;
}

function isContent(node: RootContent): node is ElementContent {
  return node.type !== 'doctype' && !(node.type === 'text' && node.value.trim() === '');
}

function isElement(node: ElementContent, tagName: string): node is Element {
  return node.type === 'element' && node.tagName === tagName;
}

function text(value: string): ElementContent {
  return { type: 'text', value };
}
