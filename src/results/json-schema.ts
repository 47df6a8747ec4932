import { z } from 'zod';
import { resultsSchema } from './schema.js';

/** JSON Schema (draft 2020-12) of results.json, as a text. It stands in the package as results.schema.json. */
export function resultsJsonSchema(): string {
  const schema = z.toJSONSchema(resultsSchema, { reused: 'ref' });
  return `${JSON.stringify({ title: 'sigmafolio results, format 1', ...schema }, null, 2)}\n`;
}
