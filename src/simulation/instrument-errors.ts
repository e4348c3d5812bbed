import { type Post, roleOf } from '../files/bench.js';
import type { Accuracy, Driver } from '../files/driver.js';
import type { SimulatedError, Simulation } from '../files/simulation-section.js';
import type { Random } from '../statistics/random.js';

/** An instrument without a fault. */
export const exact: SimulatedError = { gain: 0, offset: 0, resolution: 0 };

/** The last digit of a reading is not still: this share of it is the standard deviation of its flicker. */
const FLICKER_OF_LAST_DIGIT = 0.3;

/**
 * The errors one instrument really has in one quantity: as the simulation says of it, or of its role, else
 * drawn within what the driver promises, else none. What is set is drawn apart from what is read (`set-current`, `set-voltage`),
 * so that a read-back differs a little from its setting, as it does on a bench.
 */
export function errorOf(
  simulation: Pick<Simulation, 'instruments'>,
  post: Post,
  driver: Driver,
  quantity: string,
  random: Random,
): SimulatedError {
  const told = (simulation.instruments[post] ?? simulation.instruments[roleOf(post)])?.errors[quantity];
  if (told !== undefined) return told;
  const promised = driver.accuracy[quantity.replace(/^set-/, '')];
  return promised === undefined ? exact : drawn(promised, random.fork(`${post} ${quantity}`));
}

/** Evenly within the promised half-widths, the last digit's share of them set aside. */
function drawn({ ofReading, fixed, resolution }: Accuracy, random: Random): SimulatedError {
  const step = resolution ?? usualResolution(fixed);
  const room = Math.max(0, fixed - step);
  return {
    gain: random.uniform(-ofReading, ofReading),
    offset: random.uniform(-room, room),
    resolution: step,
  };
}

/** A last digit is commonly a tenth of the fixed part of the accuracy, or finer. */
function usualResolution(fixed: number): number {
  return fixed > 0 ? 10 ** Math.floor(Math.log10(fixed / 10) + 1e-9) : 0;
}

/** What the instrument shows for what is there. */
export function shown(value: number, { gain, offset, resolution }: SimulatedError, random: Random): number {
  const measured = value * (1 + gain) + offset;
  if (resolution === 0) return measured;
  return Math.round(measured / resolution + FLICKER_OF_LAST_DIGIT * random.normal()) * resolution;
}
