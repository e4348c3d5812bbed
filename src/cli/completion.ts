import type { Command } from 'commander';
import { exitCodes, type ExitCode, RailproofError } from '../errors/railproof-error.js';
import { didYouMean } from '../quantity/nearest.js';
import { bashScript } from './completion/bash-script.js';
import type { CompletedProgram } from './completion/completed.js';
import { fishScript } from './completion/fish-script.js';
import { programWords } from './completion/program-words.js';
import { type Shell, shells } from './completion/shells.js';
import { valuesOf } from './completion/values.js';
import { zshScript } from './completion/zsh-script.js';
import type { Streams } from './streams.js';

/** There is no script for such a shell. */
export class UnknownShellError extends RailproofError {
  readonly code = 'UNKNOWN_SHELL';
  readonly exitCode = exitCodes.usage;

  constructor(shell: string) {
    super(`there is no completion for '${shell}'${didYouMean(shell, shells)}`, {
      advice: `the shells are ${shells.join(', ')}; for example: railproof completion bash`,
    });
  }
}

const scripts: Readonly<Record<Shell, (program: CompletedProgram) => string>> = {
  bash: bashScript,
  zsh: zshScript,
  fish: fishScript,
};

/**
 * `railproof completion`: a script by which a shell completes commands, options and their values. It holds all it needs,
 * so that completing starts no program; a new version of ours wants a new script.
 * @throws UnknownShellError
 */
export async function completion(shell: string, program: Command, streams: Streams): Promise<ExitCode> {
  if (!isShell(shell)) throw new UnknownShellError(shell);
  streams.stdout.write(scripts[shell](programWords(program, await valuesOf(program))));
  return exitCodes.conforms;
}

function isShell(shell: string): shell is Shell {
  return (shells as readonly string[]).includes(shell);
}
