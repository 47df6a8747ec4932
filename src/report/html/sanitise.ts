import type { Root } from 'hast';
import rehypeSanitize from 'rehype-sanitize';
import { unified } from 'unified';

/**
 * The second wall: notes are cleaned as Markdown already. What is not in this list does not reach the page. An empty list of protocols
 * would mean "all", so each attribute with an address has one.
 */
const schema: NonNullable<Parameters<typeof rehypeSanitize>[0]> = {
  tagNames: [
    'a', 'blockquote', 'br', 'code', 'del', 'div', 'em', 'figcaption', 'figure', 'footer', 'h1', 'h2', 'h3', 'h4', 'h5', 'h6', 'hr', 'img', 'input', 'li',
    'nav', 'ol', 'p', 'pre', 'section', 'span', 'strong', 'sup', 'table', 'tbody', 'td', 'th', 'thead', 'tr', 'ul',
  ],
  attributes: {
    '*': ['id', 'className', 'ariaLabel', 'ariaLabelledBy', 'ariaDescribedBy', 'dataFootnotes', 'dataFootnoteRef', 'dataFootnoteBackref'],
    a: ['href'],
    img: ['src', 'alt'],
    input: [['type', 'checkbox'], ['disabled', true], 'checked'],
    ol: ['start'],
    td: ['align'],
    th: ['align'],
  },
  // Figures have relative addresses, which have no protocol; no picture comes from elsewhere.
  protocols: { href: ['http', 'https', 'mailto'], src: ['relative-only'] },
  required: { input: { type: 'checkbox', disabled: true } },
  clobber: [],
  strip: ['script', 'style'],
}; // prettier-ignore

const sanitiser = unified().use(rehypeSanitize, schema).freeze();

export function sanitise(tree: Root): Root {
  return sanitiser.runSync(tree);
}
