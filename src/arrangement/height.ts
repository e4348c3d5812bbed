import type { Estimate } from './build.js';
import type { ModuleProfile } from './module-profile.js';

/** Of in-, from which heights are told. */
export const noHeight: Estimate = { value: 0, low: 0, high: 0 };

/** So much higher, whatever is true within both intervals. */
export function raisedBy(height: Estimate, by: Estimate): Estimate {
  return { value: height.value + by.value, low: height.low + by.low, high: height.high + by.high };
}

/** What a module adds to the height of what stands on it, with no load; ballasts then take nothing. */
export function openVoltageOf(module: string, profiles: readonly ModuleProfile[]): Estimate {
  const taken = profiles.find(({ name }) => name === module)?.openCircuit;
  return taken === undefined
    ? noHeight
    : { value: taken.value, low: taken.interval[0], high: taken.interval[1] };
}
