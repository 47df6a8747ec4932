import { z } from 'zod';
import { interval, number, optionalNumber } from './primitives.js';

/** Where a gain comes from (methods, section 6). */
export const attribution = z.object({
  parameters: z.record(
    z.string(),
    z.object({
      /** Natural logarithms: total = response + degeneracy. null where an error does not exist. */
      shares: z.object({ total: number, response: number, degeneracy: number }).nullable(),
      /** Marginalised errors with one other parameter fixed. */
      oneFixed: z.array(z.object({ parameter: z.string(), baseline: optionalNumber, combination: optionalNumber })),
    }),
  ),
  /** Marginalised gain with the added responses set to zero. */
  throughNoise: z.record(z.string(), z.object({ gain: optionalNumber, relativeStandardError: optionalNumber, interval })),
  ties: z.array(
    z.object({
      suite: z.string(),
      /** Canonical correlations of the baseline's and the added entries' noise, largest first. */
      correlations: z.array(number),
      /** Mean share that independent data would show by chance. */
      chance: optionalNumber,
      /** Share of each baseline entry's variance that the added entries predict. */
      predicted: z.array(z.object({ probe: z.string(), block: z.string(), at: optionalNumber, share: number })),
    }),
  ),
  /** Marginalised error without a block over the error with it. */
  blocks: z.array(
    z.object({ probe: z.string(), block: z.string(), entries: number, errorRatio: z.record(z.string(), optionalNumber) }),
  ),
  /** From best to worst determined, in units of the baseline's marginalised errors. */
  directions: z.array(z.object({ error: number, components: z.record(z.string(), number) })).nullable(),
  /** sqrt(det C) of a pair in the baseline over that in the combination. */
  areas: z.array(z.object({ parameters: z.tuple([z.string(), z.string()]), gain: optionalNumber })),
});

/** Realisations that would bring a number to its goal; null where no number of that kind alone does. */
export const budget = z.object({
  parameter: z.string(),
  combination: z.string(),
  against: z.string().nullable(),
  /** The claim that is to be decided; null where the number is to be settled. */
  claim: z.string().nullable(),
  /** Standard error of the logarithm now, and where the goal is reached. */
  now: optionalNumber,
  goal: optionalNumber,
  reached: z.boolean(),
  derivatives: optionalNumber,
  fiducials: optionalNumber,
  both: z.object({ derivatives: number, fiducials: number }).nullable(),
  /** Derivative realisations for which the raw value is within the tolerance. */
  raw: optionalNumber,
});

export const derivativeTest = z.object({
  run: z.string(),
  parameter: z.string(),
  kind: z.enum(['step size', 'one-sided', 'curvature']),
  /** As a share of the response; for curvature over one sigma of the baseline. */
  share: number,
  standardError: number,
  realisations: number,
});

/** Distances of the fiducial realisations from their mean, one a suite, over the combination with the most entries. */
export const gaussianity = z.object({
  suite: z.string(),
  combination: z.string(),
  entries: number,
  realisations: number,
  /** Mardia's kurtosis in standard errors. */
  kurtosisScore: number,
  /** Realisations beyond the 99 % distance, and how many Gaussian data would have. */
  beyond: z.object({ share: number, count: number, expected: number }),
  /** Realisations so far out that Gaussian data would show one in twenty such studies. */
  outliers: z.array(z.object({ realisation: z.string(), square: number, tail: number })),
  entryShape: z.object({
    /** Largest of |g1|/sqrt(6/N) and of |g2|/sqrt(24/N), and which entry. */
    skewness: z.object({ entry: z.string(), value: number, score: number }),
    kurtosis: z.object({ entry: z.string(), value: number, score: number }),
    /** Entries beyond the score that chance allows one study in twenty. */
    beyond: number,
  }),
});
