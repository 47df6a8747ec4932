import type { ConvergenceResult } from '../results/schema.js';
import type { Study } from '../study/study.js';
import type { Assessed, ErrorKind } from './assess.js';
import { difference } from './assess.js';
import { quantityOf } from './combined.js';
import type { Convergence, Fit } from './convergence.js';
import { splitCount, splitShare } from './split.js';

type Values = ConvergenceResult['errors'][string]['fixed'];

/** Convergence of a combination as the results hold it; null without noise. */
export function convergenceResult(study: Study, assessed: Assessed, baseline: Assessed): ConvergenceResult | null {
  const { convergence } = assessed;
  if (convergence === null) return null;
  const values = (parameter: number, kind: ErrorKind): Values => {
    const quantity = quantityOf(assessed.combined, parameter, kind);
    const blocks = convergence.levels.map((level) => level.map((block) => logsOf(block, quantity)));
    return summary(blocks, quantity === null ? null : (convergence.fits[quantity] ?? null));
  };
  return {
    realisations: [...convergence.realisations],
    blocks: convergence.levels.map((blocks) => blocks.length),
    splitShare,
    splits: splitCount,
    errors: Object.fromEntries(
      study.parameters.map(({ name }, a) => [name, { marginalised: values(a, 'marginalised'), fixed: values(a, 'fixed') }]),
    ),
    improvements: assessed === baseline ? null : gains(study, assessed, baseline),
  };
}

/** The gain over the baseline from the same blocks; null where the two were not divided alike. */
function gains(study: Study, assessed: Assessed, baseline: Assessed): ConvergenceResult['improvements'] {
  const [own, base] = [assessed.convergence, baseline.convergence];
  if (own === null || base?.levels.length !== own.levels.length) return null;
  const values = (parameter: number, kind: ErrorKind): Values => {
    const [q, r] = [quantityOf(assessed.combined, parameter, kind), quantityOf(baseline.combined, parameter, kind)];
    const blocks = own.levels.map((level, k) =>
      level.map((block, b) => {
        const [mine, theirs] = [logsOf(block, q), logsOf(base.levels[k]![b]!, r)];
        return { raw: difference(theirs.raw, mine.raw), corrected: difference(theirs.corrected, mine.corrected) };
      }),
    );
    return summary(blocks, null);
  };
  return Object.fromEntries(
    study.parameters.map(({ name }, a) => [name, { marginalised: values(a, 'marginalised'), fixed: values(a, 'fixed') }]),
  );
}

interface BlockValue {
  readonly raw: number | null;
  readonly corrected: number | null;
}

function logsOf(block: Convergence['levels'][number][number], quantity: number | null): BlockValue {
  if (quantity === null) return { raw: null, corrected: null };
  return { raw: block.raw[quantity] ?? null, corrected: block.corrected[quantity] ?? null };
}

function summary(blocks: readonly (readonly BlockValue[])[], fit: Fit | null): Values {
  const levels = blocks.map((level) => ({
    raw: present(level.map(({ raw }) => raw)),
    corrected: present(level.map(({ corrected }) => corrected)),
    blocks: level.length,
  }));
  const whole = (values: readonly number[], count: number): number | null => (values.length === count ? mean(values) : null);
  return {
    raw: levels.map(({ raw, blocks: count }) => whole(raw, count)),
    rawScatter: levels.map(({ raw, blocks: count }) => (raw.length === count ? scatter(raw) : null)),
    corrected: levels.map(({ corrected, blocks: count }) => whole(corrected, count)),
    correctedScatter: levels.map(({ corrected, blocks: count }) => (corrected.length === count ? scatter(corrected) : null)),
    determined: levels.map(({ corrected }) => corrected.length),
    fit: fit === null ? null : { limit: Math.exp(fit.logLimit), b: fit.b },
  };
}

function present(logs: readonly (number | null)[]): readonly number[] {
  return logs.flatMap((log) => (log === null ? [] : [Math.exp(log)]));
}

function mean(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}

/** Standard deviation between blocks; null for a single one. */
function scatter(values: readonly number[]): number | null {
  if (values.length < 2) return null;
  const centre = mean(values);
  return Math.sqrt(values.reduce((sum, value) => sum + (value - centre) ** 2, 0) / (values.length - 1));
}
