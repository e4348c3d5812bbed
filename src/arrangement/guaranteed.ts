import { currentWithin } from '../circuit/dissipation-limit.js';
import { currentAt, voltageOf } from '../circuit/supply-line.js';
import type { Amperes, Volts, Watts } from '../quantity/quantity.js';
import type { LaidOut } from './laid-out.js';
import type { DissipationMap, Guaranteed, GuaranteedPoint, SwitchOver } from './staged-build.js';
import type { LinearStage, StagesWish } from './stages-wish.js';

const places = 101;
/** Beside a switch-over, so that a chart shows the step and not a slope. */
const beside: Volts = 1e-3;
const mapOutputs = 40;
const mapCurrents = 30;

interface Staged {
  readonly laid: readonly LaidOut[];
  readonly switchOvers: readonly SwitchOver[];
  readonly mostDissipation: Watts;
  readonly wish: StagesWish;
}

/** The current that is guaranteed at each output voltage, coming from below and from above. */
export function guaranteedOver(staged: Staged): readonly GuaranteedPoint[] {
  const { switchOvers, wish } = staged;
  const { from, to } = wish.output;
  const steps = switchOvers.flatMap(({ up, down }) => [up, up + beside, down - beside, down]);
  const outputs = [...spread(from, to, places), ...steps.filter((output) => output > from && output < to)];
  return [...new Set(outputs)]
    .sort((one, other) => one - other)
    .map((output) => ({
      output,
      rising: guaranteedAt(risingAt(staged, output), output, staged),
      falling: guaranteedAt(fallingAt(staged, output), output, staged),
    }));
}

/** Its arrangement as the output rises: the next one only beyond the switch-over. */
function risingAt({ laid, switchOvers }: Staged, output: Volts): LaidOut | undefined {
  return laid[switchOvers.filter(({ up }) => output > up).length];
}

/** As it falls: the lower one only below the point at which it comes back. */
function fallingAt({ laid, switchOvers }: Staged, output: Volts): LaidOut | undefined {
  return laid[switchOvers.filter(({ down }) => output >= down).length];
}

/**
 * The least of what the modules and their ballasts allow, what the linear stage passes, what leaves it its
 * drop-out with the lowest voltage, and what it can turn into heat with the highest.
 */
function guaranteedAt(
  laid: LaidOut | undefined,
  output: Volts,
  { mostDissipation, wish: { linearStage } }: Pick<Staged, 'mostDissipation' | 'wish'>,
): Guaranteed {
  if (laid === undefined) throw new RangeError(`no arrangement at ${output} V`);
  const limits: readonly Omit<Guaranteed, 'arrangement'>[] = [
    { current: laid.limit, setBy: laid.limitedBy },
    { current: linearStage.current, setBy: 'linear-stage' },
    { current: currentAt(laid.low, output + linearStage.dropOut), setBy: 'drop-out' },
    { current: currentWithin(laid.high, output, mostDissipation), setBy: 'dissipation' },
  ];
  // At a switch-over the drop-out leaves just the full current, but for arithmetic.
  const least = limits.reduce((one, other) => (other.current < one.current * (1 - arithmetic) ? other : one));
  return { arrangement: laid.found.name, ...least };
}

/** The highest output at which anything at all is left above the drop-out. */
export function highestOutput(laid: readonly LaidOut[], { dropOut }: LinearStage): Volts {
  return Math.max(...laid.map(({ low }) => low.corners[0].voltage - dropOut));
}

/** What the linear stage turns into heat, at the highest voltage that the modules may have. */
export function dissipationMap(staged: Staged, guaranteed: readonly GuaranteedPoint[]): DissipationMap {
  const { from, to } = staged.wish.output;
  const most = Math.max(...guaranteed.map(({ rising }) => rising.current));
  const outputs = spread(from, to, mapOutputs);
  const currents = spread(most / mapCurrents, most, mapCurrents);
  return {
    outputs,
    currents,
    watts: outputs.map((output) => {
      const laid = risingAt(staged, output);
      const { current: allowed } = guaranteedAt(laid, output, staged);
      return currents.map((current) => heatAt(laid, { output, current, allowed }));
    }),
  };
}

function heatAt(
  laid: LaidOut | undefined,
  {
    output,
    current,
    allowed,
  }: { readonly output: Volts; readonly current: Amperes; readonly allowed: Amperes },
): Watts | null {
  if (laid === undefined || current > allowed * (1 + arithmetic)) return null;
  return (voltageOf(laid.high, Math.min(current, allowed)) - output) * current;
}

const arithmetic = 1e-9;

/** Evenly, both ends included. */
function spread(from: number, to: number, count: number): readonly number[] {
  return Array.from({ length: count }, (_, index) =>
    index === count - 1 ? to : from + ((to - from) * index) / (count - 1),
  );
}
