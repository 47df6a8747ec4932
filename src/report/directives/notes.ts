import { cleanNotes } from '../markdown/clean.js';
import { paragraph, say, strong } from '../markdown/nodes.js';
import { probeLabel } from '../words/labels.js';
import type { DirectiveKind } from './directive.js';
import { TemplateError } from './template-error.js';

/** `::notes{of=summary}` or `::notes{of=probes}`: what the authors wrote, cleaned. */
export const notes: DirectiveKind = {
  form: 'leafDirective',
  attributes: { of: 'required' },
  render: ({ of }, directive, scope) => {
    const { study, probes } = scope.results;
    switch (of) {
      case 'summary':
        return study.summary === null ? [] : cleanNotes(study.summary, 3, 'summary');
      case 'probes':
        return Object.entries(probes).flatMap(([name, probe]) =>
          probe.notes === null ? [] : [paragraph(strong(...say`${probeLabel(scope.results, name)}.`)), ...cleanNotes(probe.notes, 3, name)],
        );
      case undefined:
      default:
        throw new TemplateError(scope.page, directive, `there are no notes of "${of ?? ''}"; there are probes, summary`);
    }
  },
};
