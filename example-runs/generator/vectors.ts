import type { Fourier } from './fourier.js';
import { middles } from './histogram.js';
import type { LognormalModel } from './lognormal.js';
import type { Realisation } from './maps.js';
import { modelAt, observedMap } from './maps.js';
import { onePointDistribution, onePointValues } from './one-point.js';
import type { Parameters } from './parameters.js';
import { heights, peakCounts } from './peaks.js';
import { multipoles, powerSpectrum } from './power-spectrum.js';
import { pixels } from './sky.js';
import type { Scale } from './smoothing.js';
import { scales, smoothedMaps, smoothings } from './smoothing.js';

/** A block of columns, as run.yaml names it. */
export interface Block {
  readonly probe: string;
  readonly block: string;
  readonly coordinate: string;
  readonly unit: string | null;
  readonly label: string;
  readonly values: readonly number[];
}

function peaksBlock(block: Scale): Block {
  const label = String.raw`n_\mathrm{peak}(\nu), ${String(smoothings[block].scale)}'`;
  return { probe: 'peaks', block, coordinate: 'nu', unit: null, label, values: middles(heights[block]) };
}

function onePointBlock(block: Scale): Block {
  const label = String.raw`p(\kappa), ${String(smoothings[block].scale)}'`;
  return { probe: 'onepoint', block, coordinate: 'kappa', unit: null, label, values: onePointValues(block) };
}

/** The runs of the study: which blocks each holds. Both are measured on the same maps. */
export const runs = {
  spectrum: [
    { probe: 'power', block: 'auto', coordinate: 'ell', unit: null, label: String.raw`\ell^2 C_\ell / 2\pi \times 10^5`, values: multipoles },
  ],
  maps: [...scales.map(peaksBlock), ...scales.map(onePointBlock)],
} satisfies Readonly<Record<string, readonly Block[]>>;

export type RunName = keyof typeof runs;
export type DataVectors = Readonly<Record<RunName, readonly number[]>>;

/** Measures everything on the map of one realisation at one point of parameter space. */
export type Measure = (random: Realisation) => DataVectors;

/** The measurement at one point of parameter space: its lognormal model is made once. */
export function measureAt(parameters: Parameters, fourier: Fourier): Measure {
  const model = modelAt(parameters, fourier);
  return (random) => measured(model, parameters.shear_bias, random, fourier);
}

function measured(model: LognormalModel, shearBias: number, random: Realisation, fourier: Fourier): DataVectors {
  const modes = { real: observedMap(model, shearBias, random, fourier), imaginary: new Float64Array(pixels ** 2) };
  fourier.forward(modes);
  const maps = [...smoothedMaps(modes, fourier)];
  return {
    spectrum: powerSpectrum(modes),
    maps: [
      ...maps.flatMap(([scale, map]) => peakCounts(map, smoothings[scale].noise, heights[scale])),
      ...maps.flatMap(([scale, map]) => onePointDistribution(map, scale)),
    ],
  };
}
