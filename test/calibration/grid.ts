import type { GaussianModel } from '../fixtures/gaussian-study.js';

/** One cell of the calibration grid: a model whose errors are known in closed form. */
export interface Cell {
  readonly name: string;
  readonly model: GaussianModel;
}

/** Responses that differ well from one another. */
const distinct = (entry: number, parameter: number): number =>
  0.5 * Math.cos((entry + 1) * (0.3 + 0.45 * parameter)) + (parameter === 1 ? 0.15 : 0);

/** The first two parameters respond nearly alike: a degeneracy that noise seems to break. */
const degenerate = (entry: number, parameter: number): number =>
  parameter === 1 ? distinct(entry, 0) + 0.15 * Math.sin((entry + 1) * 0.9) : distinct(entry, parameter);

/** Nothing but the baseline responds. */
const silentBeyond =
  (entries: number) =>
  (entry: number, parameter: number): number =>
    entry < entries ? 2 * distinct(entry, parameter) : 0;

const base: GaussianModel = {
  entries: [10, 13],
  parameters: 3,
  fiducials: 1000,
  derivatives: 250,
  derivativeNoise: 0.6,
  response: distinct,
  rho: 0.3,
  commonNoise: 0.3,
};

/** D, N_s, N_d, noise, degeneracy, null probes, non-Gaussian data. */
export const grid: readonly Cell[] = [
  { name: 'regular', model: base },
  { name: 'few fiducials', model: { ...base, fiducials: 120 } },
  { name: 'few derivatives', model: { ...base, derivatives: 40 } },
  { name: 'very few derivatives', model: { ...base, derivatives: 12 } },
  { name: 'quiet derivatives', model: { ...base, derivativeNoise: 0.1 } },
  { name: 'noisy derivatives', model: { ...base, derivativeNoise: 2 } },
  { name: 'longer vector', model: { ...base, entries: [20, 60], fiducials: 2000, derivatives: 400 } },
  { name: 'longer vector, noisy', model: { ...base, entries: [20, 60], fiducials: 1000, derivatives: 100, derivativeNoise: 1 } },
  { name: 'degenerate', model: { ...base, response: degenerate, fiducials: 2000, derivatives: 500, derivativeNoise: 0.3 } },
  { name: 'degenerate, noisy', model: { ...base, response: degenerate } },
  { name: 'null probe', model: { ...base, response: silentBeyond(10), rho: 0 } },
  { name: 'null probe, long', model: { ...base, entries: [10, 60], response: silentBeyond(10), rho: 0, derivatives: 400, derivativeNoise: 1 } },
  { name: 'null probe, noisy', model: { ...base, entries: [10, 40], response: silentBeyond(10), rho: 0, derivatives: 60, derivativeNoise: 1.5 } },
  { name: 'lognormal, mild', model: { ...base, lognormal: 0.3, rho: 0 } },
  { name: 'lognormal, strong', model: { ...base, lognormal: 0.6, rho: 0, fiducials: 2000 } },
];
