import { expect, it } from 'vitest';
import { loadStudy } from '../../src/study/load.js';
import { formatProblem } from '../../src/study/message.js';
import type { InputError } from '../../src/study/problems.js';
import { edited, minimalStudy, writeStudy } from '../fixtures/study-folder.js';

it('a prior whose inverse square is no number is refused', async () => {
  const study = writeStudy(edited(minimalStudy(), 'study.yaml', 'prior: 0.01', 'prior: 1e-200'));
  const error = await loadStudy(study).then(
    () => null,
    (reason: unknown) => reason as InputError,
  );
  expect(error?.problems.map(formatProblem)).toEqual([
    `error: a prior too narrow for double precision
  where     study.yaml:5:53  parameters[1].prior
  found     1e-200 for shear_bias
  expected  a prior whose inverse square is a number
  do        check its unit; a parameter that is known exactly is best left out`,
  ]);
});
