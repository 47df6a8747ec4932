import { count } from '../../results/rounding.js';
import { paragraph, say } from '../markdown/nodes.js';
import type { SentenceMaker } from './sentence-maker.js';
import { counted } from './values.js';

export const provenanceLead: SentenceMaker = ({ inputs, study, generator }) => {
  const bytes = inputs.reduce((sum, one) => sum + one.bytes, 0);
  return [
    paragraph(
      ...say`Everything here was made by ${generator.name} ${generator.version} from ${counted(inputs.length, 'file')} of ${count(bytes)} bytes in all, and from nothing else: the same files and version give the same report, byte for byte. The digest of the study, which stands for all of them, is ${{ type: 'inlineCode', value: study.digest }}.`,
    ),
  ];
};

/** Who, when, under which terms. */
export const byline: SentenceMaker = ({ study }) => {
  const people = study.authors.map(({ name, affiliation }) => (affiliation === null ? name : `${name} (${affiliation})`));
  const parts = [...people, ...(study.date === null ? [] : [study.date])];
  return parts.length === 0 ? [] : [paragraph(...say`${parts.join(', ')}`)];
};

export const colophon: SentenceMaker = ({ generator, study }) => [
  paragraph(
    ...say`Made by ${generator.name} ${generator.version}. A Fisher forecast is a bound under its assumptions: a Gaussian likelihood, a covariance that does not change with the parameters, responses that are straight lines. The same numbers, for programs, are in ${{ type: 'inlineCode', value: 'results.json' }}.${study.licence === null ? '' : ` Data of the study: ${study.licence}.`}`,
  ),
];
