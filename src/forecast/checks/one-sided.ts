import type { Check } from './check.js';

/** Derivatives whose nodes lie all on one side of the fiducial value: first order in the step, or extrapolated. */
export const oneSided: Check = ({ study, suites }) =>
  suites.flatMap((suite) =>
    suite.runs.flatMap((run) =>
      study.parameters.flatMap(({ name, fiducial }) => {
        const { nodes } = suite.derivatives.get(run.name)!.get(name)!;
        const below = nodes.some(({ at }) => at < fiducial);
        const above = nodes.some(({ at }) => at > fiducial);
        if (nodes.length === 0 || (below && above)) return [];
        const places = nodes.map(({ at }) => String(at)).join(', ');
        return [
          {
            id: `one-sided-${run.name}-${name}`,
            level: 'note',
            message: `The nodes (${places}) lie on one side of the fiducial value ${String(fiducial)}: with ${String(nodes.length)} nodes the truncation error is of order ${String(nodes.length - 1)} in the step, and nothing on the other side can check it.`,
            where: `run ${run.name}, derivatives.${name}`,
          } as const,
        ];
      }),
    ),
  );
