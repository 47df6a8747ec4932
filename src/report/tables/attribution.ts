import { significant } from '../../results/rounding.js';
import { say } from '../markdown/nodes.js';
import { partsOf } from '../words/attribution.js';
import { combinationLabel, parameterLabel, targets } from '../words/labels.js';
import type { TableMaker } from './table.js';
import { numbers, words } from './table.js';

/** The parts of each gain, and what is left of it with no response in the added entries. */
export const attribution: TableMaker = (results) => {
  const rows = partsOf(results);
  if (rows.length === 0) return null;
  return {
    id: 'attribution',
    caption: say`Where each marginalised gain comes from (corrected): gain = sharper response × broken degeneracies. The last column has the added responses set to zero: what is left comes from predicting the baseline's noise.`,
    columns: [
      words('Parameter'),
      words('Combination'),
      numbers('Gain'),
      numbers('Sharper response'),
      numbers('Broken degeneracies'),
      numbers('Through noise alone'),
    ],
    rows: rows.map(({ parameter, combination, gain, response, degeneracy }) => [
      [parameterLabel(results, parameter)],
      combinationLabel(results, combination),
      significant(gain, 3),
      significant(response, 3),
      significant(degeneracy, 3),
      factor(results.attribution?.[combination]?.throughNoise[parameter]?.gain ?? null),
    ]),
  };
};

/** Gains with one other parameter known: the column that falls names the degeneracy that the gain rests on. */
export const oneFixed: TableMaker = (results) => {
  const parameters = results.parameters.map(({ name }) => name);
  const entries = Object.entries(results.attribution ?? {});
  if (entries.length === 0 || parameters.length < 2) return null;
  return {
    id: 'one-fixed',
    caption: say`The gain on each target parameter with one other parameter known in baseline and combination alike. Where a column falls towards 1, the gain rests on that degeneracy.`,
    columns: [words('Parameter'), words('Combination'), numbers('None known'), ...parameters.map((name) => numbers(say`${parameterLabel(results, name)} known`))],
    rows: targets(results).flatMap((parameter) =>
      entries.map(([combination, { parameters: found }]) => {
        const total = found[parameter]?.shares?.total;
        const gains = new Map(
          (found[parameter]?.oneFixed ?? []).map((one) => [one.parameter, one.baseline === null || one.combination === null ? null : one.baseline / one.combination]),
        );
        return [
          [parameterLabel(results, parameter)],
          combinationLabel(results, combination),
          factor(total === undefined ? null : Math.exp(total)),
          ...parameters.map((other) => (other === parameter ? '–' : factor(gains.get(other) ?? null))),
        ];
      }),
    ),
  };
};

/** Best and worst determined directions, in units of the baseline's errors. */
export const directions: TableMaker = (results) => {
  const rows = Object.entries(results.attribution ?? {}).flatMap(([combination, { directions: found }]) => {
    const [best, worst] = [found?.[0], found?.[found.length - 1]];
    return best === undefined || worst === undefined
      ? []
      : [
          { combination, which: 'best', ...best },
          { combination, which: 'worst', ...worst },
        ];
  });
  if (rows.length === 0) return null;
  const parameters = results.parameters.map(({ name }) => name);
  return {
    id: 'directions',
    caption: say`Best and worst determined directions of the corrected covariance, with every parameter in units of its marginalised error in the baseline: an error of 1 is the baseline's along an axis.`,
    columns: [words('Combination'), words('Direction'), numbers('Error'), ...parameters.map((name) => numbers([parameterLabel(results, name)]))],
    rows: rows.map(({ combination, which, error, components }) => [
      combinationLabel(results, combination),
      which,
      significant(error, 2),
      ...parameters.map((name) => (components[name] === undefined ? '–' : significant(components[name], 2))),
    ]),
  };
};

/** Area of the joint region of each pair of targets, baseline over combination. */
export const areas: TableMaker = (results) => {
  const names = new Set(targets(results));
  const entries = Object.entries(results.attribution ?? {});
  const pairs = (entries[0]?.[1].areas ?? []).filter(({ parameters: [a, b] }) => names.has(a) && names.has(b)).map(({ parameters }) => parameters);
  if (pairs.length === 0) return null;
  return {
    id: 'areas',
    caption: say`Gain in the area of the joint region of two target parameters, baseline over combination.`,
    columns: [words('Pair'), ...entries.map(([combination]) => numbers(combinationLabel(results, combination)))],
    rows: pairs.map(([a, b]) => [
      say`${parameterLabel(results, a)}, ${parameterLabel(results, b)}`,
      ...entries.map(([, { areas: found }]) => factor(found.find(({ parameters: [x, y] }) => x === a && y === b)?.gain ?? null)),
    ]),
  };
};

function factor(value: number | null): string {
  return value === null ? 'cannot tell' : significant(value, 3);
}
