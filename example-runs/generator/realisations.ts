import type { Fourier } from './fourier.js';
import { realisation } from './maps.js';
import { fiducial, schemes } from './parameters.js';
import type { DataVectors, Measure } from './vectors.js';
import { measureAt } from './vectors.js';

/** Seeds of the fiducial maps, and of the maps at the nodes: the first of the same seeds. */
export const fiducialCount = 1500;
export const derivativeCount = 250;

/** Data vectors by name: `fiducial`, and the file of each node. Entry i belongs to seed i + 1. */
export type Suite = ReadonlyMap<string, readonly DataVectors[]>;

/** Simulates seeds 1 ... count at the fiducial point, and those of them up to derivativeCount at every node. */
export function simulate(count: number, fourier: Fourier): Suite {
  const measures = new Map<string, Measure>([['fiducial', measureAt(fiducial, fourier)]]);
  for (const { parameter, nodes } of schemes) {
    for (const { file, at } of nodes) measures.set(file, measureAt({ ...fiducial, [parameter]: at }, fourier));
  }
  const suite = new Map<string, DataVectors[]>([...measures.keys()].map((name) => [name, []]));
  for (let seed = 1; seed <= count; seed += 1) {
    const random = realisation(seed, fourier);
    for (const [name, measure] of measures) {
      if (name === 'fiducial' || seed <= derivativeCount) suite.get(name)!.push(measure(random));
    }
  }
  return suite;
}
