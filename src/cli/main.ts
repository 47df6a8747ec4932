#!/usr/bin/env node
import { Command, CommanderError, InvalidArgumentError } from 'commander';
import { formatProblem } from '../study/message.js';
import { InputError } from '../study/problems.js';
import type { BuildPart } from './build.js';
import { buildParts } from './build.js';
import type { ExitCode } from './exit-codes.js';
import { exitCodes } from './exit-codes.js';
import type { Terminal } from './terminal.js';
import { highlighted, processTerminal } from './terminal.js';
import { generator } from './version.js';

function parseParts(text: string): ReadonlySet<BuildPart> {
  const names = text.split(',').map((name) => name.trim());
  const known: readonly string[] = buildParts;
  const unknown = names.find((name) => !known.includes(name));
  if (unknown !== undefined) throw new InvalidArgumentError(`There is no part "${unknown}": choose from ${buildParts.join(', ')}.`);
  return new Set(buildParts.filter((part) => names.includes(part)));
}

interface BuildFlags {
  readonly out?: string;
  readonly only?: ReadonlySet<BuildPart>;
  readonly requireClaims?: boolean;
}

function commandLine(terminal: Terminal, finish: (code: ExitCode) => void): Command {
  const { name, version } = generator();
  const program = new Command(name)
    .description('Shows whether the gain of a simulation-based Fisher forecast is real: a folder of forecast runs in, one self-contained report out.')
    .version(version)
    .exitOverride()
    .addHelpText('after', '\nExit codes: 0 done; 1 done, and a gate failed; 2 the input or the call is wrong; 3 the program is.');
  program
    .command('build')
    .description('build the report of a study')
    .argument('<study>', 'folder with a study.yaml')
    .option('--out <folder>', 'where to write (default: report in the study)')
    .option('--only <parts>', `parts to write, with commas: ${buildParts.join(', ')} (default: all)`, parseParts)
    .option('--require-claims', 'exit with 1 unless every claim is supported')
    .addHelpText('after', '\nExample:\n  sigmafolio build my-study --only results,html --out out')
    .action(async (study: string, flags: BuildFlags) => {
      const { build } = await import('./build.js');
      const options = { out: flags.out, only: flags.only ?? new Set(buildParts), requireClaims: flags.requireClaims === true };
      finish(await build(study, options, terminal));
    });
  program
    .command('check')
    .description('read and check a study, write nothing')
    .argument('<study>', 'folder with a study.yaml')
    .addHelpText('after', '\nExample:\n  sigmafolio check my-study')
    .action(async (study: string) => {
      const { check } = await import('./check.js');
      finish(await check(study, terminal));
    });
  return program;
}

/** Runs the program and returns its exit code. */
async function run(args: readonly string[], terminal: Terminal): Promise<ExitCode> {
  let code: ExitCode = exitCodes.done;
  try {
    await commandLine(terminal, (finished) => {
      code = finished;
    }).parseAsync(args, { from: 'user' });
    return code;
  } catch (error) {
    return explain(error, terminal);
  }
}

function explain(error: unknown, terminal: Terminal): ExitCode {
  if (error instanceof CommanderError) return error.exitCode === 0 ? exitCodes.done : exitCodes.input;
  if (error instanceof InputError) {
    terminal.message(error.problems.map((problem) => highlighted(formatProblem(problem), terminal)).join('\n'));
    return exitCodes.input;
  }
  const stack = error instanceof Error ? (error.stack ?? error.message) : String(error);
  terminal.message(`${highlighted('error', terminal)}: the program failed, which is its own fault and not your study's\n${stack}\n`);
  terminal.message('Please report this at the place you have the program from, with the study if you can share it.');
  return exitCodes.bug;
}

process.exitCode = await run(process.argv.slice(2), processTerminal());
