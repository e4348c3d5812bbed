import { exitCodes, RailproofError } from '../errors/railproof-error.js';

/** One thing wrong in a file, and where: line and column count from 1. */
export interface FileProblem {
  readonly file: string;
  readonly line: number;
  readonly column: number;
  /** The keys and list positions that lead there, `steps.1.load-ramp`; empty for the file as a whole. */
  readonly path: string;
  readonly message: string;
}

/** `real-limit.yaml:7:5` */
export function problemPlace({ file, line, column }: FileProblem): string {
  return `${file}:${line}:${column}`;
}

/** `real-limit.yaml:7:5: steps.1: no step is called 'dropout-serch'; did you mean 'dropout-search'?` */
export function problemLine(problem: FileProblem): string {
  const { path, message } = problem;
  return `${problemPlace(problem)}: ${path === '' ? '' : `${path}: `}${message}`;
}

/** A file that cannot be used as it stands. All its problems are told at once, one a line, in file order. */
export class BadFileError extends RailproofError {
  readonly code = 'BAD_FILE';
  readonly exitCode = exitCodes.badFile;
  readonly problems: readonly FileProblem[];

  constructor(problems: readonly FileProblem[], options: { advice?: string; cause?: unknown } = {}) {
    const sorted = [...problems].sort((one, other) => one.line - other.line || one.column - other.column);
    super(sorted.map(problemLine).join('\n'), {
      ...options,
      advice:
        options.advice ?? `mend it there; \`railproof check ${sorted[0]?.file ?? 'file.yaml'}\` looks again`,
    });
    this.problems = sorted;
  }
}

/** A file that is not there, or may not be read. */
export class MissingFileError extends RailproofError {
  readonly code = 'MISSING_FILE';
  readonly exitCode = exitCodes.missingFile;
  readonly path: string;

  constructor(path: string, reason: string, options: { advice?: string; cause?: unknown } = {}) {
    super(`${path}: ${reason}`, {
      ...options,
      advice:
        options.advice ??
        'look at the path, from the folder you are in; `railproof new` writes a bench, module or procedure file',
    });
    this.path = path;
  }
}
