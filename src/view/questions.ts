import type { Question } from './view-state.js';

export type Asked = Omit<Question, 'id'>;

export type Taken =
  | { readonly kind: 'taken' }
  | { readonly kind: 'not-open' }
  /** In words for whoever answered. */
  | { readonly kind: 'not-taken'; readonly why: string };

/** What the person is asked in the view: one question at a time, and its first answer counts. */
export class Questions {
  readonly #show: (question: Question | undefined) => void;
  #count = 0;
  #open: { readonly question: Question; readonly take: (answer: string) => void } | undefined;

  constructor(show: (question: Question | undefined) => void) {
    this.#show = show;
  }

  /** Settled with the answer. @throws the signal's reason once it takes the question away. */
  async ask(asked: Asked, signal: AbortSignal): Promise<string> {
    signal.throwIfAborted();
    this.#count += 1;
    const question: Question = { ...asked, id: this.#count };
    return new Promise((resolve, reject) => {
      const takenAway = (): void => {
        this.#close();
        reject(signal.reason as Error);
      };
      const take = (answer: string): void => {
        signal.removeEventListener('abort', takenAway);
        this.#close();
        resolve(answer);
      };
      signal.addEventListener('abort', takenAway, { once: true });
      this.#open = { question, take };
      this.#show(question);
    });
  }

  /** An answer came for the question of that number. */
  answer(id: number, text: string): Taken {
    const open = this.#open;
    if (open?.question.id !== id) return { kind: 'not-open' };
    const answer = text.trim();
    const why = whyNot(open.question.answer, answer);
    if (why !== undefined) return { kind: 'not-taken', why };
    open.take(answer);
    return { kind: 'taken' };
  }

  #close(): void {
    this.#open = undefined;
    this.#show(undefined);
  }
}

/** A quantity is read by whoever asked, who asks again with the reason; here only what can't be an answer is refused. */
function whyNot(expected: Question['answer'], answer: string): string | undefined {
  if (expected === 'yes') return answer === 'yes' || answer === 'no' ? undefined : 'Answer yes or no.';
  if (expected === 'done') return answer === 'done' ? undefined : 'Say done once it is done.';
  if (answer === '') return 'Nothing was typed.';
  return /\p{Cc}/u.test(answer) ? 'An answer is one line, without control characters.' : undefined;
}
