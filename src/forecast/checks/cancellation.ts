import type { Check } from './check.js';

/** Few enough that no error should rest on them. */
const few = 2;
/** Below this no direction is small: leaving any out loses data, not a cancellation. Common practice, no source. */
const largestHarmless = 1e3;

/**
 * Errors that move by more than the tolerance when the few smallest directions of the data's correlation matrix are left out, where
 * those directions are small at all.
 */
export const cancellation: Check = ({ study, measured }) =>
  Object.entries(measured.smallestDirections ?? {}).map(([name, { condition, removed, errors }]) => {
    const where = `combination ${name}`;
    const facts = `The correlation matrix of the data has condition number ${condition.toPrecision(2).replace('e+', 'e')}`;
    if (condition < largestHarmless) {
      return { id: `cancellation-${name}`, level: 'ok', message: `${facts}: no direction of it is so small that an error could rest on a cancellation.`, where };
    }
    const place = removed.indexOf(few);
    const moved = study.parameters.flatMap(({ name: parameter, role }) => {
      const values = errors[parameter]!.marginalised;
      const [all, without] = [values[0] ?? null, values[place] ?? null];
      if (role !== 'target' || all === null || without === null) return [];
      const change = without / all - 1;
      return Math.abs(change) > study.tolerance ? [`${parameter} by ${(100 * change).toFixed(0)} %`] : [];
    });
    return moved.length === 0
      ? { id: `cancellation-${name}`, level: 'ok', message: `${facts}; without its ${String(few)} smallest directions no marginalised error of a target moves by more than the tolerance.`, where }
      : { id: `cancellation-${name}`, level: 'warning', message: `${facts}; without its ${String(few)} smallest directions the errors move: ${moved.join(', ')}. They rest on cancellations that must be real to count.`, where };
  });
