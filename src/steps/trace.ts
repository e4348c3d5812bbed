import { formatQuantity } from '../quantity/format-quantity.js';
import type { Amperes, Ratio, Seconds, Volts } from '../quantity/quantity.js';
import { afterwards } from './afterwards.js';
import { givesVoltage } from './gives-voltage.js';
import { openCircuitVoltage } from './known-voltage.js';
import { Points, type PointSeen } from './point.js';
import { comeBack } from './recover.js';
import type { StepContext } from './step-kind.js';

/** All in volts, amperes and seconds; what each means stands in the step's schema. */
export interface TraceParameters {
  readonly from: Volts;
  readonly to: Volts;
  readonly ceiling: Amperes;
  readonly points: number;
  readonly dwell: Seconds;
  readonly readings: number;
  readonly watch: Seconds;
  readonly rest: Seconds;
  readonly recovery: Seconds;
}

/** Between two readings of a point that is watched. */
const watchInterval: Seconds = 0.05;
/** The module is back when its voltage is within this of what it was without load. */
const sag: Ratio = 0.1;
/** Of the voltage that the load holds: with less, the module gives nothing to hold. */
const gone: Ratio = 0.5;

/** Of what is allowed, for a point that is to tell what lower ones will take. */
const safely: Ratio = 0.95;
/** Of what is allowed; closer to it a further point would tell nothing new. */
const leastRoom: Ratio = 0.05;
/** Points between two, at most. */
const mostExtra = 5;
/** Of the open-circuit voltage, from one point to the next where nobody knows yet what the module gives. */
const approach: Ratio = 0.005;
const mostApproaching = 4;

/** What flowed at a voltage. */
interface Traced {
  readonly voltage: Volts;
  readonly current: Amperes;
}

/**
 * The trace of a limit: the load holds a voltage, lower from point to point, and takes what the module gives
 * there. A constant-current load drags a module that folds back down to its low point and keeps it there;
 * at a given voltage it can only be where its curve is.
 *
 * What a constant voltage draws is the module's doing. The guards stay on, and before each point it is
 * reckoned whether it may exceed what the step and the bench allow.
 */
export class Trace {
  readonly #parameters: TraceParameters;
  readonly #context: StepContext;
  readonly #points: Points;
  readonly #openCircuit: Volts;
  readonly #traced: Traced[] = [];
  #on = false;

  constructor(parameters: TraceParameters, context: StepContext) {
    this.#parameters = parameters;
    this.#context = context;
    this.#points = new Points(context);
    this.#openCircuit = openCircuitVoltage(context);
  }

  /** Whatever happens, the load is told to end as it began: input off, constant current, 0 A. */
  async run(): Promise<void> {
    const { load } = this.#context.bench;
    if (!(await givesVoltage(this.#context, this.#points, this.#least()))) return;
    await afterwards(
      async () => {
        await load.mode('voltage');
        await this.#down();
      },
      async () => {
        await load.inputOff();
        await load.mode('current');
        await load.unload();
      },
    );
  }

  async #down(): Promise<void> {
    const { from, to, points } = this.#parameters;
    if (!(await this.#approach(from))) return;
    for (let index = 0; index < points; index += 1) {
      const share = index / (points - 1);
      const voltage = share === 1 ? to : from + (to - from) * share;
      if (!(await this.#mayGoTo(voltage)) || !(await this.#point(voltage))) return;
    }
  }

  /**
   * To where the trace begins in small steps, until something flows that says how the current grows; whether
   * there is more to trace. Not needed where a step before has seen the module drop out within what is allowed.
   */
  async #approach(from: Volts): Promise<boolean> {
    const { dropped } = this.#context.tried;
    if (dropped !== undefined && dropped <= this.#allowedAt(from)) return true;
    for (let step = 1; step <= mostApproaching; step += 1) {
      const voltage = this.#openCircuit * (1 - step * approach);
      if (voltage <= from) return true;
      if (!(await this.#point(voltage))) return false;
      if ((this.#traced.at(-1)?.current ?? 0) > leastRoom * this.#allowedAt(voltage)) return true;
    }
    return true;
  }

  /** The ceiling, or less where the bench allows no more, or its power at that voltage. */
  #allowedAt(voltage: Volts): Amperes {
    const { current, power } = this.#context.limits;
    const byPower = voltage > 0 ? power.value / voltage : Number.POSITIVE_INFINITY;
    return Math.min(this.#parameters.ceiling, current.value, byPower);
  }

  /** One point, and the rest after it; whether there is more to trace. */
  async #point(voltage: Volts): Promise<boolean> {
    const { clock, signal, bench } = this.#context;
    const { rest } = this.#parameters;
    // Before the input is on: what was set before may be anything, and 0 V would short the module.
    await bench.load.setVoltage(voltage);
    if (!this.#on) await bench.load.inputOn();
    this.#on = true;
    const seen = await this.#look(voltage);
    if (seen.load === 'let-go') {
      this.#note('the load holds no voltage at this module; the trace ends here');
      await this.#comeBack();
      return false;
    }
    if (isGone(seen, voltage)) {
      if ((await this.#comeBack()) !== 'came-back') return false;
      this.#on = false;
    } else {
      this.#traced.push({ voltage, current: seen.current.maximum });
      if (seen.current.maximum > this.#allowedAt(voltage)) {
        this.#note('the module gives more than is allowed; the trace ends here');
        return false;
      }
    }
    if (rest === 0) return true;
    if (this.#on) await bench.load.inputOff();
    this.#on = false;
    await clock.sleep(rest, signal);
    return true;
  }

  /**
   * Whether the module is expected to stay within what is allowed. Where it is not, points between tell how its
   * current really goes on: in regulation it grows steeply, and at its limit no more.
   */
  async #mayGoTo(voltage: Volts): Promise<boolean> {
    for (let extra = 0; ; extra += 1) {
      const last = this.#traced.at(-1);
      if (last === undefined) return true;
      const before = this.#traced.at(-2) ?? { voltage: this.#openCircuit, current: 0 };
      const ahead = currentAhead(before, last);
      const expected = ahead.at(voltage);
      const allowed = this.#allowedAt(voltage);
      if (expected <= allowed) return true;
      // At a higher voltage the same power is less current.
      const next = Math.min(safely * allowed, safely * this.#allowedAt(last.voltage));
      if (extra === mostExtra || next - last.current < leastRoom * allowed) {
        this.#note(
          `at ${formatQuantity(voltage, 'voltage', { significant: 3 })} the module would give about ` +
            `${formatQuantity(expected, 'current', { significant: 3 })}, more than is allowed; the trace ends here`,
        );
        return false;
      }
      if (!(await this.#point(ahead.whereIs(next)))) return false;
    }
  }

  /** A point ends by the clock: a slow meter takes fewer readings, not a longer point. */
  #look(voltage: Volts): Promise<PointSeen> {
    const { dwell, readings, watch } = this.#parameters;
    return this.#points.take(() => {
      const end = this.#context.clock.now() + dwell + watch;
      let count = 0;
      return {
        phase: 'trace',
        set: { voltage },
        dwell,
        readings: Number.POSITIVE_INFINITY,
        every: watchInterval,
        judge: () => 'measured',
        until: ({ t }) => {
          count += 1;
          return count >= readings && t >= end;
        },
      };
    });
  }

  /** A module that stays off has latched: it gives nothing at lower voltages either. */
  async #comeBack(): Promise<Awaited<ReturnType<typeof comeBack>>> {
    const back = await comeBack(this.#context, this.#points, this.#least(), this.#parameters.recovery);
    if (back !== 'came-back') this.#note('the module has latched off; the trace ends here');
    return back;
  }

  #least(): Volts {
    return this.#openCircuit * (1 - sag);
  }

  #note(text: string): void {
    this.#context.journal.append({ event: 'notice', text });
  }
}

/** In no reading of the point there was anything: it has switched itself off, for good or until it tries again. */
function isGone({ voltage, current }: PointSeen, held: Volts): boolean {
  return voltage.maximum < gone * held && (current.count === 0 || current.maximum < 0.05);
}

/** What may flow at lower voltages: as the last two points go on, a straight line over 1/V, as at constant power. */
function currentAhead(before: Traced, last: Traced) {
  const slope = (last.current - before.current) / (1 / last.voltage - 1 / before.voltage);
  return {
    at: (voltage: Volts): Amperes =>
      slope <= 0 || voltage <= 0 ? last.current : last.current + slope * (1 / voltage - 1 / last.voltage),
    /** The voltage at which this current is expected, more than the last. */
    whereIs: (current: Amperes): Volts => 1 / (1 / last.voltage + (current - last.current) / slope),
  };
}
