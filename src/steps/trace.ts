import { formatQuantity } from '../quantity/format-quantity.js';
import type { Amperes, Ratio, Seconds, Volts } from '../quantity/quantity.js';
import { afterwards } from './afterwards.js';
import { givesVoltage } from './gives-voltage.js';
import { openCircuitVoltage } from './known-voltage.js';
import { Points, type PointSeen } from './point.js';
import { comeBack } from './recover.js';
import type { StepContext } from './step-kind.js';

/** All in volts and seconds; what each means stands in the step's schema. */
export interface TraceParameters {
  readonly from: Volts;
  readonly to: Volts;
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

/** Of what the bench allows, for a point that is to tell what lower ones will take. */
const safely: Ratio = 0.95;
/** Of the last voltage; one closer to it would tell nothing new. */
const closest: Ratio = 0.97;

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
 * reckoned whether it may exceed what the bench allows.
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
    for (let index = 0; index < points; index += 1) {
      const share = index / (points - 1);
      const voltage = share === 1 ? to : from + (to - from) * share;
      if (!(await this.#mayGoTo(voltage)) || !(await this.#point(voltage))) return;
    }
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
    }
    if (rest === 0) return true;
    if (this.#on) await bench.load.inputOff();
    this.#on = false;
    await clock.sleep(rest, signal);
    return true;
  }

  /**
   * Whether the module is expected to stay within what the bench allows. After one point alone its limit may
   * be anything up to a constant power, and a point between tells more.
   */
  async #mayGoTo(voltage: Volts): Promise<boolean> {
    const allowed = this.#context.limits.current.value;
    const last = this.#traced.at(-1);
    if (last === undefined || currentAhead(this.#traced, voltage) <= allowed) return true;
    const between = (last.current * last.voltage) / (safely * allowed);
    if (this.#traced.length === 1 && between < closest * last.voltage) {
      if (!(await this.#point(between))) return false;
    }
    const expected = currentAhead(this.#traced, voltage);
    if (expected <= allowed) return true;
    this.#note(
      `at ${formatQuantity(voltage, 'voltage', { significant: 3 })} the module would give about ` +
        `${formatQuantity(expected, 'current', { significant: 3 })}, more than the bench allows; the trace ends here`,
    );
    return false;
  }

  /** A point ends by the clock: a slow meter takes fewer readings, not a longer point. */
  #look(voltage: Volts): Promise<PointSeen> {
    const { dwell, readings, watch } = this.#parameters;
    const end = this.#context.clock.now() + dwell + watch;
    let count = 0;
    return this.#points.take({
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

/**
 * What may flow at a lower voltage: as the last two points go on, a straight line over 1/V, but no more than
 * at a constant power, beyond which no limit goes. In regulation both say little, and there the guards must.
 */
function currentAhead(traced: readonly Traced[], voltage: Volts): Amperes {
  const last = traced.at(-1);
  if (last === undefined || voltage <= 0) return 0;
  const atSamePower = (last.current * last.voltage) / voltage;
  const before = traced.at(-2);
  if (before === undefined) return atSamePower;
  const slope = (last.current - before.current) / (1 / last.voltage - 1 / before.voltage);
  return Math.min(atSamePower, last.current + slope * (1 / voltage - 1 / last.voltage));
}
