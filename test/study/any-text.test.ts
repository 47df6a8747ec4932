import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { loadStudy } from '../../src/study/load.js';
import { formatProblem } from '../../src/study/message.js';
import { InputError } from '../../src/study/problems.js';
import { changed, minimalStudy, writeStudy } from '../fixtures/study-folder.js';

/** A text with a piece cut out and another one put in. */
const mutated = (text: string) =>
  fc
    .tuple(fc.nat(text.length), fc.nat(12), fc.constantFrom('', ' ', '\n', '  ', ': ', '- ', '[', ']', '{', '}', ',', "'", '"', '&a ', '*a', '!x ', '~', '1e999', '.inf', '-1', '<<: ', '? ', '| ', '\t', '\u0000', '#'))
    .map(([at, cut, put]) => text.slice(0, at) + put + text.slice(at + cut));

describe('whatever a file says', () => {
  it.each(['study.yaml', 'runs/power/run.yaml'])('%s is read, or refused with a place and a cure', async (name) => {
    const text = minimalStudy().get(name);
    if (typeof text !== 'string') throw new Error('no text');
    await fc.assert(
      fc.asyncProperty(mutated(text), async (changedText) => {
        try {
          await loadStudy(writeStudy(changed(minimalStudy(), { [name]: changedText })));
        } catch (error) {
          if (!(error instanceof InputError)) throw error;
          expect(error.problems.length).toBeGreaterThan(0);
          for (const problem of error.problems) expect(formatProblem(problem)).toMatch(/^error: .+\n {2}where {5}(study\.yaml|runs\/).*\n( {2}found {5}.+\n)?( {2}expected {2}.+\n)?( {2}do {8}.+)$/);
        }
      }),
      { numRuns: 250, seed: 1 },
    );
  });
});
