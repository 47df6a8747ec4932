import { forecast } from '../forecast/forecast.js';
import { loadStudy } from '../study/load.js';
import type { ExitCode } from './exit-codes.js';
import { exitCodes } from './exit-codes.js';
import type { Terminal } from './terminal.js';
import { highlighted } from './terminal.js';
import { generator } from './version.js';

/** Reads and checks a study without writing anything: what a build would refuse, and what it would warn of. */
export async function check(folder: string, terminal: Terminal): Promise<ExitCode> {
  const study = await loadStudy(folder);
  const { checks, combinations } = forecast(study, generator());
  const warnings = checks.filter(({ level }) => level === 'warning' || level === 'error');
  for (const { level, message, where } of warnings) {
    terminal.message(highlighted(`${level}: ${message}\n  where     ${where}`, terminal));
  }
  const runs = counted(study.runs.length, 'run');
  const files = counted(study.inputs.length, 'file');
  terminal.result(
    `${study.title}: ${runs}, ${files}, ${counted(Object.keys(combinations).length, 'combination')}; ${counted(warnings.length, 'warning')}.`,
  );
  return exitCodes.done;
}

function counted(count: number, what: string): string {
  return `${String(count)} ${what}${count === 1 ? '' : 's'}`;
}
