import { write } from 'node:fs';
import { isatty } from 'node:tty';
import { printable } from '../report/printable.js';

/** How long a terminal may take to show them. */
const patience = 1000;

/**
 * Words for a terminal that may be gone, or frozen with a Ctrl-S: neither may keep anyone waiting who switches
 * a load off. So nothing waits for them but the very end, and that not for long.
 */
export class LastWords {
  readonly #clears = isatty(2) && process.env['TERM'] !== 'dumb';
  #unsaid: Promise<unknown> = Promise.resolve();

  /**
   * On a line of its own: the cursor may be left in the middle of one, or above the block of a run that is shown no
   * more, whose lines are cleared.
   */
  say(text: string): void {
    const bytes = Buffer.from(`${this.#clears ? '\u001b[J' : ''}\n${printable(text)}\n`);
    const said = new Promise<void>((resolve) => {
      write(2, bytes, () => {
        resolve();
      });
    });
    this.#unsaid = Promise.all([this.#unsaid, said]);
  }

  /** Ends this process where the words do not go away: a thread waits with them, and Node would wait for it. */
  async end(): Promise<void> {
    const timer = setTimeout(() => process.kill(process.pid, 'SIGKILL'), patience);
    await this.#unsaid;
    clearTimeout(timer);
  }
}
