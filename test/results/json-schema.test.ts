import { readFileSync } from 'node:fs';
import { expect, it } from 'vitest';
import { resultsJsonSchema } from '../../src/results/json-schema.js';

it('the packaged JSON Schema is the one that the code defines', () => {
  // After a change of the schema: npm run schema.
  expect(readFileSync(new URL('../../results.schema.json', import.meta.url), 'utf8')).toBe(resultsJsonSchema());
});
