import { keysOf } from '../realisations.js';
import type { Check } from './check.js';

/** Fiducial rows that are left out since another run of the combination has no such seed. */
export const sharedFiducials: Check = ({ combined }) =>
  combined.flatMap(({ combination, parts }) =>
    parts.flatMap((part) => {
      const used = part.covariance.realisations;
      const counts = part.runs.flatMap((run) => (run.data.kind === 'ensemble' ? [keysOf(run.data.fiducial).length] : []));
      const most = Math.max(...counts);
      if (used === null || counts.length < 2 || used === most) return [];
      return [
        {
          id: `shared-fiducials-${combination.name}-${part.suite.name}`,
          level: 'note',
          message: `${String(used)} fiducial realisations are shared by the runs ${part.runs.map(({ name }) => name).join(', ')}, which have up to ${String(most)}: the rest is left out of this combination.`,
          where: `combination ${combination.name}, suite ${part.suite.name}`,
        } as const,
      ];
    }),
  );
