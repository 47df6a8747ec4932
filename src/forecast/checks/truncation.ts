import type { CheckResult, Results } from '../../results/schema.js';
import type { Check } from './check.js';

type DerivativeTest = NonNullable<Results['derivativeTests']>[number];

/** Standard errors from which a difference is taken as measured. Common practice, no source. */
const significant = 3;
/** Share of the response from which a truncation matters: it moves a fixed error by as much. Common practice, no source. */
const tolerated = 0.05;

/** What the nodes say about the derivatives: step size, and how straight the response is over one sigma. */
export const truncation: Check = ({ measured }) => (measured.derivativeTests ?? []).flatMap(describe);

function describe(test: DerivativeTest): readonly CheckResult[] {
  const { run, parameter, kind, share, standardError } = test;
  const measured = Math.abs(share) > significant * standardError;
  const matters = measured && Math.abs(share) > tolerated;
  const size = `${(100 * share).toFixed(1).replace('-', '\u2212')} % \u00b1 ${(100 * standardError).toFixed(1)} %`;
  const where = `run ${run}, derivatives.${parameter}`;
  switch (kind) {
    case 'step size':
      return [
        {
          id: `step-${run}-${parameter}`,
          level: matters ? 'warning' : 'ok',
          message: `The inner nodes give a response that differs from that of the outer ones by ${size} of it${matters ? ': the step is too wide, or too narrow for the numbers behind it' : ''}.`,
          where,
        },
      ];
    case 'one-sided':
      return [
        {
          id: `one-sided-difference-${run}-${parameter}`,
          level: 'ok',
          message: `A one-sided difference from the fiducial would differ from the central one by ${size} of the response.`,
          where,
        },
      ];
    case 'curvature':
      return [
        {
          id: `curvature-${run}-${parameter}`,
          level: matters ? 'note' : 'ok',
          message: `Over one standard error of the baseline the response departs from a straight line by ${size}${matters ? ': a Fisher forecast takes it as straight' : ''}.`,
          where,
        },
      ];
  }
}
