import type { Root } from 'mdast';
import remarkDirective from 'remark-directive';
import remarkGfm from 'remark-gfm';
import remarkMath from 'remark-math';
import remarkParse from 'remark-parse';
import { unified } from 'unified';

const plain = unified().use(remarkParse).use(remarkGfm, { singleTilde: false }).use(remarkMath).freeze();
const withDirectives = plain().use(remarkDirective).freeze();

/** A template: Markdown with directives. */
export function parseTemplate(source: string): Root {
  return withDirectives.parse(source);
}

/** What a user wrote: no directives, since "3:4" would be one. */
export function parseNotes(source: string): Root {
  return plain.parse(source);
}
