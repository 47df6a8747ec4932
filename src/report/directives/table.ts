import { combinationTableMakers, tableMakers } from '../tables/all.js';
import { tableFrame } from '../tables/table.js';
import { reference } from '../numbering.js';
import { paragraph, say } from '../markdown/nodes.js';
import type { DirectiveKind } from './directive.js';
import { maker } from './maker.js';
import { TemplateError } from './template-error.js';

/** `::table{name=errors}`: a numbered table; nothing where it would be empty. */
export const table: DirectiveKind = {
  form: 'leafDirective',
  attributes: { name: 'required' },
  render: ({ name }, directive, scope) => {
    const make = maker(tableMakers, combinationTableMakers, name!, 'table', directive, scope);
    const made = make(scope.results);
    const fail = (what: string): Error => new TemplateError(scope.page, directive, what);
    return made === null || made.rows.length === 0 ? [] : [tableFrame(made, scope.numbering, fail)];
  },
};

/** `:see{id=table-errors}`: "Table 2", a link in HTML. */
export const see: DirectiveKind = {
  form: 'textDirective',
  attributes: { id: 'required' },
  render: ({ id }, directive, scope) => [
    reference(scope.numbering, id!, () => new TemplateError(scope.page, directive, `"see" names "${id!}", and the report has no such figure or table`)),
  ],
};

/** `::csv{name=scan}`: where the numbers are in full. */
export const csv: DirectiveKind = {
  form: 'leafDirective',
  attributes: { name: 'required' },
  render: ({ name }) => [paragraph(...say`Every number of it, in full precision: ${{ type: 'inlineCode', value: `tables/${name!}.csv` }}.`)],
};
