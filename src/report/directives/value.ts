import { valueMakers } from '../words/value-makers.js';
import type { DirectiveKind } from './directive.js';
import { named } from './template-error.js';

/** `:value{name=title}`: one value of the study, in a line. */
export const value: DirectiveKind = {
  form: 'textDirective',
  attributes: { name: 'required' },
  render: ({ name }, directive, scope) => [...named(valueMakers, name!, 'value', scope.page, directive)(scope.results, scope.combination)],
};
