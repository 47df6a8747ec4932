import type { PhrasingContent, RootContent } from 'mdast';
import { asGiven, compact, count, percent, significant } from '../../results/rounding.js';
import type { CombinationResult, Results } from '../../results/schema.js';
import { cite, displayMath, inlineMath, list, listed, paragraph, say, text } from '../markdown/nodes.js';
import { leastDerivatives } from '../tables/combinations.js';
import { parameterLabel, probeLabel } from './labels.js';
import type { CombinationSentenceMaker, SentenceMaker } from './sentence-maker.js';
import { prose } from './prose.js';
import { counted } from './values.js';

/** What goes into the data vector of a combination, and what is left out. */
export const methodsData: CombinationSentenceMaker = (results, name) => {
  const found = results.combinations[name]!;
  const probes = listed(found.probes.map((probe) => probeLabel(results, probe)));
  const cuts = found.cuts.map((cut) => cutWords(results, cut));
  const silent = results.parameters.filter((one) => !found.parameters.includes(one.name)).map((one) => parameterLabel(results, one.name));
  const without = silent.length === 0 ? [] : say` Left out, for want of any response or prior: ${listed(silent)}.`;
  return [
    paragraph(
      ...say`The data vector has ${inlineMath(`D = ${String(found.entries)}`)} entries from ${probes}; the matrices have ${inlineMath(`p = ${String(found.parameters.length)}`)} parameters: ${listed(found.parameters.map((one) => parameterLabel(results, one)))}.${without}`,
    ),
    cuts.length === 0 ? paragraph(text('Nothing is cut.')) : list(cuts),
  ];
};

function cutWords(results: Results, { probe, coordinate, min, max, blocks }: CombinationResult['cuts'][number]): PhrasingContent[] {
  const bounds = [...(min === null ? [] : [`at least ${asGiven(min)}`]), ...(max === null ? [] : [`at most ${asGiven(max)}`])].join(' and ');
  const range = coordinate === null || bounds === '' ? [] : [say`${coordinate} ${bounds}`];
  const kept = blocks === null ? [] : [say`the blocks ${blocks.join(', ')}`];
  return say`Of ${probeLabel(results, probe)} is kept: ${listed([...range, ...kept])}.`;
}

/** The precision matrix of each suite, with its numbers. */
export const methodsPrecision: CombinationSentenceMaker = (results, name) => {
  const found = results.combinations[name]!;
  return found.suites.flatMap((part): RootContent[] => {
    const suite = { type: 'inlineCode' as const, value: part.suite };
    const entries = found.suites.length === 1 ? '' : `, ${String(part.entries)} entries`;
    const head = say`Suite ${suite}${entries}: `;
    if (part.fiducialRealisations === null) {
      return [paragraph(...say`${head}the covariance was given without a number of realisations, so no factor is applied and its noise is not known.`), ...volumeWords(part.volumeScale)];
    }
    const n = part.fiducialRealisations;
    const formula = `h = \\frac{N_\\mathrm{s} - D - 2}{N_\\mathrm{s} - 1} = \\frac{${String(n)} - ${String(part.entries)} - 2}{${String(n)} - 1} = ${significant(part.precisionFactor, 5)}`;
    return [
      paragraph(
        ...say`${head}the covariance is that of ${inlineMath(`N_\\mathrm{s} = ${String(n)}`)} realisations, and its inverse is multiplied by${cite('hartlap')}${cite('kaufman')}`,
      ),
      displayMath(formula),
      paragraph(
        ...say`Errors are larger by ${inlineMath(`1/\\sqrt{h} = ${significant(1 / Math.sqrt(part.precisionFactor), 5)}`)} for it.${degreesWords(part.wishartDegrees)}`,
      ),
      ...volumeWords(part.volumeScale),
    ];
  });
};

function degreesWords(degrees: number | null): PhrasingContent[] {
  if (degrees === null) return [];
  const formula = `\\nu = N_\\mathrm{s} - 1 - D + p = ${String(degrees)}`;
  const share = percent(1 / Math.sqrt(2 * degrees));
  return say` For Gaussian data the covariance alone leaves each marginalised error without priors uncertain by ${inlineMath('1/\\sqrt{2\\nu}')}, with ${inlineMath(formula)}: ${share}.`;
}

function volumeWords(scale: number): RootContent[] {
  if (scale === 1) return [];
  return [
    paragraph(
      ...say`The Fisher matrix, priors aside, is multiplied by ${compact(scale)}, the volume asked for over the volume simulated: errors without priors change by a factor of ${compact(1 / Math.sqrt(scale))}. This takes edges, modes larger than a simulation, and correlations between patches to be of no account.`,
    ),
  ];
}

/** How the noise of the derivatives is taken out here. */
export const methodsFisher: CombinationSentenceMaker = (results, name) => {
  const found = results.combinations[name]!;
  const noise = noiseOf(results, found);
  if (noise === 'none') return [paragraph(text('Every derivative is exact: there is no noise to take out, and raw and corrected values are the same.'))];
  if (noise === 'not known') {
    return [paragraph(text('At least one derivative came without realisations. The noise of the derivatives cannot be measured: it is still in the raw numbers.'))];
  }
  const convergence = results.convergence[name];
  const blocks = convergence?.realisations.map((n, i) => `${counted(convergence.blocks[i]!, 'block')} of ${Number.isInteger(n) ? count(n) : `about ${count(Math.round(n))}`}`) ?? [];
  const shown =
    convergence === undefined
      ? []
      : say` The limit is fitted to the raw errors of ${listed(blocks)} realisations. The split estimate averages ${count(convergence.splits)} random splits; ${percent(convergence.splitShare)} of the realisations give the directions.${cite('coulton')}`;
  return [
    paragraph(
      ...say`Derivatives rest on ${inlineMath(`N_\\mathrm{d} = ${leastDerivatives(found.derivativeRealisations)}`)} realisations or more; their noise is measured and taken out of the Fisher matrix as above.${shown}`,
    ),
  ];
};

function noiseOf(results: Results, { suites, parameters, errors }: CombinationResult): 'none' | 'measured' | 'not known' {
  const kinds = suites.flatMap(({ runs }) => runs.flatMap((run) => parameters.map((name) => results.runs[run]?.derivatives[name]?.kind)));
  if (kinds.every((kind) => kind === 'exact' || kind === 'insensitive' || kind === undefined)) return 'none';
  return Object.values(errors).some(({ marginalised }) => marginalised.status === 'not assessable') ? 'not known' : 'measured';
}

/** What is known from elsewhere. */
export const methodsPriors: CombinationSentenceMaker = (results, name) => {
  const found = results.combinations[name]!;
  const given = results.parameters.filter((one) => one.prior !== null && found.parameters.includes(one.name));
  const items = given.map((one) => {
    const formula = `1/\\sigma^2 = 1/${latexNumber(one.prior!)}^2`;
    return say`${parameterLabel(results, one.name)}: ${inlineMath(formula)}`;
  });
  const diagonal = items.length === 0 ? say`No parameter has a Gaussian prior of its own.` : say`Added to the diagonal of the Fisher matrix: ${listed(items)}.`;
  const full = results.prior === null ? [] : say` The full prior Fisher matrix of the study is added as well (${{ type: 'inlineCode', value: 'tables/fisher.csv' }}).`;
  return [paragraph(...say`${diagonal}${full}`)];
};

function latexNumber(value: number): string {
  const [mantissa, exponent] = String(value).split('e');
  return exponent === undefined ? mantissa! : `(${mantissa!} \\times 10^{${String(Number(exponent))}})`;
}

/** What the inputs do not allow to say. */
export const methodsMissing: CombinationSentenceMaker = (results, name) => {
  const { notAssessable } = results.combinations[name]!;
  if (notAssessable.length === 0) return [paragraph(text('Everything that this report looks at could be assessed.'))];
  return [paragraph(text('Not assessable:')), list(notAssessable.map((sentence) => [text(prose(sentence))]))];
};

export const methodsLead: SentenceMaker = (results) => [
  paragraph(
    ...say`The headline answers: what would the error be if the covariance and the derivatives were known? Each combination has a part of its own below, with its own numbers. Intervals cover 68.3 % unless they say otherwise; sham gains are medians of ${count(results.rules.shamDraws)} draws.`,
  ),
];
