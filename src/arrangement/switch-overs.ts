import { endVoltageOf, limitOf, openVoltageOf, voltageOf } from '../circuit/supply-line.js';
import type { Volts } from '../quantity/quantity.js';
import type { LaidOut } from './laid-out.js';
import { movementBetween } from './movements.js';
import type { SwitchOver } from './staged-build.js';
import type { StagesWish } from './stages-wish.js';
import { requireHysteresis } from './stages-sense.js';
import type { Switching } from './switching.js';

/**
 * From each arrangement to the next higher one and back. It goes up at the output at which the lower one, at the
 * lowest that its voltage may be and at its full current, leaves the linear stage just its drop-out; it comes back
 * by the hysteresis below.
 * @throws UnfitWishError where the hysteresis leaves no room for that.
 */
export function switchOversOf(
  laid: readonly LaidOut[],
  wish: StagesWish,
  switching: Switching,
): readonly SwitchOver[] {
  const steps = laid.slice(1).flatMap((upper, index) => {
    const lower = laid[index];
    return lower === undefined ? [] : [{ lower, upper, up: upAt(lower, wish) }];
  });
  requireHysteresis(
    steps.map(({ lower, upper, up }) => ({ lower: lower.found.name, upper: upper.found.name, up })),
    wish,
  );
  return steps.map(({ lower, upper, up }) => ({
    lower: lower.found.name,
    upper: upper.found.name,
    up,
    down: up - wish.hysteresis,
    swing: swingOf(lower, upper),
    goingUp: movementBetween(switching, lower.driven, upper.driven),
    comingDown: movementBetween(switching, upper.driven, lower.driven),
  }));
}

function upAt({ low, fullCurrent }: LaidOut, { linearStage }: StagesWish): Volts {
  return voltageOf(low, fullCurrent) - linearStage.dropOut;
}

/** At worst: from the lowest that the lower may have to the highest of the upper one. */
function swingOf(lower: LaidOut, upper: LaidOut): SwitchOver['swing'] {
  const full = Math.min(lower.fullCurrent, upper.fullCurrent);
  const high = full <= limitOf(upper.high) ? voltageOf(upper.high, full) : endVoltageOf(upper.high);
  return {
    noLoad: openVoltageOf(upper.high) - openVoltageOf(lower.low),
    fullLoad: high - voltageOf(lower.low, full),
  };
}
