import type { InputListener } from './load.js';

/**
 * Those who are told what happens on a bench, the journal above all. What they throw stops what is being
 * done, so that nothing goes on unrecorded. Making safe alone goes on regardless.
 */
export class Audience {
  readonly #onInput: InputListener;
  readonly #onNotice: (text: string) => void;
  #mayStop = true;

  constructor(onInput: InputListener, onNotice: (text: string) => void) {
    this.#onInput = onInput;
    this.#onNotice = onNotice;
  }

  readonly input: InputListener = (state, confirmed) => {
    this.#tell(() => {
      this.#onInput(state, confirmed);
    });
  };

  readonly notice = (text: string): void => {
    this.#tell(() => {
      this.#onNotice(text);
    });
  };

  /** Whether what they throw counts: not while the bench is made safe or closed. */
  get isHeeded(): boolean {
    return this.#mayStop;
  }

  /** Does something that is not stopped by what the audience throws meanwhile. */
  async regardless<T>(work: () => Promise<T>): Promise<T> {
    this.#mayStop = false;
    try {
      return await work();
    } finally {
      this.#mayStop = true;
    }
  }

  #tell(tell: () => void): void {
    try {
      tell();
    } catch (error) {
      if (this.#mayStop) throw error;
    }
  }
}
