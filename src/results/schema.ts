import { z } from 'zod';
import { attribution, budget, derivativeTest, gaussianity } from './belief-schema.js';
import { dataCorrelation, derivative, vector } from './data-schema.js';
import { interval, matrix, number, optionalNumber, perParameter } from './primitives.js';

/**
 * The waist of the program: every number that is shown anywhere, as plain data. Left of it numbers are made, right of
 * it they are shown. A number that could not be determined is null, and the `status` and `why` beside it say so.
 */


export const statusSchema = z.enum(['settled', 'correctable', 'unsettled', 'undetermined', 'not assessable']);
export const verdictSchema = z.enum(['supported', 'contradicted', 'too close to call', 'not settled', 'not assessable']);
const levelSchema = z.enum(['ok', 'note', 'warning', 'error']);

/**
 * Parts of the relative standard error: the noise of the derivatives, the noise of the covariance, and the bias that the precision
 * factor leaves in the logarithm of an error (signed; positive says that the value comes out too large).
 */
const parts = z.object({ derivatives: optionalNumber, covariance: optionalNumber, bias: optionalNumber });

/** An estimate of an error or of a ratio of errors. Intervals are exp(log corrected -+ z SE). */
const estimateShape = {
  /** From the plug-in Fisher matrix. */
  raw: optionalNumber,
  /** From the Fisher matrix with the noise of the derivatives removed. */
  corrected: optionalNumber,
  /** corrected times relativeStandardError: same unit as corrected. */
  standardError: optionalNumber,
  /** Standard error of the natural logarithm: all parts in quadrature. */
  relativeStandardError: optionalNumber,
  parts,
  /** 68.3 %. */
  interval,
  /** 95 %. */
  interval95: interval,
  /** Raw values fitted against the number of realisations and taken to infinity. */
  limit: optionalNumber,
  /** Geometric mean of the raw and the split Fisher matrix. */
  split: optionalNumber,
  status: statusSchema,
  /** The reason for the status, a sentence. */
  why: z.string(),
  /** Least number of derivative realisations that could settle an undetermined value; null elsewhere. */
  derivativeRealisationsNeeded: optionalNumber,
};

const estimate = z.object(estimateShape);
const improvement = z.object({
  ...estimateShape,
  /** Median of the ratio that the noise of the added derivatives alone would report; 1 says none. */
  sham: optionalNumber,
  /** 16th to 84th percentile of it. */
  shamInterval: interval,
  /** Why there is none; null when there is one. */
  shamWhy: z.string().nullable(),
});


const suitePart = z.object({
  suite: z.string(),
  runs: z.array(z.string()),
  entries: number,
  /** Null where the covariance is not an estimate from realisations. */
  fiducialRealisations: optionalNumber,
  /** h = (N_s - D - 2)/(N_s - 1), or 1. */
  precisionFactor: number,
  /** Volume asked for over volume simulated. */
  volumeScale: number,
  /** nu = N_s - 1 - D + p. */
  wishartDegrees: optionalNumber,
  /** Printed beside, never multiplied into, a result: factors on variances. */
  factors: z
    .object({
      taylorJoachimi: number,
      dodelsonSchneider: number,
      percival2014: number,
      /** The variance factor of the frequentist-matching prior. */
      percival2022: optionalNumber,
    })
    .nullable(),
});

const cut = z.object({
  probe: z.string(),
  coordinate: z.string().nullable(),
  min: optionalNumber,
  max: optionalNumber,
  blocks: z.array(z.string()).nullable(),
});

const combination = z.object({
  label: z.string(),
  probes: z.array(z.string()),
  /** D, after cuts. */
  entries: number,
  /** The smallest over suites. */
  fiducialRealisations: optionalNumber,
  /** The smallest over runs; null where the derivative is exact or the number is not known. */
  derivativeRealisations: z.record(z.string(), optionalNumber),
  /** Of the only suite; null when there are several (see suites). */
  precisionFactor: optionalNumber,
  suites: z.array(suitePart),
  cuts: z.array(cut),
  volume: optionalNumber,
  /** The order of the matrices. Parameters without response or prior here are left out. */
  parameters: z.array(z.string()),
  /** Without priors; `prior` is what is added. corrected is null where it cannot be known. */
  fisher: z.object({ raw: matrix, corrected: matrix.nullable(), prior: matrix }),
  /** Inverse of Fisher plus prior; null where it does not exist. */
  covariance: z.object({ raw: matrix.nullable(), corrected: matrix.nullable() }),
  correlation: z.object({ raw: matrix.nullable(), corrected: matrix.nullable() }),
  /** Of the Fisher matrix plus prior, scaled to unit diagonal. */
  condition: z.object({ raw: optionalNumber, corrected: optionalNumber }),
  errors: perParameter(estimate),
  /** sqrt(1 - 1/(F_aa (F^-1)_aa)) of the corrected matrix. */
  globalCorrelation: z.record(z.string(), optionalNumber),
  /** What could not be assessed, sentences. */
  notAssessable: z.array(z.string()),
});

const scanValues = z.object({
  raw: z.array(optionalNumber),
  corrected: z.array(optionalNumber),
  relativeStandardError: z.array(optionalNumber),
  status: z.array(statusSchema),
});

const scan = z.object({
  coordinate: z.string(),
  unit: z.string(),
  keep: z.enum(['below', 'above']),
  at: z.array(number),
  /** D at each cut. */
  entries: z.array(number),
  errors: perParameter(scanValues),
  /** Error of the baseline at the same cut over the error here; null for the baseline itself. */
  improvements: perParameter(scanValues).nullable(),
});

const convergenceValues = z.object({
  /** Mean over the disjoint blocks of each size, of sigma; null where a block has none. */
  raw: z.array(optionalNumber),
  rawScatter: z.array(optionalNumber),
  corrected: z.array(optionalNumber),
  correctedScatter: z.array(optionalNumber),
  /** Blocks whose corrected value exists, of `blocks`. */
  determined: z.array(number),
  /** 1/sigma^2(N) = (1 + b/N)/limit^2. */
  fit: z.object({ limit: number, b: number }).nullable(),
});

const convergence = z.object({
  /** Realisations in a block; the last is all of them. */
  realisations: z.array(number),
  /** Number of disjoint blocks of that size. */
  blocks: z.array(number),
  /** Share of realisations that give the directions in the split estimate, and the number of random splits. */
  splitShare: number,
  splits: number,
  errors: perParameter(convergenceValues),
  /** The same of the gain over the baseline, from the same blocks; null for the baseline itself. */
  improvements: perParameter(convergenceValues).nullable().optional(),
});

const claim = z.object({
  id: z.string(),
  text: z.string(),
  parameter: z.string(),
  combination: z.string(),
  against: z.string().nullable(),
  error: z.enum(['marginalised', 'fixed']),
  quantity: z.enum(['gain', 'size']),
  test: z.enum(['at least', 'at most', 'between']),
  threshold: z.union([number, z.tuple([number, number])]),
  verdict: verdictSchema,
  raw: optionalNumber,
  estimate: optionalNumber,
  relativeStandardError: optionalNumber,
  parts,
  interval,
  interval95: interval,
  status: statusSchema,
  why: z.string(),
});

const check = z.object({ id: z.string(), level: levelSchema, message: z.string(), where: z.string() });

export const resultsSchema = z.object({
  format: z.literal(1),
  generator: z.object({ name: z.string(), version: z.string() }),
  study: z.object({
    title: z.string(),
    digest: z.string(),
    /** Markdown as the user wrote it: sanitise before showing. */
    summary: z.string().nullable(),
    authors: z.array(z.object({ name: z.string(), orcid: z.string().nullable(), affiliation: z.string().nullable() })),
    licence: z.string().nullable(),
    date: z.string().nullable(),
    baseline: z.string(),
    tolerance: number,
  }),
  inputs: z.array(z.object({ path: z.string(), sha256: z.string(), bytes: number })),
  parameters: z.array(
    z.object({
      name: z.string(),
      label: z.string(),
      unit: z.string(),
      fiducial: number,
      role: z.enum(['target', 'nuisance']),
      prior: optionalNumber,
      reference: z.object({ label: z.string(), error: number }).nullable(),
    }),
  ),
  /** Full prior Fisher matrix of the study, in the order of parameters. */
  prior: matrix.nullable(),
  probes: z.record(z.string(), z.object({ label: z.string(), notes: z.string().nullable() })),
  runs: z.record(
    z.string(),
    z.object({
      kind: z.enum(['ensemble', 'moments']),
      suite: z.string(),
      entries: number,
      fiducialRealisations: optionalNumber,
      volume: optionalNumber,
      volumeUnit: z.string(),
      provenance: z.array(z.tuple([z.string(), z.string()])),
      derivatives: z.record(z.string(), derivative),
    }),
  ),
  combinations: z.record(z.string(), combination),
  /** Every combination but the baseline, against the baseline. */
  improvements: z.record(z.string(), perParameter(improvement)),
  /** Combinations with entries along the scan's coordinate. */
  scan: z.record(z.string(), scan),
  convergence: z.record(z.string(), convergence),
  vectors: z.record(z.string(), z.record(z.string(), vector)),
  /** One a suite. */
  dataCorrelation: z.record(z.string(), dataCorrelation),
  /** Every combination but the baseline. */
  attribution: z.record(z.string(), attribution).optional(),
  /** Marginalised errors and gains of target parameters, then claims. */
  budget: z.array(budget).optional(),
  derivativeTests: z.array(derivativeTest).optional(),
  gaussianity: z.array(gaussianity).optional(),
  /** Raw errors against the number of fiducial realisations, each with its own precision factor. */
  covarianceConvergence: z
    .record(z.string(), z.object({ realisations: z.array(number), errors: perParameter(z.array(optionalNumber)) }))
    .optional(),
  /** Corrected errors without the smallest eigen-directions of the data's correlation matrix. */
  smallestDirections: z
    .record(
      z.string(),
      z.object({ condition: number, removed: z.array(number), errors: perParameter(z.array(optionalNumber)) }),
    )
    .optional(),
  claims: z.array(claim),
  checks: z.array(check),
  /** The rules in force, for the report to print. */
  rules: z.object({
    statuses: z.array(z.object({ status: statusSchema, rule: z.string() })),
    verdicts: z.array(z.object({ verdict: verdictSchema, rule: z.string() })),
    /** Draws behind each sham gain. */
    shamDraws: number,
    /** delta chi^2 of the 1- and 2-sigma ellipses of two parameters. */
    ellipses: z.array(z.object({ sigmas: number, deltaChiSquare: number })),
  }),
});

export type Results = z.infer<typeof resultsSchema>;
export type Status = z.infer<typeof statusSchema>;
export type Verdict = z.infer<typeof verdictSchema>;
export type Estimate = z.infer<typeof estimate>;
export type Improvement = z.infer<typeof improvement>;
export type CombinationResult = z.infer<typeof combination>;
export type ScanResult = z.infer<typeof scan>;
export type ConvergenceResult = z.infer<typeof convergence>;
export type VectorResult = z.infer<typeof vector>;
export type DerivativeResult = z.infer<typeof derivative>;
export type DataCorrelation = z.infer<typeof dataCorrelation>;
export type ClaimResult = z.infer<typeof claim>;
export type CheckResult = z.infer<typeof check>;
