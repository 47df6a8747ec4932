import type { CheckResult } from '../../results/schema.js';
import type { Part } from '../part.js';
import { commonKeys } from '../realisations.js';
import type { Check } from './check.js';

/** Runs of one suite whose derivatives do not share their realisations, though their fiducial ones are the same simulations. */
export const sharedDerivatives: Check = ({ study, combined }) =>
  combined.flatMap(({ combination, parts }) =>
    parts.flatMap((part) => study.parameters.flatMap(({ name }) => describe(part, name, combination.name))),
  );

function describe(part: Part, parameter: string, combination: string): readonly CheckResult[] {
  const noisy = part.runs.flatMap((run) => {
    const { strands } = part.suite.derivatives.get(run.name)!.get(parameter)!;
    return strands.length === 0 ? [] : [{ run: run.name, keys: strands.flatMap(({ keys }) => keys) }];
  });
  const [first, ...others] = noisy;
  const apart = others.find(({ keys }) => commonKeys([first!.keys, keys]).length === 0);
  if (first === undefined || apart === undefined) return [];
  const seeded = typeof first.keys[0] === typeof apart.keys[0];
  const why = seeded ? 'their seed lists have nothing in common' : 'one has seeds and the other has none';
  return [
    {
      id: `shared-derivatives-${combination}-${parameter}`,
      level: 'warning',
      message: `The derivatives by ${parameter} of the runs ${first.run} and ${apart.run} count as independent: ${why}. If they are the same simulations, give the same seeds to both, or the noise that they share is not removed.`,
      where: `combination ${combination}, suite ${part.suite.name}`,
    },
  ];
}
