import { attribution } from './attribution.js';
import { blockInformation } from './block-information.js';
import { convergence } from './convergence.js';
import { covarianceConvergence } from './covariance-convergence.js';
import { dataCorrelation } from './data-correlation.js';
import { ellipses } from './ellipses.js';
import { errors } from './errors.js';
import type { FigureMaker } from './figure-maker.js';
import { gains } from './gains.js';
import { meanVectors } from './mean-vectors.js';
import { noiseTies } from './noise-ties.js';
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
  'covariance-convergence': covarianceConvergence,
  scan,
  attribution,
  'noise-ties': noiseTies,
  'block-information': blockInformation,
  ellipses,
  'parameter-correlation': parameterCorrelation,
  'data-correlation': dataCorrelation,
};
