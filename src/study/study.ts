import type { Matrix, RowSource, Vector } from '../arrays/rows.js';
import type { Place } from './problems.js';

/** A study as it stands after loading: every name resolved, every shape checked, every number finite. */
export interface Study {
  readonly title: string;
  /** Markdown, not yet sanitised. */
  readonly summary: string | null;
  readonly authors: readonly Author[];
  readonly licence: string | null;
  readonly date: string | null;
  /** Targets first, nuisance parameters last; the order of every matrix. */
  readonly parameters: readonly Parameter[];
  /** Full prior Fisher matrix, [p, p], in the order of `parameters`. */
  readonly prior: Matrix | null;
  readonly probes: readonly Probe[];
  readonly combinations: readonly Combination[];
  readonly baseline: string;
  readonly scan: Scan | null;
  readonly tolerance: number;
  readonly claims: readonly Claim[];
  readonly runs: readonly Run[];
  readonly inputs: readonly Input[];
  /** SHA-256 over the list of inputs: it stands for the whole study. */
  readonly digest: string;
  /** Where a chain of keys of study.yaml stands, for messages. */
  readonly place: (path: readonly (string | number)[]) => Place;
}

interface Author {
  readonly name: string;
  readonly orcid: string | null;
  readonly affiliation: string | null;
}

export interface Parameter {
  readonly name: string;
  /** TeX math without dollars; the name itself where none was given. */
  readonly label: string;
  readonly fiducial: number;
  readonly unit: string;
  readonly role: 'target' | 'nuisance';
  /** Gaussian prior, one sigma. */
  readonly prior: number | null;
  readonly reference: { readonly label: string; readonly error: number } | null;
}

export interface Probe {
  readonly name: string;
  readonly label: string;
  /** Markdown, not yet sanitised. */
  readonly notes: string | null;
}

export interface Combination {
  readonly name: string;
  readonly label: string;
  readonly probes: readonly string[];
  readonly keep: readonly Keep[];
  /** Volume that the Fisher matrix is scaled to, in the unit of the runs; null leaves it as simulated. */
  readonly volume: number | null;
}

/** What of one probe stays in a combination. Bounds are inclusive; null does not bound. */
export interface Keep {
  readonly probe: string;
  readonly ranges: readonly { readonly coordinate: string; readonly min: number | null; readonly max: number | null }[];
  readonly blocks: readonly string[] | null;
}

export interface Scan {
  readonly coordinate: string;
  readonly keep: 'below' | 'above';
  readonly at: readonly number[];
}

export interface Claim {
  readonly id: string;
  readonly text: string;
  readonly parameter: string;
  readonly combination: string;
  readonly against: string;
  readonly error: 'marginalised' | 'fixed';
  /** A gain is the error of `against` over the error of `combination`; a size is the error itself. */
  readonly quantity: 'gain' | 'size';
  readonly test: ClaimTest;
}

export type ClaimTest =
  | { readonly kind: 'at least'; readonly threshold: number }
  | { readonly kind: 'at most'; readonly threshold: number }
  | { readonly kind: 'between'; readonly low: number; readonly high: number };

export interface Input {
  /** Relative to the study folder, with forward slashes. */
  readonly path: string;
  readonly sha256: string;
  readonly bytes: number;
}

export interface Run {
  /** The folder under runs/. */
  readonly name: string;
  readonly suite: string;
  readonly volume: number | null;
  readonly volumeUnit: string;
  readonly provenance: readonly (readonly [string, string])[];
  /** The entries of the data vector, in the order of the columns of every array. */
  readonly columns: readonly Column[];
  readonly data: Ensemble | Moments;
  readonly place: (path: readonly (string | number)[]) => Place;
}

export interface Column {
  readonly probe: string;
  readonly block: string;
  /** TeX or plain label of the block. */
  readonly label: string;
  readonly coordinate: { readonly name: string; readonly unit: string; readonly value: number } | null;
}

export interface Ensemble {
  readonly kind: 'ensemble';
  readonly fiducial: Realisations;
  /** One entry for every parameter of the study. */
  readonly derivatives: Readonly<Record<string, EnsembleDerivative>>;
}

/** Rows with the seeds that name them. Without seeds, rows are named by their index. */
export interface Realisations {
  /** The file, for messages. */
  readonly source: string;
  readonly rows: RowSource;
  readonly seeds: Vector | null;
}

export type EnsembleDerivative =
  | { readonly kind: 'nodes'; readonly nodes: readonly Node[] }
  | { readonly kind: 'per realisation'; readonly realisations: Realisations }
  | { readonly kind: 'exact'; readonly values: Float64Array }
  | { readonly kind: 'insensitive' };

/** Simulations at one value of the parameter; `fiducial` stands for the fiducial rows with the seeds of the other nodes. */
export interface Node {
  readonly at: number;
  readonly realisations: Realisations | 'fiducial';
}

export interface Moments {
  readonly kind: 'moments';
  readonly covariance: Matrix;
  /** N_s behind the covariance; null when it is not an estimate, or not known to be. */
  readonly realisations: number | null;
  readonly derivatives: Readonly<Record<string, MomentsDerivative>>;
}

export type MomentsDerivative =
  | { readonly kind: 'mean'; readonly mean: Float64Array; readonly realisations: number | null; readonly noise: Matrix | null }
  | { readonly kind: 'exact'; readonly values: Float64Array }
  | { readonly kind: 'insensitive' };
