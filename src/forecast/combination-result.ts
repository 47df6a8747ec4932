import type { CombinationResult } from '../results/schema.js';
import type { Small } from '../linalg/small.js';
import type { Combination, Study } from '../study/study.js';
import type { Assessed } from './assess.js';
import { errorOf } from './assess.js';
import type { Combined } from './combined.js';
import { quantityOf, whole } from './combined.js';
import { inflationFactors } from './inflation.js';
import type { Solved } from './log-errors.js';
import type { Part } from './part.js';
import { precisionFactor, wishartDegrees } from './precision.js';

/** Everything that the results say about one combination by itself. */
export function combinationResult(study: Study, assessed: Assessed): CombinationResult {
  const { combined } = assessed;
  const { combination, parts, active, prior } = combined;
  const at = whole(combined);
  const only = parts.length === 1 ? parts[0] : undefined;
  const counts = parts.flatMap(({ covariance }) => (covariance.realisations === null ? [] : [covariance.realisations]));
  return {
    label: combination.label,
    probes: [...combination.probes],
    entries: at.entries,
    fiducialRealisations: counts.length === 0 ? null : Math.min(...counts),
    derivativeRealisations: Object.fromEntries(
      study.parameters.map(({ name }, a) => [name, derivativeRealisations(parts, name, a)]),
    ),
    precisionFactor: only === undefined ? null : precisionFactor(only.covariance.realisations, only.entries.length),
    suites: parts.map((part) => suiteResult(part, active.length)),
    cuts: cutsOf(combination),
    volume: combination.volume,
    parameters: active.map((a) => study.parameters[a]!.name),
    fisher: {
      raw: rowsOf(at.fisher.raw),
      corrected: at.fisher.corrected === null ? null : rowsOf(at.fisher.corrected),
      prior: rowsOf(prior),
    },
    covariance: { raw: inverseRows(at.raw), corrected: inverseRows(at.corrected) },
    correlation: { raw: correlationRows(at.raw), corrected: correlationRows(at.corrected) },
    condition: { raw: conditionOf(at.raw), corrected: conditionOf(at.corrected) },
    errors: Object.fromEntries(
      study.parameters.map(({ name }, a) => [
        name,
        { marginalised: errorOf(study, assessed, a, 'marginalised'), fixed: errorOf(study, assessed, a, 'fixed') },
      ]),
    ),
    globalCorrelation: Object.fromEntries(study.parameters.map(({ name }, a) => [name, globalCorrelation(combined, a)])),
    notAssessable: notAssessable(study, combined),
  };
}

function derivativeRealisations(parts: readonly Part[], name: string, parameter: number): number | null {
  const counts = parts.flatMap((part) =>
    part.strands.filter((strand) => strand.parameter === parameter).map((strand) => strand.seeds.length),
  );
  const stated = parts.flatMap((part) =>
    part.runs.flatMap((run) => {
      const summary = part.suite.derivatives.get(run.name)!.get(name)!.summary;
      return summary?.realisations === null || summary === null ? [] : [summary.realisations];
    }),
  );
  const all = [...counts, ...stated];
  return all.length === 0 ? null : Math.min(...all);
}

function suiteResult(part: Part, parameters: number): CombinationResult['suites'][number] {
  const { realisations } = part.covariance;
  const entries = part.entries.length;
  return {
    suite: part.suite.name,
    runs: part.runs.map(({ name }) => name),
    entries,
    fiducialRealisations: realisations,
    precisionFactor: precisionFactor(realisations, entries),
    volumeScale: part.volumeScale,
    wishartDegrees: realisations === null ? null : wishartDegrees(realisations, entries, parameters),
    factors: realisations === null ? null : inflationFactors(realisations, entries, parameters),
  };
}

function cutsOf(combination: Combination): CombinationResult['cuts'] {
  return combination.keep.flatMap(({ probe, ranges, blocks }) => [
    ...ranges.map(({ coordinate, min, max }) => ({ probe, coordinate, min, max, blocks: null })),
    ...(blocks === null ? [] : [{ probe, coordinate: null, min: null, max: null, blocks: [...blocks] }]),
  ]);
}

function rowsOf({ data, size }: Small): number[][] {
  return Array.from({ length: size }, (_, i) => Array.from(data.subarray(i * size, (i + 1) * size)));
}

function inverseRows(solved: Solved | null): number[][] | null {
  return solved?.inversion.kind === 'inverse' ? rowsOf(solved.inversion.inverse) : null;
}

function correlationRows(solved: Solved | null): number[][] | null {
  if (solved?.inversion.kind !== 'inverse') return null;
  const { data, size } = solved.inversion.inverse;
  return rowsOf({
    size,
    data: data.map((value, k) => {
      const i = Math.floor(k / size);
      const j = k % size;
      return i === j ? 1 : value / Math.sqrt(data[i * (size + 1)]!) / Math.sqrt(data[j * (size + 1)]!);
    }),
  });
}

function conditionOf(solved: Solved | null): number | null {
  if (solved === null || solved.inversion.kind === 'not positive definite') return null;
  return Number.isFinite(solved.inversion.condition) ? solved.inversion.condition : null;
}

/** sqrt(1 - 1/(F_aa (F^-1)_aa)): how well the other parameters together can mimic this one. Lyons 1986 (from memory). */
function globalCorrelation(combined: Combined, parameter: number): number | null {
  const { corrected } = whole(combined);
  const quantity = quantityOf(combined, parameter, 'marginalised');
  if (corrected?.inversion.kind !== 'inverse' || quantity === null) return null;
  const diagonal = (quantity / 2) * (combined.active.length + 1);
  const product = corrected.fisher.data[diagonal]! * corrected.inversion.inverse.data[diagonal]!;
  return Math.sqrt(Math.max(0, 1 - 1 / product));
}

function notAssessable(study: Study, { parts }: Combined): string[] {
  return parts.flatMap((part) => [
    ...(part.covariance.realisations === null
      ? [`Suite ${part.suite.name}: the noise of the covariance, which was given without a number of realisations.`]
      : []),
    ...part.runs.flatMap((run) =>
      study.parameters.flatMap(({ name }) =>
        part.suite.derivatives.get(run.name)!.get(name)!.kind === 'mean'
          ? [`Run ${run.name}: the noise of the derivative by ${name}, which was given as a mean without realisations.`]
          : [],
      ),
    ),
  ]);
}
