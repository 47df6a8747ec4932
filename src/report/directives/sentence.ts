import { combinationSentenceMakers, sentenceMakers } from '../words/all.js';
import type { DirectiveKind } from './directive.js';
import { maker } from './maker.js';

/** `::sentence{name=convergence}`: words made from the numbers. */
export const sentence: DirectiveKind = {
  form: 'leafDirective',
  attributes: { name: 'required' },
  render: ({ name }, directive, scope) => [...maker(sentenceMakers, combinationSentenceMakers, name!, 'sentence', directive, scope)(scope.results)],
};
