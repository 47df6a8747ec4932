import type { Check } from './check.js';

/** Parameters that a combination leaves out of its matrices, as nothing in it responds to them and they have no prior. */
export const silentParameters: Check = ({ study, combined }) =>
  combined.flatMap(({ combination, active }) => {
    const silent = study.parameters.filter((_, a) => !active.includes(a)).map(({ name }) => name);
    if (silent.length === 0) return [];
    return [
      {
        id: `silent-parameters-${combination.name}`,
        level: 'note',
        message: `Nothing in ${combination.name} responds to ${silent.join(', ')}, and without a prior there is no error to give: left out of its matrices.`,
        where: `combination ${combination.name}`,
      } as const,
    ];
  });
