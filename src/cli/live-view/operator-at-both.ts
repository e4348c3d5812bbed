import { TerminalClosed } from '../../run/stopped.js';
import type { TerminalOperator } from '../../run/terminal-operator.js';
import type { Operator } from '../../steps/operator.js';
import type { Asked } from '../../view/questions.js';
import type { LiveView } from '../../view/server.js';
import { acknowledgementAsked, requestAsked } from './asked.js';

interface Places {
  readonly terminal: TerminalOperator;
  readonly view: Pick<LiveView, 'ask'>;
  /** Cautions are acknowledged beforehand. */
  readonly yes: boolean;
  /** Says a line at the terminal. */
  readonly say: (text: string) => void;
}

/**
 * The person at the bench, who is asked at the terminal and in the live view at once. Whoever answers first has
 * answered, and the question is taken away from the other place. As long as there is a view nobody is missing, with
 * or without a terminal.
 */
export function operatorAtBoth({ terminal, view, yes, say }: Places): Operator {
  const answered = async <Result>(
    asked: Asked,
    signal: AbortSignal,
    atTerminal: (signal: AbortSignal) => Promise<Result>,
    taken: (given: string) => Result,
  ): Promise<Result> => {
    signal.throwIfAborted();
    const settled = new AbortController();
    const open = AbortSignal.any([signal, settled.signal]);
    const inView = view.ask(asked, open).then((given) => ({ where: 'view' as const, given }));
    const typed = whileOpen(asked, atTerminal, open).then((result) => ({
      where: 'terminal' as const,
      result,
    }));
    try {
      const first = await Promise.race([inView, typed]);
      if (first.where === 'terminal') return first.result;
      settled.abort();
      // The terminal ends its line first.
      await Promise.allSettled([typed]);
      say(`Answered in the live view: ${first.given}`);
      return taken(first.given);
    } finally {
      settled.abort();
      await Promise.allSettled([inView, typed]);
    }
  };

  const whileOpen = async <Result>(
    asked: Asked,
    atTerminal: (signal: AbortSignal) => Promise<Result>,
    open: AbortSignal,
  ): Promise<Result> => {
    if (!terminal.present) {
      say(`\nAsked in the live view: ${asked.heading}\n${asked.text}`);
      return neverAnswered(open);
    }
    try {
      return await atTerminal(open);
    } catch (error) {
      if (!(error instanceof TerminalClosed) || open.aborted) throw error;
      say('Nothing was answered here; the question is still open in the live view.');
      return neverAnswered(open);
    }
  };

  return {
    present: true,
    async acknowledge(caution, text, signal) {
      const atTerminal = (open: AbortSignal) => terminal.acknowledge(caution, text, open);
      if (yes) return atTerminal(signal);
      return answered(acknowledgementAsked(caution, text), signal, atTerminal, (given) =>
        given === 'yes' ? ('operator' as const) : ('refused' as const),
      );
    },
    async ask(request, signal) {
      const atTerminal = (open: AbortSignal) => terminal.ask(request, open);
      return answered(requestAsked(request), signal, atTerminal, (given) => given);
    },
  };
}

/** Settled only when it is taken away. */
function neverAnswered(signal: AbortSignal): Promise<never> {
  return new Promise((_, reject) => {
    const takenAway = (): void => {
      reject(signal.reason as Error);
    };
    if (signal.aborted) takenAway();
    else signal.addEventListener('abort', takenAway, { once: true });
  });
}
