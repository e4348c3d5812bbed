import { clearLine, cursorTo } from 'node:readline';
import type { Clock } from '../clock/clock.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import { printable } from '../quantity/printable.js';
import type { Dimension, Seconds } from '../quantity/quantity.js';
import { fitted } from '../quantity/word-wrap.js';
import type { Plan } from '../run/plan.js';
import type { RunWatcher } from '../run/perform.js';
import type { Progress } from '../steps/step-kind.js';

/** A terminal is redrawn no more often than an eye can follow. */
const redrawEvery = 100;

/**
 * Where the run is: on a terminal one line that changes in place, with the step, the set-point, what is
 * read, the time gone and the time left; elsewhere one plain line a step.
 */
export class ProgressLine implements RunWatcher {
  readonly #stream: NodeJS.WriteStream;
  readonly #plan: Plan;
  readonly #clock: Clock;
  readonly #began: Seconds;
  #stepBegan: Seconds;
  #drawn = 0;

  constructor(stream: NodeJS.WriteStream, plan: Plan, clock: Clock) {
    this.#stream = stream;
    this.#plan = plan;
    this.#clock = clock;
    this.#began = clock.now();
    this.#stepBegan = this.#began;
  }

  stepBegan(step: number, kind: string, summary: string): void {
    this.#stepBegan = this.#clock.now();
    this.clear();
    this.#stream.write(`step ${step} of ${this.#plan.steps.length}: ${kind}, ${printable(summary)}\n`);
  }

  progress(step: number, progress: Progress): void {
    if (!this.#stream.isTTY) return;
    const now = Date.now();
    if (now - this.#drawn < redrawEvery) return;
    this.#drawn = now;
    this.clear();
    const width = this.#stream.columns;
    this.#stream.write(this.#text(step, progress).slice(0, width - 1));
  }

  recorded(): void {
    // Its steps and readings come by the other ways.
  }

  noticed(text: string): void {
    this.clear();
    this.#stream.write(`${fitted(printable(text), this.#stream.columns, { indent: '  ' })}\n`);
  }

  /** Leaves an empty line for whoever writes next. */
  clear(): void {
    if (!this.#stream.isTTY) return;
    cursorTo(this.#stream, 0);
    clearLine(this.#stream, 0);
  }

  #text(step: number, { setCurrent, voltage, current, temperature, note }: Progress): string {
    const power = voltage === undefined || current === undefined ? undefined : voltage * current;
    const now = this.#clock.now();
    return [
      `  ${step}/${this.#plan.steps.length}`,
      setCurrent === undefined ? '' : `set ${show(setCurrent, 'current')}`,
      voltage === undefined ? '' : show(voltage, 'voltage'),
      current === undefined ? '' : show(current, 'current'),
      power === undefined ? '' : show(power, 'power'),
      temperature === undefined ? '' : show(temperature, 'temperature'),
      printable(note ?? ''),
      `${minutes(now - this.#began)} gone, about ${minutes(this.#remaining(step, now))} left`,
    ]
      .filter((part) => part !== '')
      .join('  ');
  }

  #remaining(step: number, now: Seconds): Seconds {
    const current = this.#plan.steps[step - 1]?.duration ?? 0;
    const later = this.#plan.steps.slice(step).reduce((sum, one) => sum + one.duration, 0);
    return Math.max(0, current - (now - this.#stepBegan)) + later;
  }
}

function show(value: number, dimension: Dimension): string {
  return Number.isNaN(value) ? 'no reading' : formatQuantity(value, dimension, { significant: 4 });
}

function minutes(seconds: Seconds): string {
  const whole = Math.round(seconds);
  return `${Math.floor(whole / 60)}:${String(whole % 60).padStart(2, '0')}`;
}
