import { grid } from './grid.js';
import type { Trial } from './trials.js';
import { covers, falselySupported, reliable, runTrials, within } from './trials.js';

/** Studies in each cell: enough that a share of 68 % is known to 3 %. */
const studies = 240;
const tolerance = 0.1;

function share(count: number, of: number): string {
  return of === 0 ? '–' : `${((100 * count) / of).toFixed(0)} %`;
}

function row(name: string, trials: readonly Trial[], pick: 'error' | 'gain'): string {
  const truth = (trial: Trial): number => (pick === 'error' ? trial.trueError : trial.trueGain);
  const called = trials.filter((trial) => reliable(trial[pick]));
  const determined = trials.filter((trial) => trial[pick].corrected !== null);
  const right = called.filter((trial) => within(trial[pick], truth(trial), tolerance)).length;
  const covered = determined.filter((trial) => covers(trial[pick], truth(trial))).length;
  const coveredCalled = called.filter((trial) => covers(trial[pick], truth(trial))).length;
  const sold = pick === 'gain' ? share(trials.filter(falselySupported).length, trials.length) : '';
  const cells = [
    name,
    pick,
    truth(trials[0]!).toPrecision(3),
    share(called.length, trials.length),
    share(right, called.length),
    share(coveredCalled, called.length),
    share(covered, determined.length),
    share(trials.length - determined.length, trials.length),
    sold,
  ];
  return `| ${cells.join(' | ')} |`;
}

/** Prints the table that DEVELOPERS.md holds; progress goes to stderr. */
function main(): void {
  process.stdout.write(
    `| cell | number | truth | settled or correctable | of these within ${String(100 * tolerance)} % | covered at 68 %, of these | covered, of all | undetermined | false claims |\n|---|---|---|---|---|---|---|---|---|\n`,
  );
  grid.forEach(({ name, model }, index) => {
    process.stderr.write(`${String(index + 1)} of ${String(grid.length)}: ${name}\n`);
    const trials = runTrials(model, studies, 100_000 * (index + 1));
    process.stdout.write(`${row(name, trials, 'error')}\n${row(name, trials, 'gain')}\n`);
  });
}

main();
