import type { Improvement, Results } from '../results/schema.js';
import type { Scan, Study } from '../study/study.js';
import type { Assessed } from './assess.js';
import { assess, ratioOf } from './assess.js';
import { beliefResults } from './belief.js';
import { buildParts } from './build-parts.js';
import { runChecks } from './checks/all.js';
import { testClaims, verdictRules } from './claims.js';
import { combinationResult } from './combination-result.js';
import type { Combined } from './combined.js';
import { combine, quantityOf } from './combined.js';
import { convergenceResult } from './convergence-result.js';
import { scanOf } from './cuts.js';
import { dataCorrelation } from './data-correlation.js';
import { scanResult } from './scan.js';
import type { Sham } from './sham.js';
import { shamDraws, shamGains } from './sham.js';
import { statusRules } from './status.js';
import type { Suite } from './suite.js';
import { suitesOf } from './suite.js';
import { ellipseDeltaChiSquare } from './thresholds.js';
import { refuseTooFew } from './too-few.js';
import { derivativeResult, vectorResults } from './vectors.js';

/**
 * The whole forecast of a study: every number of the results, from loaded inputs. Pure but for reading rows; throws
 * InputError where the data cannot carry a forecast at all (too few realisations, a constant column).
 */
export function forecast(study: Study, generator: Results['generator']): Results {
  const scan = scanOf(study);
  const suites = suitesOf(study);
  refuseTooFew(study, suites);
  const combined = study.combinations.map((combination) =>
    combine(study, combination, buildParts(study, combination, suites, scan)),
  );
  const assessed = new Map(combined.map((one) => [one.combination.name, assess(study, one)]));
  const combinations = mapped(assessed, (one) => combinationResult(study, one));
  const gains = improvements(study, assessed);
  const claims = testClaims(study, assessed);
  const belief = beliefResults(study, suites, assessed, { combinations, improvements: gains, claims });
  return {
    format: 1,
    generator,
    ...describeStudy(study, suites),
    combinations,
    improvements: gains,
    scan: scans(study, scan, assessed),
    convergence: mapped(assessed, (one) => convergenceResult(study, one, assessed.get(study.baseline)!)),
    vectors: vectorResults(study, suites),
    dataCorrelation: present(Object.fromEntries(suites.map((suite) => [suite.name, dataCorrelation(suite)]))),
    ...belief,
    claims,
    checks: runChecks({ study, suites, combined, measured: belief }),
    rules: {
      statuses: statusRules.map((rule) => ({ ...rule })),
      verdicts: verdictRules.map((rule) => ({ ...rule })),
      shamDraws,
      ellipses: ellipseDeltaChiSquare.map((ellipse) => ({ ...ellipse })),
    },
  };
}

function present<T>(record: Readonly<Record<string, T | null>>): Record<string, T> {
  const kept: Record<string, T> = {};
  for (const [name, value] of Object.entries(record)) {
    if (value !== null) kept[name] = value;
  }
  return kept;
}

function mapped<T>(assessed: ReadonlyMap<string, Assessed>, make: (one: Assessed) => T | null): Record<string, T> {
  return present(Object.fromEntries([...assessed].map(([name, one]) => [name, make(one)])));
}

function describeStudy(
  study: Study,
  suites: readonly Suite[],
): Pick<Results, 'study' | 'inputs' | 'parameters' | 'prior' | 'probes' | 'runs'> {
  const { title, digest, summary, authors, licence, date, baseline, tolerance, prior } = study;
  return {
    study: { title, digest, summary, authors: authors.map((author) => ({ ...author })), licence, date, baseline, tolerance },
    inputs: study.inputs.map((input) => ({ ...input })),
    parameters: study.parameters.map((parameter) => ({ ...parameter, reference: parameter.reference === null ? null : { ...parameter.reference } })),
    prior:
      prior === null
        ? null
        : Array.from({ length: prior.rows }, (_, i) => Array.from(prior.data.subarray(i * prior.columns, (i + 1) * prior.columns))),
    probes: Object.fromEntries(study.probes.map(({ name, label, notes }) => [name, { label, notes }])),
    runs: Object.fromEntries(suites.flatMap((suite) => suite.runs.map((run) => [run.name, describeRun(study, suite, run)]))),
  };
}

function describeRun(study: Study, suite: Suite, run: Suite['runs'][number]): Results['runs'][string] {
  const derivatives = suite.derivatives.get(run.name)!;
  return {
    kind: run.data.kind,
    suite: suite.name,
    entries: run.columns.length,
    fiducialRealisations: run.data.kind === 'ensemble' ? run.data.fiducial.rows.rows : run.data.realisations,
    volume: run.volume,
    volumeUnit: run.volumeUnit,
    provenance: run.provenance.map(([key, value]) => [key, value]),
    derivatives: Object.fromEntries(study.parameters.map(({ name }) => [name, derivativeResult(derivatives.get(name)!)])),
  };
}

function improvements(study: Study, assessed: ReadonlyMap<string, Assessed>): Results['improvements'] {
  const baseline = assessed.get(study.baseline)!;
  const others = [...assessed].filter(([name]) => name !== study.baseline);
  return Object.fromEntries(
    others.map(([name, one]) => {
      const shams = shamGains(one.combined, `${study.digest} ${name}`);
      const improvement = (parameter: number, kind: 'marginalised' | 'fixed'): Improvement => ({
        ...ratioOf(study, baseline, one, parameter, kind),
        ...shamOf(one.combined, shams, quantityOf(one.combined, parameter, kind)),
      });
      return [
        name,
        Object.fromEntries(
          study.parameters.map((parameter, a) => [
            parameter.name,
            { marginalised: improvement(a, 'marginalised'), fixed: improvement(a, 'fixed') },
          ]),
        ),
      ];
    }),
  );
}

function shamOf(
  combined: Combined,
  shams: readonly (Sham | null)[],
  quantity: number | null,
): Pick<Improvement, 'sham' | 'shamInterval' | 'shamWhy'> {
  const sham = quantity === null ? null : shams[quantity];
  if (!combined.assessable) {
    return { sham: null, shamInterval: null, shamWhy: 'The derivatives came without realisations: their noise is not known.' };
  }
  if (sham === null || sham === undefined) {
    return {
      sham: null,
      shamInterval: null,
      shamWhy: 'Without the added entries there is no error to compare with: the combination rests on them alone.',
    };
  }
  return { sham: sham.median, shamInterval: [sham.low, sham.high], shamWhy: null };
}

function scans(study: Study, scan: Scan | null, assessed: ReadonlyMap<string, Assessed>): Results['scan'] {
  if (scan === null) return {};
  const baseline = assessed.get(study.baseline)!;
  return mapped(assessed, (one) => scanResult(study, scan, one, baseline));
}
