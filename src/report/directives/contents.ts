import { toString } from 'mdast-util-to-string';
import type { Frame } from '../markdown/nodes.js';
import { list, marked, say } from '../markdown/nodes.js';
import { slug } from '../slug.js';
import { sectionStates } from '../words/section-states.js';
import type { DirectiveKind, Scope } from './directive.js';

/** `::contents`: the sections of the report, each with its state in a few words. */
export const contents: DirectiveKind = {
  form: 'leafDirective',
  attributes: {},
  render: (_, __, scope) => {
    const frame: Frame = {
      type: 'frame',
      data: { hName: 'nav', hProperties: { ariaLabel: 'Contents' } },
      children: [list(sectionNames(scope).map((name) => entry(name, scope)))],
    };
    return [frame];
  },
};

function sectionNames(scope: Scope): readonly string[] {
  return (scope.pages.get('report')?.children ?? []).flatMap((node) =>
    node.type === 'leafDirective' && node.name === 'section' ? [node.attributes?.name ?? ''] : [],
  );
}

function entry(name: string, scope: Scope) {
  const page = scope.pages.get(name);
  const heading = page?.children[0];
  const title = heading === undefined ? name : toString(heading);
  const link = { type: 'link' as const, url: `#${slug(title)}`, title: null, children: say`${title}` };
  const state = Object.hasOwn(sectionStates, name) ? sectionStates[name]!(scope.results) : null;
  return state === null ? [link] : say`${link}${marked(': ', 'colon')}${marked(state, 'state')}`;
}
