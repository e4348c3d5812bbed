import type { ViewMessage } from '../view-state.js';
import { type Hearing, patience, patienceAt, type Stage, type Why } from './silence.js';

export interface Connection {
  /** What there is to say of the line now. */
  hearing(): Omit<Hearing, 'stage'>;
  close(): void;
}

export function now(): number {
  return performance.now() / 1000;
}

/**
 * Follows the runner's stream of messages, and goes on trying until it is closed.
 * @param stageNow how far the run is, by which silence is borne.
 */
export function follow(
  told: (message: ViewMessage) => void,
  changed: () => void,
  stageNow: () => Stage,
): Connection {
  const since = now();
  let heard: number | undefined;
  let tried = since;
  let why: Why = 'silent';
  let stream = open();

  function open(): EventSource {
    tried = now();
    const opened = new EventSource('/events');
    opened.addEventListener('message', (event: MessageEvent<string>) => {
      heard = now();
      tried = heard;
      why = 'silent';
      told(JSON.parse(event.data) as ViewMessage);
    });
    opened.addEventListener('error', () => {
      if (why === 'silent') why = 'unreachable';
      void learnWhy();
      changed();
    });
    return opened;
  }

  /** A stream doesn't say why it failed; a plain question does. */
  async function learnWhy(): Promise<void> {
    const asked = now();
    try {
      const { status } = await fetch('/look.css', { cache: 'no-store' });
      // A line that was refused is closed; one that was cut is tried again.
      const isClosed = stream.readyState === EventSource.CLOSED;
      if (heard === undefined || heard < asked)
        why = status === 403 ? 'refused' : status === 200 && isClosed ? 'full' : 'silent';
    } catch {
      if (heard === undefined || heard < asked) why = 'unreachable';
    }
    changed();
  }

  /** A browser tries again of itself after a broken line, not after a refusal, and never where a line is open and dumb. */
  function look(): void {
    const tryAgainAfter = patience + (stream.readyState === EventSource.CLOSED ? 0 : patienceAt(stageNow()));
    if (now() - tried > tryAgainAfter) {
      stream.close();
      stream = open();
    }
    changed();
  }

  const clock = setInterval(look, 500);
  // Of a page that nobody sees the browser lets the clock stand for up to a minute.
  document.addEventListener('visibilitychange', look);

  return {
    hearing: () => ({ since, heard, why }),
    close() {
      clearInterval(clock);
      document.removeEventListener('visibilitychange', look);
      stream.close();
    },
  };
}

export type Sent = 'taken' | 'not-open' | 'not-taken' | 'unreachable';

/** Sends an answer or the wish to stop. What the runner said stands in `words` where it refused. */
export async function send(
  path: '/answer' | '/stop',
  body: object,
): Promise<{ readonly sent: Sent; readonly words: string }> {
  try {
    const answer = await fetch(path, {
      method: 'POST',
      headers: { 'content-type': 'application/json' },
      body: JSON.stringify(body),
      signal: AbortSignal.timeout(5000),
    });
    if (answer.ok) return { sent: 'taken', words: '' };
    const words = (await answer.text()).trim();
    return { sent: answer.status === 409 ? 'not-open' : 'not-taken', words };
  } catch {
    return { sent: 'unreachable', words: '' };
  }
}
