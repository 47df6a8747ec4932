import { count, percent } from '../../results/rounding.js';
import type { Results } from '../../results/schema.js';
import { say } from '../markdown/nodes.js';
import { combinationLabel, parameterLabel } from '../words/labels.js';
import type { TableMaker } from './table.js';
import { numbers, words } from './table.js';

type Budget = NonNullable<Results['budget']>[number];

/** How many realisations would settle what is not settled. Claims have their say at a glance. */
export const budget: TableMaker = (results) => ({
  id: 'budget',
  caption: say`Realisations that would bring each number that is not settled to the goal, if its noise falls as noise does and the value stays. Each kind alone, with the other as it is; then both together.`,
  columns: [
    words('Number'),
    words('Combination'),
    numbers('Noise now'),
    numbers('Goal'),
    numbers('Derivative realisations alone'),
    numbers('Fiducial realisations alone'),
    numbers('Both: derivative, fiducial'),
  ],
  rows: (results.budget ?? [])
    .filter(({ claim, reached }) => claim === null && !reached)
    .map((one) => [
      say`${one.against === null ? 'error' : 'gain'} on ${parameterLabel(results, one.parameter)}`,
      combinationLabel(results, one.combination),
      one.now === null ? 'not known' : percent(one.now),
      one.goal === null ? 'not known' : percent(one.goal),
      about(one.derivatives),
      about(one.fiducials),
      one.both === null ? 'cannot tell' : `${about(one.both.derivatives)}, ${about(one.both.fiducials)}`,
    ]),
});

/** Two digits: a scaling law promises no more. */
function about(n: number | null): string {
  return n === null ? 'no number will do' : count(Number(n.toPrecision(2)));
}

/** "Some 720 derivative realisations would decide it, if the value stays"; nothing where that is not known. */
export function wouldDecide(results: Results, claim: string): string {
  const found = results.budget?.find((one) => one.claim === claim);
  const need = found === undefined || found.reached ? null : needOf(found);
  return need === null ? '' : ` Some ${need} would decide it, if the value stays.`;
}

function needOf({ derivatives, fiducials, both }: Budget): string | null {
  if (derivatives !== null) return `${about(derivatives)} derivative realisations`;
  if (fiducials !== null) return `${about(fiducials)} fiducial realisations`;
  return both === null ? null : `${about(both.derivatives)} derivative and ${about(both.fiducials)} fiducial realisations`;
}
