import { clearLine, cursorTo, moveCursor } from 'node:readline';
import { stripVTControlCharacters } from 'node:util';
import { createLogUpdate } from 'log-update';
import { realClock } from '../../clock/real-clock.js';
import { printable } from '../../quantity/printable.js';
import type { Seconds } from '../../quantity/quantity.js';
import { fitted } from '../../quantity/word-wrap.js';
import { styleFor } from '../../report/style.js';
import { showsUnicode } from '../../report/unicode-terminal.js';
import { frame } from './frame.js';
import type { RunProgress } from './run-progress.js';
import type { RunSoFar } from './run-so-far.js';

/** A terminal is redrawn no more often than an eye can follow. */
const redrawEvery: Seconds = 0.1;
/** Time goes on while an instrument is waited for. */
const tick: Seconds = 1;

/**
 * A block at the end of what stands on the terminal, redrawn in its place. Whoever else writes there (a question, a
 * wish to stop, a warning) finds it taken away, and it comes back below what they wrote once their line is ended.
 */
export function liveProgress(
  stream: NodeJS.WriteStream,
  environment: NodeJS.ProcessEnv,
  run: RunSoFar,
): RunProgress {
  const look = { unicode: showsUnicode(environment), style: styleFor(stream, environment) };
  const before = Object.getOwnPropertyDescriptor(stream, 'write');
  const write = stream.write.bind(stream);
  const own = {
    isTTY: true,
    get columns() {
      return stream.columns;
    },
    get rows() {
      return stream.rows;
    },
    write,
  } as unknown as NodeJS.WriteStream;
  // A cursor that was hidden would stay so where the program is killed.
  const block = createLogUpdate(own, { showCursor: true });
  let drawn: readonly string[] = [];
  let drawnAt = -Infinity;
  let isLineOpen = false;
  let isSuspended = false;
  let pending: NodeJS.Timeout | undefined;
  let notice: string | undefined;

  const takeAway = (): void => {
    if (drawn.length === 0) return;
    // A terminal that became narrower has broken the lines: they stand on more rows than were drawn.
    const rows = drawn.reduce((sum, line) => sum + rowsOf(line, stream.columns), 0);
    for (let extra = rows - drawn.length; extra > 0; extra -= 1) {
      clearLine(own, 0);
      moveCursor(own, 0, -1);
    }
    cursorTo(own, 0);
    block.clear();
    drawn = [];
  };
  const draw = (): void => {
    if (isLineOpen || isSuspended) return;
    drawnAt = realClock.now();
    drawn = frame(run, notice, { columns: stream.columns, rows: stream.rows, ...look });
    block(drawn.join('\n'));
  };
  const soon = (): void => {
    const wait = redrawEvery - (realClock.now() - drawnAt);
    if (wait <= 0) draw();
    else pending ??= setTimeout(drawLate, wait * 1000).unref();
  };
  const drawLate = (): void => {
    pending = undefined;
    soon();
  };

  stream.write = (chunk: string | Uint8Array, ...rest: never[]): boolean => {
    takeAway();
    const text = typeof chunk === 'string' ? chunk : Buffer.from(chunk).toString('latin1');
    if (text !== '') isLineOpen = !text.endsWith('\n');
    return write(chunk, ...rest);
  };

  const resized = (): void => {
    takeAway();
    draw();
  };
  const suspended = (): void => {
    takeAway();
    // Once it goes on, what was due meanwhile comes before it hears of it.
    isSuspended = true;
    process.off('SIGTSTP', suspended);
    // Nobody handles it any more, so this time it suspends.
    process.kill(process.pid, 'SIGTSTP');
  };
  const resumed = (): void => {
    isSuspended = false;
    process.off('SIGTSTP', suspended).on('SIGTSTP', suspended);
    // Whatever was drawn before is not ours to take away: others have written below it.
    block.done();
    drawn = [];
    draw();
  };
  const timer = setInterval(soon, tick * 1000).unref();
  stream.on('resize', resized);
  process.on('SIGTSTP', suspended).on('SIGCONT', resumed);

  return {
    stepBegan: soon,
    progress: soon,
    recorded({ event }) {
      if (event === 'step-ended') soon();
    },
    noticed(text) {
      notice = printable(text);
      stream.write(`${fitted(notice, stream.columns, { indent: '  ' })}\n`);
      soon();
    },
    end() {
      takeAway();
      clearInterval(timer);
      clearTimeout(pending);
      stream.off('resize', resized);
      process.off('SIGTSTP', suspended).off('SIGCONT', resumed);
      if (before === undefined) Reflect.deleteProperty(stream, 'write');
      else Object.defineProperty(stream, 'write', before);
    },
  };
}

/** How many rows of a terminal so wide a line of ours takes. */
function rowsOf(line: string, columns: number): number {
  const { length } = Array.from(stripVTControlCharacters(line));
  return Math.max(1, Math.ceil(length / Math.max(1, columns)));
}
