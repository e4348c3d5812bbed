import { orderText, type Order } from '../bench/watchman-order.js';
import { beatEvery } from '../bench/watchman-vigil.js';
import type { InputListener } from '../bench/load.js';
import { messageOf } from '../errors/message-of.js';
import { exitCodes, RailproofError } from '../errors/railproof-error.js';
import { startWatchmanProcess, type WatchmanProcess } from './watchman-process.js';

/**
 * Nobody would switch the load off if this program vanished, so it does not go on. It ends as a run does that a
 * guard has stopped, for that is what is missing.
 */
export class NoWatchmanError extends RailproofError {
  readonly code = 'NO_WATCHMAN';
  readonly exitCode = exitCodes.stopped;

  constructor(why: string) {
    super(`the watchman, which switches the load off should this program vanish, can't be had: ${why}`, {
      advice:
        'find out what ends or hinders other programs on this machine (is there room for one more?), and run it again',
    });
  }
}

export type StartProcess = () => WatchmanProcess;

/**
 * The watchman of one run, as the run sees it: told what goes on, replaced once when it dies, dismissed at the
 * end. It is started at once, as it needs a moment while the bench is opened.
 */
export class Watchman {
  readonly #start: StartProcess;
  readonly #missing = new AbortController();
  #process: WatchmanProcess;
  #order: string | undefined;
  #notice: (text: string) => void = () => undefined;
  #input: 'on' | 'off' = 'off';
  #isReplaced = false;
  #beat: NodeJS.Timeout | undefined;

  constructor(start: StartProcess = startWatchmanProcess) {
    this.#start = start;
    this.#process = start();
  }

  /** Aborted with a NoWatchmanError when there is none, or none any more. */
  get missing(): AbortSignal {
    return this.#missing.signal;
  }

  /**
   * Settled when it watches, or when it is known that nobody will; never rejects. `notice` is told when it had
   * to be replaced later.
   */
  async take(order: Order, notice: (text: string) => void): Promise<void> {
    this.#order = orderText(order);
    this.#notice = notice;
    if (!(await this.#givenOrder(this.#order))) return;
    this.#beat = setInterval(() => {
      this.#process.say('beat');
    }, beatEvery * 1000);
    this.#beat.unref();
  }

  /** To be told before the input is switched on, and after it was read back. */
  readonly input: InputListener = (state, confirmed) => {
    if (this.#order === undefined || (state === 'off' && !confirmed)) return;
    this.#input = state;
    this.#process.say(state);
  };

  /** The run is over. Settled when the process is gone; never rejects. */
  async dismiss(): Promise<void> {
    clearInterval(this.#beat);
    this.#order = undefined;
    await this.#process.dismiss();
  }

  async #givenOrder(order: string): Promise<boolean> {
    const process = this.#process;
    try {
      await process.order(order);
    } catch (error) {
      this.#missing.abort(new NoWatchmanError(messageOf(error)));
      return false;
    }
    void process.ended.then((how) => this.#lost(how));
    process.say(this.#input);
    return true;
  }

  async #lost(how: string): Promise<void> {
    const order = this.#order;
    if (order === undefined) return;
    if (this.#isReplaced) {
      this.#missing.abort(new NoWatchmanError(`a second one is gone: ${how}`));
      return;
    }
    this.#isReplaced = true;
    this.#process = this.#start();
    if (!(await this.#givenOrder(order))) return;
    try {
      this.#notice(`the watchman is gone (${how}); another one takes its place`);
    } catch {
      // A journal that can't be written ends the run at its next line, and says why.
    }
  }
}
