import { realClock } from '../../clock/real-clock.js';
import { printable } from '../../quantity/printable.js';
import type { Seconds } from '../../quantity/quantity.js';
import { fitted } from '../../quantity/word-wrap.js';
import { styleFor } from '../../report/style.js';
import { showsUnicode } from '../../report/unicode-terminal.js';
import { Block } from './block.js';
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
  const block = new Block(write);
  let drawnAt = -Infinity;
  let isLineOpen = false;
  let isSuspended = false;
  let pending: NodeJS.Timeout | undefined;
  let notice: string | undefined;

  const draw = (): void => {
    if (isLineOpen || isSuspended) return;
    drawnAt = realClock.now();
    block.draw(frame(run, notice, { columns: stream.columns, rows: stream.rows, ...look }));
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
    block.takeAway();
    const text = typeof chunk === 'string' ? chunk : Buffer.from(chunk).toString('latin1');
    if (text !== '') isLineOpen = !text.endsWith('\n');
    return write(chunk, ...rest);
  };

  const resized = (): void => {
    block.takeAwayResized();
    draw();
  };
  const suspended = (): void => {
    block.takeAway();
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
    block.forget();
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
      block.takeAway();
      clearInterval(timer);
      clearTimeout(pending);
      stream.off('resize', resized);
      process.off('SIGTSTP', suspended).off('SIGCONT', resumed);
      if (before === undefined) Reflect.deleteProperty(stream, 'write');
      else Object.defineProperty(stream, 'write', before);
    },
  };
}
