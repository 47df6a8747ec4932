import { z } from 'zod';

/**
 * The shape of study.yaml and run.yaml, format 1. Every object is strict. Each `error` says what is expected. Rules that join several
 * keys are in the files that read them.
 */

const object = z.strictObject;

const reserved = new Set([...Object.getOwnPropertyNames(Object.prototype), 'prototype']);
const notReserved = (name: string): boolean => !reserved.has(name);
const nameRule = 'a name: a letter, then letters, digits, _ or -, no word that JavaScript reserves';
const name = z.string({ error: nameRule }).regex(/^[A-Za-z][A-Za-z0-9_-]*$/, { error: nameRule }).refine(notReserved, { error: nameRule });
const parameterRule = 'a parameter name: a letter, then letters, digits or _, no word that JavaScript reserves';
const parameterName = z.string({ error: parameterRule }).regex(/^[A-Za-z][A-Za-z0-9_]*$/, { error: parameterRule }).refine(notReserved, { error: parameterRule });

const text = z.string().regex(/\S/, { error: 'text that is not empty' });
const positive = z.number({ error: 'a finite number above 0' }).positive({ error: 'a finite number above 0' });
const countRule = 'a whole number, at least 1';
const count = z.number({ error: countRule }).int({ error: countRule }).min(1, { error: countRule });
const atLeastTwoRule = 'a whole number, at least 2';
const atLeastTwo = z.number({ error: atLeastTwoRule }).int({ error: atLeastTwoRule }).min(2, { error: atLeastTwoRule });
const array = z.union([z.string().min(1), z.array(z.union([z.string(), z.number(), z.array(z.number())])).min(1)], {
  error: 'the name of an array file, or a list of finite numbers',
});
const list = <T extends z.ZodType>(item: T) => z.array(item).min(1, { error: 'a list with at least one item' });

const author = object({
  name: text,
  orcid: z
    .string()
    .regex(/^(https:\/\/orcid\.org\/)?\d{4}-\d{4}-\d{4}-\d{3}[\dX]$/, { error: 'an ORCID iD, such as 0000-0002-1825-0097' })
    .optional(),
  affiliation: text.optional(),
});

const parameter = object({
  name: parameterName,
  label: text.optional(),
  fiducial: z.number(),
  unit: z.string().optional(),
  role: z.enum(['target', 'nuisance']).optional(),
  prior: positive.optional(),
  reference: object({ label: text, error: positive }).optional(),
});

const range = object({ min: z.number().optional(), max: z.number().optional() });

const combination = object({
  name,
  label: text.optional(),
  probes: list(name),
  keep: z.record(z.string(), object({ blocks: list(name).optional() }).catchall(range)).optional(),
  volume: positive.optional(),
});

const test = object({
  at_least: positive.optional(),
  at_most: positive.optional(),
  between: z.tuple([positive, positive], { error: 'two numbers, the lower first' }).optional(),
});

const claim = object({
  id: name,
  text,
  parameter: z.string(),
  combination: z.string(),
  against: z.string().optional(),
  error: z.enum(['marginalised', 'fixed']).optional(),
  gain: test.optional(),
  size: test.optional(),
});

const toleranceRule = 'a number between 0 and 1, both excluded';

export const studySchema = object({
  format: z.literal(1),
  title: text,
  summary: text.optional(),
  authors: list(author).optional(),
  licence: text.optional(),
  date: z.iso.date({ error: 'a date such as 2031-05-02' }).optional(),
  parameters: list(parameter),
  prior: array.optional(),
  derived: z.unknown().optional(),
  probes: z.record(z.string(), object({ label: text.optional(), notes: text.optional() })).optional(),
  combinations: list(combination),
  baseline: z.string(),
  scan: object({ coordinate: z.string(), keep: z.enum(['below', 'above']).optional(), at: list(z.number()) }).optional(),
  tolerance: z.number({ error: toleranceRule }).gt(0, { error: toleranceRule }).lt(1, { error: toleranceRule }).optional(),
  claims: z.array(claim).optional(),
});

const block = object({
  probe: name,
  block: name,
  coordinate: name.optional(),
  unit: z.string().optional(),
  values: array.optional(),
  size: count.optional(),
  label: text.optional(),
});

const runShape = {
  format: z.literal(1),
  suite: name.optional(),
  volume: positive.optional(),
  volume_unit: text.optional(),
  provenance: z.record(z.string(), z.string()).optional(),
  vector: list(block),
  insensitive: z.array(z.string()).optional(),
};

const node = object({ at: z.number(), values: array, seeds: array.optional() });

export const ensembleSchema = object({
  ...runShape,
  kind: z.literal('ensemble'),
  fiducial: object({ values: array, seeds: array.optional() }),
  derivatives: z
    .record(z.string(), object({ seeds: array.optional(), nodes: z.array(node).optional(), per_realisation: array.optional(), exact: array.optional() }))
    .optional(),
});

export const momentsSchema = object({
  ...runShape,
  kind: z.literal('moments'),
  covariance: array,
  realisations: atLeastTwo.optional(),
  derivatives: z
    .record(z.string(), object({ mean: array.optional(), realisations: count.optional(), noise: array.optional(), exact: array.optional() }))
    .optional(),
});

/** The kind alone, for a run of no known kind: which of its keys are valid cannot be said. */
export const kindSchema = object({ kind: z.enum(['ensemble', 'moments']) });

export type StudyFile = z.infer<typeof studySchema>;
export type EnsembleFile = z.infer<typeof ensembleSchema>;
export type MomentsFile = z.infer<typeof momentsSchema>;
export type RunFile = EnsembleFile | MomentsFile;
export type ClaimFile = z.infer<typeof claim>;
export type CombinationFile = z.infer<typeof combination>;
export type EnsembleDerivativeFile = NonNullable<EnsembleFile['derivatives']>[string];
export type MomentsDerivativeFile = NonNullable<MomentsFile['derivatives']>[string];
export type NodeFile = z.infer<typeof node>;
