import { sentenceMakers } from '../words/all.js';
import type { DirectiveKind } from './directive.js';
import { named } from './template-error.js';

/** `::sentence{name=convergence}`: words made from the numbers. */
export const sentence: DirectiveKind = {
  form: 'leafDirective',
  attributes: { name: 'required' },
  render: ({ name }, directive, scope) => [...named(sentenceMakers, name!, 'sentence', scope.page, directive)(scope.results, scope.combination)],
};
