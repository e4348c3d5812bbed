import type { DriverReading } from '../files/driver.js';
import type { Seconds } from '../quantity/quantity.js';
import type { DriverPart } from './driver-part.js';
import { RangeChoice } from './range-choice.js';
import { readNumber } from './reading.js';
import type { Measurement } from './scpi-number.js';
import { ask, type Talk, tellAndCheck } from './tell.js';
import { understood } from './understood.js';

type NumberReading = Extract<DriverReading, { kind: 'number' }>;

/**
 * Reads one of an instrument's readings again and again: on the range that suits it, and never so soon that
 * what is averaged is in part what was read before.
 */
export class NumberReader {
  readonly #talk: Talk;
  readonly #reading: NumberReading;
  readonly #part: DriverPart;
  #ranges: RangeChoice | undefined;
  /** The range that the instrument was told last; none when it may be on any. */
  #told: number | undefined;
  /** No mean over what came after that reaches back before it. */
  #steadySince: Seconds = Number.NEGATIVE_INFINITY;

  constructor(talk: Talk, name: string, reading: NumberReading) {
    this.#talk = talk;
    this.#reading = reading;
    this.#part = { driver: talk.driver.name, section: 'readings', name };
    this.forgetRange();
  }

  /** The instrument may be on any range now. */
  forgetRange(): void {
    const { ranges } = this.#reading;
    this.#ranges = ranges && new RangeChoice(ranges);
    this.#told = undefined;
  }

  /**
   * On a range that does not hold it it is read again at once on the next wider one, so no more often than
   * there are ranges.
   * @throws as `Session.read`
   */
  async read(): Promise<Measurement> {
    for (;;) {
      await this.#choose();
      const measurement = await this.#ask();
      if (this.#ranges?.took(measurement) !== 'read-again') return measurement;
    }
  }

  async #choose(): Promise<void> {
    const chosen = this.#ranges?.chosen;
    if (chosen === undefined || chosen === this.#told) return;
    this.#told = undefined;
    await tellAndCheck(this.#talk, this.#reading.ranges?.[chosen]?.select ?? [], {
      ...this.#part,
      range: chosen,
    });
    this.#told = chosen;
    const { clock, driver } = this.#talk;
    this.#steadySince = clock.now() + driver.settling;
  }

  async #ask(): Promise<Measurement> {
    const { clock, dialogue, signal } = this.#talk;
    const pause = this.#steadySince + (this.#reading.averaging ?? 0) - clock.now();
    // A wish to stop ends the wait and not the reading: whoever asked looks after that themselves.
    if (pause > 0) await clock.sleep(pause, signal).catch(() => undefined);
    const reply = await ask(this.#talk, this.#reading.ask, this.#part);
    this.#steadySince = clock.now();
    const about = {
      address: dialogue.address,
      question: this.#reading.ask.at(-1)?.text ?? '',
      part: this.#part,
    };
    return understood(dialogue, () => readNumber(reply, this.#reading, about));
  }
}
