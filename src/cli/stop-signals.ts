import { StoppedByOperator, UnforeseenError } from '../run/stopped.js';
import type { Streams } from './streams.js';

const reasons = {
  SIGINT: 'stopped with Ctrl-C',
  SIGTERM: 'stopped by a request to end (SIGTERM)',
  SIGHUP: 'stopped because the terminal was closed (SIGHUP)',
  SIGQUIT: 'stopped with Ctrl-\\',
} as const;

/**
 * Turns the wish to end the program, and anything that breaks outside a step, into a run that ends safely:
 * the step is left, the bench is made safe, the record is closed. Asking again changes nothing, as that is
 * already the quickest safe way out.
 */
export function stopOnSignals(streams: Streams): { readonly signal: AbortSignal; release(): void } {
  const controller = new AbortController();
  const handlers = Object.entries(reasons).map(([name, reason]) => {
    const handler = (): void => {
      const words = controller.signal.aborted
        ? 'the bench is being made safe, one moment'
        : `${reason}; making the bench safe`;
      streams.stderr.write(`\n${words}\n`);
      controller.abort(new StoppedByOperator(reason));
    };
    process.on(name, handler);
    return { name, handler };
  });
  const unforeseen = (error: unknown): void => {
    controller.abort(new UnforeseenError(error));
  };
  process.on('uncaughtException', unforeseen);
  process.on('unhandledRejection', unforeseen);
  return {
    signal: controller.signal,
    release: () => {
      for (const { name, handler } of handlers) process.off(name, handler);
      process.off('uncaughtException', unforeseen);
      process.off('unhandledRejection', unforeseen);
    },
  };
}
