const save = '\u001b7';
const restore = '\u001b8';
const clearBelow = '\u001b[J';
const clearRest = '\u001b[K';

/**
 * Lines that are redrawn where they stand, in sequences that every terminal knows (ECMA-48, and the two older ones by
 * which the cursor is kept and taken back).
 *
 * The cursor rests on an empty line above them and not below the last: whatever is typed meanwhile is echoed there,
 * and what Enter moves down stays among the lines, where the window need not scroll. So the place is found again without
 * a change to the terminal's modes, which would stay where the program is killed; and a window that is resized breaks
 * lines below the cursor only.
 */
export class Block {
  readonly #write: (text: string) => unknown;
  #isDrawn = false;

  constructor(write: (text: string) => unknown) {
    this.#write = write;
  }

  /** Instead of what was drawn before; else below the line on which the cursor stands, which is to be empty. */
  draw(lines: readonly string[]): void {
    const start = this.#isDrawn ? `${restore}\r` : '';
    const drawn = lines.map((line) => `${clearRest}\n${line}`).join('');
    this.#write(`${start}${drawn}${clearBelow}\r\u001b[${lines.length}A${save}`);
    this.#isDrawn = true;
  }

  /** The cursor stands on an empty line then, and nothing below it. */
  takeAway(): void {
    if (this.#isDrawn) this.#write(`${restore}\r${clearBelow}`);
    this.#isDrawn = false;
  }

  /** The same where the window was resized: what was kept is a place of the old one, but the cursor went along. */
  takeAwayResized(): void {
    if (this.#isDrawn) this.#write(`\r${clearBelow}`);
    this.#isDrawn = false;
  }

  /** Others have written over it: it is not ours to take away any more. */
  forget(): void {
    this.#isDrawn = false;
  }
}
