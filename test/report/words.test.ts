import type { RootContent } from 'mdast';
import { describe, expect, it } from 'vitest';
import type { ClaimResult, Estimate, Improvement, Results } from '../../src/results/schema.js';
import { writeMarkdown } from '../../src/report/markdown/write.js';
import { combinationSentenceMakers, sentenceMakers } from '../../src/report/words/all.js';
import { sectionStates } from '../../src/report/words/section-states.js';
import { changedResults, smallResults } from './report-results.js';

/** A sentence with ordinary spaces, so that the expected words can be typed. */
function said(blocks: readonly RootContent[]): string {
  return writeMarkdown({ type: 'root', children: [...blocks] }).replaceAll('\u202f', ' ').trim();
}

function sentence(name: string, results: Results): string {
  return said(sentenceMakers[name]!(results));
}

function about(name: string, results: Results, combination = 'joint'): string {
  return said(combinationSentenceMakers[name]!(results, combination));
}

const known: Estimate = {
  raw: 1.9,
  corrected: 1.35,
  standardError: 0.15,
  relativeStandardError: 0.11,
  parts: { derivatives: 0.1, covariance: 0.04, bias: 0.01 },
  interval: [1.21, 1.5],
  interval95: [1.08, 1.68],
  limit: 1.4,
  split: 1.3,
  status: 'unsettled',
  why: 'The 95 % uncertainty is 24 %, more than the tolerance of 10 %.',
  derivativeRealisationsNeeded: null,
};
const unknown: Partial<Estimate> = {
  corrected: null,
  standardError: null,
  relativeStandardError: null,
  parts: { derivatives: null, covariance: null, bias: null },
  interval: null,
  interval95: null,
  limit: null,
  split: null,
  status: 'undetermined',
  why: 'Too few derivative realisations to tell.',
  derivativeRealisationsNeeded: 400,
};

/** The small study with one gain on p0 replaced. */
function withGain(change: Partial<Improvement>): Results {
  return changedResults((results) => {
    Object.assign(results.improvements.joint!.p0!.marginalised, known, { sham: 1.4, shamInterval: [1.35, 1.45], shamWhy: null }, change);
    delete results.improvements.joint!.p1;
  });
}

/** The small study with one claim. */
function withClaim(change: Partial<ClaimResult>): Results {
  return changedResults((results) => {
    const { raw, interval, interval95, relativeStandardError, why } = known;
    results.claims = [{ ...results.claims[0]!, text: 'It gains.', raw, estimate: known.corrected, interval, interval95, relativeStandardError, why, ...change }];
  });
}

describe('what an addition gains', () => {
  it.each<[string, Partial<Improvement>, string]>([
    [
      'unsettled',
      {},
      '- `p0`: raw gain 1.90; noise in the added derivatives alone would have shown 1.40. Corrected: 1.35 (1.21 to 1.50 at 68 %). There is a gain. Its size is not settled. The 95 % uncertainty is 24 %, more than the tolerance of 10 %.',
    ],
    [
      'not shown to be there',
      { interval95: [0.9, 1.7], status: 'settled' },
      '- `p0`: raw gain 1.90; noise in the added derivatives alone would have shown 1.40. Corrected: 1.35 (1.21 to 1.50 at 68 %). A gain is not shown: 1 is within the 95 % interval. Its size is settled.',
    ],
    [
      'without a value',
      unknown,
      '- `p0`: raw gain 1.9; noise in the added derivatives alone would have shown 1.4. Corrected: cannot tell. Nothing can be said about a gain. Too few derivative realisations to tell.',
    ],
    [
      'without realisations',
      { ...unknown, status: 'not assessable', why: 'No realisations.', sham: null, shamInterval: null, shamWhy: 'The derivatives came without realisations.' },
      '- `p0`: raw gain 1.9; what noise alone would show is not known (The derivatives came without realisations). Corrected: not assessable. Nothing can be said about a gain. No realisations.',
    ],
  ])('%s', (_, change, words) => {
    expect(about('gains-of', withGain(change))).toBe(words);
  });
});

describe('the verdict on a claim', () => {
  it.each<[string, Partial<ClaimResult>, string]>([
    ['supported', { verdict: 'supported', threshold: 1.05 }, '- **Supported.** “It gains.” Raw gain 1.90, corrected 1.35 (1.21 to 1.50 at 68 %): above the claimed 1.05, at 95 % confidence.'],
    ['contradicted', { verdict: 'contradicted', threshold: 1.9 }, '- **Contradicted.** “It gains.” Raw gain 1.90, corrected 1.35 (1.21 to 1.50 at 68 %): below the claimed 1.9, at 95 % confidence.'],
    ['contradicted, at most', { verdict: 'contradicted', test: 'at most', threshold: 1 }, '- **Contradicted.** “It gains.” Raw gain 1.90, corrected 1.35 (1.21 to 1.50 at 68 %): above the claimed 1, at 95 % confidence.'],
    ['supported, between', { verdict: 'supported', test: 'between', threshold: [1, 2] }, '- **Supported.** “It gains.” Raw gain 1.90, corrected 1.35 (1.21 to 1.50 at 68 %): within the claimed 1 to 2, at 95 % confidence.'],
    ['too close to call', { verdict: 'too close to call', threshold: 1.3 }, '- **Too close to call.** “It gains.” Raw gain 1.90, corrected 1.35 (1.21 to 1.50 at 68 %): well known, but too near the claimed 1.3 to say which side it is on.'],
    ['not settled', { verdict: 'not settled', threshold: 1.3 }, '- **Not settled.** “It gains.” Raw gain 1.90, corrected 1.35 (1.21 to 1.50 at 68 %): cannot tell yet. The 95 % uncertainty is 24 %, more than the tolerance of 10 %. More simulations can decide.'],
    ['not settled, no value', { verdict: 'not settled', estimate: null, relativeStandardError: null, interval: null, why: 'Too few.' }, '- **Not settled.** “It gains.” Raw gain 1.9, corrected: cannot tell. Too few.'],
  ])('%s', (_, change, words) => {
    expect(sentence('claims', withClaim(change))).toBe(words);
  });

  it('comes with what would decide it, where the budget knows', () => {
    const withBudget = (budget: Partial<NonNullable<Results['budget']>[number]>): string => {
      const results = withClaim({ verdict: 'too close to call' });
      const blank = { against: 'base', now: 0.1, goal: 0.05, reached: false, derivatives: null, fiducials: null, both: null, raw: null };
      results.budget = [{ parameter: 'p0', combination: 'joint', claim: results.claims[0]!.id, ...blank, ...budget }];
      return sentence('claims', results);
    };
    expect(withBudget({ derivatives: 715 })).toContain('Some 720 derivative realisations would decide it, if the value stays.');
    expect(withBudget({ fiducials: 2345 })).toContain('Some 2300 fiducial realisations would decide it, if the value stays.');
    expect(withBudget({ both: { derivatives: 15846, fiducials: 21671 } })).toContain('Some 16 000 derivative and 22 000 fiducial realisations would decide it');
    expect(withBudget({})).toMatch(/which side it is on\.$/);
  });

  it('is counted in the first line, whatever there is', () => {
    expect(sentence('glance', withClaim({ verdict: 'supported' }))).toBe('**The one claim is supported, once the noise in the derivatives is taken out.**');
    const two = changedResults((results) => {
      results.claims = results.claims.map((claim) => ({ ...claim, verdict: 'contradicted' }));
    });
    expect(sentence('glance', two)).toBe('**Of 2 claims, all are contradicted, once the noise in the derivatives is taken out.**');
    expect(sentence('glance', changedResults((results) => (results.claims = [])))).toMatch(/^\*\*The study states no claims\. Of 2 gains on target parameters, /);
  });
});

describe('convergence', () => {
  it('says that nothing is open where nothing is', () => {
    const results = changedResults((changed) => {
      for (const { errors } of Object.values(changed.combinations)) for (const both of Object.values(errors)) both.marginalised.status = 'settled';
      for (const gains of Object.values(changed.improvements)) for (const both of Object.values(gains)) both.marginalised.status = 'correctable';
    });
    expect(sentence('convergence', results)).toBe(
      'Of 4 errors and 2 gains on target parameters, 4 are settled and 2 are correctable. Each may be quoted, in its corrected form.',
    );
    expect(sectionStates.convergence!(results)).toBe('yes');
  });

  it('names what may not be quoted, why, and what would help', () => {
    const words = sentence('convergence', withGain(unknown));
    expect(words).toContain('- the gain on `p0` from joint. Too few derivative realisations to tell.');
    expect(words).toContain('At least 400 derivative realisations are needed before each of them has a value.');
  });
});

describe('errors', () => {
  it('names the smallest that can be quoted, beside prior and reference, in its unit', () => {
    const results = changedResults((changed) => {
      Object.assign(changed.parameters[0]!, { unit: 'km/s/Mpc', prior: 5, reference: { label: 'Distances', error: 2 } });
      Object.assign(changed.combinations.base!.errors.p0!.marginalised, known, { status: 'settled', corrected: 3, standardError: 0.2, interval: [2.8, 3.2] });
      Object.assign(changed.combinations.joint!.errors.p0!.marginalised, known, { status: 'unsettled', corrected: 1 });
    });
    expect(sentence('errors', results)).toContain('- `p0`: 3.00 (2.80 to 3.20 at 68 %) km/s/Mpc from base (its prior alone is 5; Distances has 2).');
  });

  it('says cannot tell where none is settled', () => {
    const results = changedResults((changed) => {
      for (const { errors } of Object.values(changed.combinations)) errors.p0!.marginalised.status = 'unsettled';
    });
    expect(sentence('errors', results)).toContain('- `p0`: cannot tell; no combination gives a settled error.');
  });
});

describe('checks', () => {
  it.each([
    [['error', 'ok'], '1 error, no warnings, no notes; 1 check passed. Do not trust the numbers before the errors are mended.'],
    [['warning', 'warning'], 'No errors, 2 warnings, no notes; no checks passed. Read the warnings before quoting a number.'],
    [['note'], 'No errors, no warnings, 1 note; no checks passed. Nothing speaks against the data; the notes say what to bear in mind.'],
    [['ok', 'ok'], 'No errors, no warnings, no notes; 2 checks passed. Nothing speaks against the data.'],
  ] as const)('of levels %j', (levels, words) => {
    const results = changedResults((changed) => {
      changed.checks = levels.map((level, i) => ({ id: String(i), level, message: 'x', where: 'y' }));
    });
    expect(sentence('checks', results)).toBe(words);
  });
});

describe('methods of a combination', () => {
  it('put its own numbers into the formula', () => {
    // h = (120 - 11 - 2)/119 and nu = 120 - 1 - 11 + 2: the definitions, by hand.
    const words = about('methods-precision', smallResults());
    expect(words).toContain('= \\frac{120 - 11 - 2}{120 - 1} = 0.89916');
    expect(words).toContain('$\\nu = N_\\mathrm{s} - 1 - D + p = 110$: 6.7 %.');
  });

  it('say what a scaled volume takes for granted', () => {
    const results = changedResults((changed) => {
      changed.combinations.joint!.suites[0]!.volumeScale = 10;
    });
    expect(about('methods-precision', results)).toContain('is multiplied by 10, the volume asked for over the volume simulated: errors without priors change by a factor of 0.3162.');
  });

  it('name cuts, priors and what could not be assessed', () => {
    const results = changedResults((changed) => {
      changed.combinations.joint!.cuts = [{ probe: 'added', coordinate: 'x', min: 2, max: null, blocks: ['only'] }];
      changed.parameters[0]!.prior = 1e-9;
      changed.combinations.joint!.notAssessable = ['The noise of run a is not known.'];
    });
    expect(about('methods-data', results)).toContain('- Of added is kept: x at least 2 and the blocks only.');
    expect(about('methods-priors', results)).toContain('`p0`: $1/\\sigma^2 = 1/(1 \\times 10^{-9})^2$');
    expect(about('methods-missing', results)).toBe('Not assessable:\n\n- The noise of run a is not known.');
  });

  it('say whose noise is taken out, and whose cannot be', () => {
    expect(about('methods-fisher', smallResults())).toContain('Derivatives rest on $N_\\mathrm{d} = 60$ realisations or more; their noise is measured and taken out');
    const exact = changedResults((results) => {
      for (const derivative of Object.values(results.runs.run!.derivatives)) derivative.kind = 'exact';
    });
    expect(about('methods-fisher', exact)).toBe('Every derivative is exact: there is no noise to take out, and raw and corrected values are the same.');
    const without = changedResults((results) => {
      for (const { marginalised } of Object.values(results.combinations.joint!.errors)) marginalised.status = 'not assessable';
    });
    expect(about('methods-fisher', without)).toContain('cannot be measured: it is still in the raw numbers.');
  });

  it('say so where the covariance is given', () => {
    const results = changedResults((changed) => {
      Object.assign(changed.combinations.joint!.suites[0]!, { fiducialRealisations: null, wishartDegrees: null, precisionFactor: 1 });
    });
    expect(about('methods-precision', results)).toBe('Suite `box`: the covariance was given without a number of realisations, so no factor is applied and its noise is not known.');
  });
});
