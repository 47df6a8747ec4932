import { convergence } from './convergence.js';
import { dataCorrelation } from './data-correlation.js';
import { ellipses } from './ellipses.js';
import { errors } from './errors.js';
import type { FigureMaker } from './figure-maker.js';
import { gains } from './gains.js';
import { meanVectors } from './mean-vectors.js';
import { parameterCorrelation } from './parameter-correlation.js';
import { responses } from './responses.js';
import { scan } from './scan.js';

/** Every figure by the name that a template calls it. */
export const figureMakers: Readonly<Record<string, FigureMaker>> = {
  gains,
  errors,
  responses,
  'mean-vectors': meanVectors,
  convergence,
  scan,
  ellipses,
  'parameter-correlation': parameterCorrelation,
  'data-correlation': dataCorrelation,
};
