import type { RunWatcher } from '../../run/perform.js';
import type { Streams } from '../streams.js';
import { PlainProgress } from './plain-progress.js';
import type { RunSoFar } from './run-so-far.js';

/** Shows a run that is counted already to whoever is at the terminal, looks at a page, or reads a log. */
export interface RunProgress extends RunWatcher {
  /** Leaves the line empty for whoever writes next, and shows nothing any more. */
  end(): void;
}

/**
 * On a terminal a block that stays in its place; elsewhere a plain line a step. What draws the block is loaded only
 * where there is one.
 */
export async function runProgress(
  { stderr, environment }: Pick<Streams, 'stderr' | 'environment'>,
  run: RunSoFar,
): Promise<RunProgress> {
  if (!canRedraw(stderr, environment)) return new PlainProgress(stderr, run);
  const { liveProgress } = await import('./live-progress.js');
  return liveProgress(stderr, environment, run);
}

/**
 * Whether lines can be taken back there: not in a pipe, not where the terminal says that it can't (`TERM=dumb`) or how
 * large it is nobody knows, and not where a machine keeps the log and only passes for a terminal (`CI`).
 */
export function canRedraw(
  { isTTY, columns, rows }: Pick<Partial<NodeJS.WriteStream>, 'isTTY' | 'columns' | 'rows'>,
  { TERM, CI }: NodeJS.ProcessEnv,
): boolean {
  const inCi = CI !== undefined && CI !== '' && CI !== 'false';
  return isTTY === true && (columns ?? 0) > 0 && (rows ?? 0) > 0 && TERM !== 'dumb' && !inCi;
}
