import type { CheckResult, Results } from '../../results/schema.js';
import { z95TwoSided } from '../thresholds.js';
import type { Check } from './check.js';

type Gaussianity = NonNullable<Results['gaussianity']>[number];

/** Most outlying realisations that are named. */
const named = 5;

/** Whether the fiducial realisations look Gaussian together (distances, tails, outliers) and one entry at a time. */
export const gaussianity: Check = ({ measured }) =>
  (measured.gaussianity ?? []).flatMap((one) => [distances(one), shapes(one)]);

function distances(one: Gaussianity): CheckResult {
  const { suite, combination, entries, realisations, kurtosisScore, beyond, outliers } = one;
  const scatter = Math.sqrt(beyond.expected * (1 - beyond.share));
  const heavy = kurtosisScore > z95TwoSided || beyond.count > beyond.expected + 3 * scatter || outliers.length > 0;
  const who = outliers.slice(0, named).map(({ realisation }) => realisation);
  const more = outliers.length > named ? ` and ${String(outliers.length - named)} more` : '';
  const far = outliers.length === 0 ? 'None is an outlier' : `Outlying: ${who.join(', ')}${more}`;
  const facts = `${String(beyond.count)} of ${String(realisations)} realisations of ${String(entries)} entries lie beyond the ${String(100 * (1 - beyond.share))} % distance of Gaussian data, where ${beyond.expected.toFixed(0)} are expected. ${far} (Gaussian data would show one in one study of twenty). The multivariate kurtosis is ${Math.abs(kurtosisScore).toFixed(1)} standard errors ${kurtosisScore < 0 ? 'below' : 'above'} a Gaussian law.`;
  const meaning = heavy
    ? ' The intervals use the measured kurtosis; the Fisher matrix itself, and the precision factor, assume a Gaussian likelihood.'
    : '';
  return {
    id: `distances-${suite}`,
    level: heavy ? 'warning' : 'ok',
    message: facts + meaning,
    where: `suite ${suite}, combination ${combination}`,
  };
}

function shapes({ suite, combination, entries, entryShape }: Gaussianity): CheckResult {
  const { skewness, kurtosis, beyond } = entryShape;
  return {
    id: `entry-shapes-${suite}`,
    level: beyond > 0 ? 'note' : 'ok',
    message: `${String(beyond)} of ${String(entries)} entries have a skewness or kurtosis that chance allows in one study of twenty. The largest skewness is ${skewness.value.toFixed(2)} (${skewness.entry}), the largest excess kurtosis ${kurtosis.value.toFixed(2)} (${kurtosis.entry}).`,
    where: `suite ${suite}, combination ${combination}`,
  };
}
