import { formatQuantity } from '../quantity/format-quantity.js';
import type { Amperes, Celsius } from '../quantity/quantity.js';
import { GuardTrippedError } from './bench-error.js';
import { inARow, type Seen } from './frozen-readings.js';
import type { Told } from './guards.js';
import type { Trust } from './trust.js';

/**
 * Currents that can't be, several times in a row: a load only sinks, so none is below zero by more than its
 * error at zero; and with its input off it sinks nothing, so none is above it by more than that. The looks with
 * the input off are counted through whatever lies between them: a healthy load has not one such.
 */
export class ImpossibleCurrents {
  readonly #trust: Trust;
  #below = 0;
  #whileOff = 0;

  constructor(trust: Trust) {
    this.#trust = trust;
  }

  /** @throws GuardTrippedError `implausible-reading` or `current-while-off` */
  look({ current }: Seen, told: Told): void {
    if (Number.isNaN(current)) return;
    this.#below = current < -this.#trust.zero ? this.#below + 1 : 0;
    if (told.current === undefined && told.voltage === undefined)
      this.#whileOff = current > this.#trust.zero ? this.#whileOff + 1 : 0;
    if (this.#below >= inARow) {
      throw new GuardTrippedError(
        'implausible-reading',
        `${inARow} times in a row the load reads ${amps(current)}, and a load only takes current`,
        'are its leads the right way round, is its zero set, is its driver the right one?',
      );
    }
    if (this.#whileOff >= inARow) {
      throw new GuardTrippedError(
        'current-while-off',
        `with its input off the load reads ${amps(current)}, ${inARow} times in a row`,
        'it repeats an old reading, or its input is not off: unplug the module, then look at its panel',
      );
    }
  }
}

function amps(value: Amperes): string {
  return formatQuantity(value, 'current', { significant: 4 });
}

/** A thermometer on a module in a room; an open or a shorted probe reads beyond these, and guards nothing. */
const coldest: Celsius = -40;
const hottest: Celsius = 250;

/**
 * Whoever allows more than `hottest` means it.
 * @throws GuardTrippedError `implausible-reading`
 */
export function guardProbe(of: string, celsius: Celsius, allowed: Celsius = hottest): void {
  if (celsius >= coldest && celsius <= Math.max(hottest, allowed)) return;
  throw new GuardTrippedError(
    'implausible-reading',
    `the ${of} reads ${formatQuantity(celsius, 'temperature', { significant: 4 })}, which no module has`,
    'look at its probe: an open or a shorted one reads like that, or the wrong kind of probe is set',
  );
}
