import { z } from 'zod';
import { matrix, number, optionalNumber } from './primitives.js';

export const derivative = z.object({
  kind: z.enum(['nodes', 'per realisation', 'exact', 'mean', 'insensitive']),
  nodes: z.array(z.object({ at: number, weight: number, realisations: number, source: z.string() })),
  matching: z.enum(['by seed', 'by index', 'unmatched', 'partly matched', 'does not apply']),
  realisations: optionalNumber,
  /** Correlation between the first and last node over common realisations, median over entries. */
  nodeCorrelation: optionalNumber,
  /** Noise variance if unmatched over noise variance as matched, median over entries. */
  noiseReduction: optionalNumber,
});

export const vector = z.object({
  run: z.string(),
  label: z.string(),
  coordinate: z.string().nullable(),
  unit: z.string(),
  /** Coordinates; the index from 1 where there is none. */
  values: z.array(number),
  /** Null where the run gives moments only. */
  mean: z.array(number).nullable(),
  standardDeviation: z.array(number),
  derivatives: z.record(z.string(), z.object({ value: z.array(number), standardError: z.array(number).nullable() })),
});

export const dataCorrelation = z.object({
  /** Entries averaged into one cell, each way. */
  entriesPerCell: number,
  groups: z.array(z.object({ probe: z.string(), block: z.string(), label: z.string(), cells: number, entries: number })),
  /** Mean correlation in each cell, -1 to 1. */
  cells: matrix,
});
