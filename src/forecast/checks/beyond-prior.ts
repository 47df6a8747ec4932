import { whole } from '../combined.js';
import type { Check } from './check.js';

/** Corrected errors above the prior that is part of them: the noise of the derivatives is larger than what the data add. */
export const beyondPrior: Check = ({ study, combined }) =>
  combined.flatMap((one) => {
    const { corrected } = whole(one);
    const names = one.active.flatMap((a, place) => {
      const { name, prior } = study.parameters[a]!;
      const log = corrected?.logs[2 * place] ?? null;
      return prior !== null && log !== null && Math.exp(log) > prior ? [name] : [];
    });
    if (names.length === 0) return [];
    return [
      {
        id: `beyond-prior-${one.combination.name}`,
        level: 'note',
        message: `The corrected marginalised error of ${names.join(', ')} is above its own prior, which no true error can be: the noise of the derivatives is larger than what the data add. The interval says how much.`,
        where: `combination ${one.combination.name}`,
      } as const,
    ];
  });
