import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';

const main = fileURLToPath(new URL('../../dist/cli/main.js', import.meta.url));

/** What one run of the built program left behind. */
export interface Run {
  readonly code: number | null;
  readonly stdout: string;
  readonly stderr: string;
}

/** Runs the built program (npm test builds it first), as a shell would. */
export function sigmafolio(args: readonly string[], nodeArgs: readonly string[] = []): Run {
  const { status, stdout, stderr } = spawnSync(process.execPath, [...nodeArgs, main, ...args], { encoding: 'utf8' });
  return { code: status, stdout, stderr };
}
