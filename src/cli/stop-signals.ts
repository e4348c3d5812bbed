import { realClock } from '../clock/real-clock.js';
import type { Seconds } from '../quantity/quantity.js';
import { StoppedByOperator, UnforeseenError } from '../run/stopped.js';
import type { Streams } from './streams.js';

const reasons = {
  SIGINT: 'stopped with Ctrl-C',
  SIGTERM: 'stopped by a request to end (SIGTERM)',
  SIGHUP: 'stopped because the terminal was closed (SIGHUP)',
  SIGQUIT: 'stopped with Ctrl-\\',
} as const;

/**
 * One wish may come twice: what starts programs passes on a Ctrl-C that the terminal has sent already, and a
 * terminal that is closed says so more than once. Nobody repeats a wish as fast as that.
 */
const echo: Seconds = 0.1;

export interface StopWishes {
  /** Aborted by the first wish to end, or by what broke outside a step. */
  readonly signal: AbortSignal;
  /** Aborted by the second wish: whoever repeats it will not wait for an answer that may never come. */
  readonly hurry: AbortSignal;
  /** The same wish, which at a question is a key and no signal, and may come from a page; Ctrl-C when nothing is said. */
  readonly wish: (reason?: string) => void;
  release(): void;
}

/**
 * Turns the wish to end the program, and anything that breaks outside a step, into a run that ends safely:
 * the step is left, the bench is made safe, the record is closed. The first wish waits for the question that
 * is under way, so that nothing is left unsaid; the second does not. Any further one changes nothing.
 */
export function stopOnSignals(streams: Streams): StopWishes {
  const first = new AbortController();
  const second = new AbortController();
  let wishedAt = -Infinity;
  const wish = (reason: string): void => {
    if (second.signal.aborted || realClock.now() - wishedAt < echo) return;
    wishedAt = realClock.now();
    if (first.signal.aborted) {
      streams.stderr.write(
        '\nnot waiting any longer: what is under way is broken off, the bench made safe\n',
      );
      second.abort();
    } else {
      streams.stderr.write(`\n${reason}; making the bench safe\n`);
      first.abort(new StoppedByOperator(reason));
    }
  };
  const handlers: [string, (thrown: unknown) => void][] = Object.entries(reasons).map(([name, reason]) => [
    name,
    () => {
      wish(reason);
    },
  ]);
  const unforeseen = (thrown: unknown): void => {
    first.abort(new UnforeseenError(thrown));
  };
  handlers.push(['uncaughtException', unforeseen], ['unhandledRejection', unforeseen]);
  // A file that grows beyond what the shell allows would end the program; so it is a write that fails.
  handlers.push(['SIGXFSZ', () => undefined]);
  for (const [name, handler] of handlers) process.on(name, handler);
  return {
    signal: first.signal,
    hurry: second.signal,
    wish: (reason = reasons.SIGINT) => {
      wish(reason);
    },
    release: () => {
      for (const [name, handler] of handlers) process.off(name, handler);
    },
  };
}
