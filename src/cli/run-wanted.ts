import { exitCodes, RailproofError } from '../errors/railproof-error.js';
import { listed } from '../quantity/listed.js';

/** What may stand behind `railproof run`. */
export interface RunOptions {
  readonly procedure?: string | undefined;
  readonly bench?: string;
  readonly module?: readonly string[];
  readonly resume?: string;
  readonly runs?: string;
  readonly baseline?: string;
  readonly tolerance?: string;
  readonly yes?: boolean;
  readonly dryRun?: boolean;
  readonly trace?: boolean;
  /** Where the decisions go as JUnit XML. */
  readonly junit?: string;
  readonly json?: boolean;
  /** Serve pages on which the run is looked at, answered and stopped. */
  readonly view?: boolean;
}

/** A run from its beginning, or from where another was broken off. */
export type RunWanted =
  | {
      readonly kind: 'afresh';
      readonly procedure: string;
      readonly bench: string;
      readonly modules: readonly string[];
      readonly baseline: string | undefined;
      readonly tolerance: string | undefined;
    }
  | { readonly kind: 'resume'; readonly run: string; readonly bench: string | undefined };

/** `railproof run` was not told what to run, or was told it twice. */
export class RunUsageError extends RailproofError {
  readonly code = 'RUN_USAGE';
  readonly exitCode = exitCodes.usage;
}

/** @throws RunUsageError */
export function runWanted(options: RunOptions): RunWanted {
  const { procedure, bench, module: modules, resume, baseline, tolerance } = options;
  if (options.junit !== undefined && options.dryRun === true) {
    throw new RunUsageError('railproof run: --junit and --dry-run do not go together', {
      advice: 'nothing is performed and nothing is judged with --dry-run: leave one of the two out',
    });
  }
  if (options.view === true && options.dryRun === true) {
    throw new RunUsageError('railproof run: --view and --dry-run do not go together', {
      advice: 'nothing is performed with --dry-run, so there is nothing to look at: leave one of the two out',
    });
  }
  if (resume !== undefined) {
    refuseBesideResume({
      '<procedure>': procedure,
      '--module': modules,
      '--baseline': baseline,
      '--tolerance': tolerance,
    });
    return { kind: 'resume', run: resume, bench };
  }
  if (procedure === undefined || bench === undefined || modules === undefined || modules.length === 0) {
    throw missing({ '<procedure>': procedure, '--bench <file>': bench, '--module <file>': modules });
  }
  return { kind: 'afresh', procedure, bench, modules, baseline, tolerance };
}

function missing(needed: Readonly<Record<string, unknown>>): RunUsageError {
  const names = Object.keys(needed).filter((name) => needed[name] === undefined);
  return new RunUsageError(`railproof run: ${listed(names)} ${names.length === 1 ? 'is' : 'are'} missing`, {
    advice:
      '`railproof help run` shows an example; `railproof run --resume <run>` goes on with a run that was broken off',
  });
}

function refuseBesideResume(given: Readonly<Record<string, unknown>>): void {
  const names = Object.keys(given).filter((name) => given[name] !== undefined);
  if (names.length === 0) return;
  throw new RunUsageError(`railproof run: --resume and ${listed(names)} do not go together`, {
    advice:
      'a run that goes on does what its record says was planned; of the files only --bench may be given, for a bench that is at another address now',
  });
}
