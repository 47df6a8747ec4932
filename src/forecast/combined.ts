import type { Matrix } from '../arrays/rows.js';
import type { Small } from '../linalg/small.js';
import { add, zeros } from '../linalg/small.js';
import type { Combination, Study } from '../study/study.js';
import type { PartFisher } from './fisher.js';
import { partFisher, whitenedDerivatives } from './fisher.js';
import type { CovarianceNoise, Gradients } from './influence.js';
import { gaussianNoise, measuredNoise, precisionTimesDerivatives, project } from './influence.js';
import { inversionBias } from './inversion-bias.js';
import type { Replicates } from './jackknife.js';
import type { Solved } from './log-errors.js';
import { neighbourLogs, solve } from './log-errors.js';
import type { Part } from './part.js';

/** A combination at one cut: its matrices over the active parameters, and what is needed for their uncertainty. */
export interface AtCut {
  readonly entries: number;
  readonly fisher: { readonly raw: Small; readonly corrected: Small | null };
  /** Priors included. */
  readonly raw: Solved;
  /** null where derivatives came without realisations. */
  readonly corrected: Solved | null;
  /** By suite name. */
  readonly replicates: ReadonlyMap<string, Replicates>;
  readonly noise: ReadonlyMap<string, CovarianceNoise>;
  /** By quantity: what the precision factor leaves in log sigma, before its variance is taken off. */
  readonly inversionBias: readonly (number | null)[];
}

export interface Combined {
  readonly combination: Combination;
  readonly parts: readonly Part[];
  /** Indices among the study's parameters: those with a response or a prior here. */
  readonly active: readonly number[];
  readonly prior: Small;
  /** One for each cut of the scan, then the whole. */
  readonly cuts: readonly AtCut[];
  readonly assessable: boolean;
}

/** The whole of a combination: the last of its cuts. */
export function whole(combined: Combined): AtCut {
  return combined.cuts[combined.cuts.length - 1]!;
}

/** Where a parameter's error stands among a combination's quantities; null where the parameter is not active in it. */
export function quantityOf(combined: Combined, parameter: number, kind: 'marginalised' | 'fixed'): number | null {
  const place = combined.active.indexOf(parameter);
  return place < 0 ? null : 2 * place + (kind === 'fixed' ? 1 : 0);
}

/** Fisher matrices, errors, replicates and influences of a combination at every cut. */
export function combine(study: Study, combination: Combination, parts: readonly Part[]): Combined {
  const priorAll = priorMatrix(study);
  const active = activeParameters(study, parts, priorAll);
  const prior = restricted(priorAll, active);
  const fishers = parts.map(partFisher);
  const assessable = parts.every((part) => part.assessable);
  const solved = parts[0]!.prefixes.map((_, cut) => solveCut(fishers, cut, active, prior, assessable));
  const noises = parts.map((part, k) => covarianceNoises(part, fishers[k]!, solved, active));
  const cuts = solved.map((at, cut) => ({
    ...at,
    replicates: new Map(parts.map((part, k) => [part.suite.name, replicatesOf(part, fishers[k]![cut]!, at, active)])),
    noise: new Map(parts.map((part, k) => [part.suite.name, noises[k]![cut]!])),
    inversionBias: biasAt(at, parts, fishers, cut, active),
  }));
  return { combination, parts, active, prior, cuts, assessable };
}

/** diag(1/prior^2) plus the full prior matrix, over all parameters. */
function priorMatrix(study: Study): Small {
  const size = study.parameters.length;
  const prior = study.prior === null ? zeros(size) : { data: Float64Array.from(study.prior.data), size };
  study.parameters.forEach((parameter, a) => {
    const place = a * (size + 1);
    if (parameter.prior !== null) prior.data[place] = prior.data[place]! + 1 / parameter.prior ** 2;
  });
  return prior;
}

function activeParameters(study: Study, parts: readonly Part[], prior: Small): readonly number[] {
  const size = study.parameters.length;
  return study.parameters.flatMap((_, a) => {
    const responds = parts.some(
      (part) =>
        part.strands.some((strand) => strand.parameter === a) ||
        part.plainExact.data.subarray(a * part.plainExact.columns, (a + 1) * part.plainExact.columns).some((x) => x !== 0),
    );
    const known = prior.data.subarray(a * size, (a + 1) * size).some((x) => x !== 0);
    return responds || known ? [a] : [];
  });
}

/** Rows and columns of the chosen parameters. */
export function restricted(matrix: Small, parameters: readonly number[]): Small {
  const size = parameters.length;
  const data = new Float64Array(size * size);
  parameters.forEach((a, i) => {
    parameters.forEach((b, j) => {
      data[i * size + j] = matrix.data[a * matrix.size + b]!;
    });
  });
  return { data, size };
}

type SolvedCut = Pick<AtCut, 'entries' | 'fisher' | 'raw' | 'corrected'>;

function solveCut(
  fishers: readonly (readonly PartFisher[])[],
  cut: number,
  active: readonly number[],
  prior: Small,
  assessable: boolean,
): SolvedCut {
  const sum = (pick: (fisher: PartFisher) => Small): Small =>
    restricted(add(...fishers.map((part) => [1, pick(part[cut]!)] as const)), active);
  const raw = sum((fisher) => fisher.raw);
  const corrected = assessable ? sum((fisher) => fisher.corrected) : null;
  return {
    entries: fishers.reduce((total, part) => total + part[cut]!.entries, 0),
    fisher: { raw, corrected },
    raw: solve(add([1, raw], [1, prior])),
    corrected: corrected === null ? null : solve(add([1, corrected], [1, prior])),
  };
}

function biasAt(
  at: SolvedCut,
  parts: readonly Part[],
  fishers: readonly (readonly PartFisher[])[],
  cut: number,
  active: readonly number[],
): readonly (number | null)[] {
  const terms = parts.flatMap(({ covariance: { realisations } }, k) => {
    const { corrected, entries } = fishers[k]![cut]!;
    return realisations === null || entries === 0
      ? []
      : [{ fisher: restricted(corrected, active), freedom: realisations - entries - 2 }];
  });
  const { fisher, inversion } = at.corrected ?? at.raw;
  return inversionBias(fisher, inversion, terms);
}

function replicatesOf(part: Part, fisher: PartFisher, at: SolvedCut, active: readonly number[]): Replicates {
  const seeds = part.suite.derivativeSeeds.size;
  const size = fisher.raw.size;
  const quantities = 2 * active.length;
  const values = new Float64Array(seeds * quantities);
  const weights = new Float64Array(seeds);
  if (at.corrected === null) return { values, weights, quantities };
  const others = add([1, at.corrected.fisher], [-1, restricted(fisher.corrected, active)]);
  for (let seed = 0; seed < seeds; seed += 1) {
    weights[seed] = weightOf(part, seed);
    const without = { data: fisher.without.subarray(seed * size * size, (seed + 1) * size * size), size };
    neighbourLogs(add([1, others], [1, restricted(without, active)]), at.corrected, values, seed * quantities);
  }
  return { values, weights, quantities };
}

function weightOf(part: Part, seed: number): number {
  const counts = part.strands.filter((strand) => strand.rowOf[seed]! >= 0).map((strand) => strand.seeds.length);
  if (counts.length === 0) return 0;
  const fewest = Math.min(...counts);
  return (fewest - 1) / fewest;
}

function covarianceNoises(
  part: Part,
  fishers: readonly PartFisher[],
  solved: readonly SolvedCut[],
  active: readonly number[],
): readonly CovarianceNoise[] {
  if (part.covariance.realisations === null) return solved.map(() => ({ kind: 'known' }));
  const whitened = whitenedDerivatives(part);
  const projections: Matrix[] = fishers.map(({ entries }) => precisionTimesDerivatives(part, whitened, entries));
  const projected = project(part, projections);
  return solved.map((at, cut) => {
    const gradients = gradientsOf(at, active, part.exact.rows);
    const { entries, precision } = fishers[cut]!;
    const scale = precision * part.volumeScale;
    const u = projected[cut];
    return u === undefined
      ? gaussianNoise(part, projections[cut]!, gradients, entries, scale)
      : measuredNoise(part, u, gradients, entries, scale);
  });
}

/** d log sigma_a = c (g . u)^2: g = F^-1 e_a and c = 1/(2 (F^-1)_aa); fixed, g = e_a and c = 1/(2 F_aa). */
function gradientsOf(at: SolvedCut, active: readonly number[], parameters: number): Gradients {
  const solved = at.corrected ?? at.raw;
  const { inversion, fisher } = solved;
  const size = active.length;
  const data = new Float64Array(2 * size * parameters);
  const coefficients = new Float64Array(2 * size);
  active.forEach((parameter, a) => {
    const diagonal = a * (size + 1);
    if (inversion.kind === 'inverse') {
      coefficients[2 * a] = 1 / (2 * inversion.inverse.data[diagonal]!);
      active.forEach((other, b) => {
        data[2 * a * parameters + other] = inversion.inverse.data[a * size + b]!;
      });
    }
    if (fisher.data[diagonal]! > 0) {
      coefficients[2 * a + 1] = 1 / (2 * fisher.data[diagonal]!);
      data[(2 * a + 1) * parameters + parameter] = 1;
    }
  });
  return { rows: { data, rows: 2 * size, columns: parameters }, coefficients, free: size };
}
