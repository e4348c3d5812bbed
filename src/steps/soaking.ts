import { formatQuantity } from '../quantity/format-quantity.js';
import type { Amperes, Celsius, Kelvins, Ratio, Seconds, Volts } from '../quantity/quantity.js';
import { givesVoltage } from './gives-voltage.js';
import { holds } from './holding.js';
import { openCircuitVoltage } from './known-voltage.js';
import { Points, type PointSeen } from './point.js';
import { comeBack } from './recover.js';
import { Settling } from './settling.js';
import { ModuleStaysOffError } from './step-error.js';
import type { StepContext } from './step-kind.js';

/** What each means stands in the step's schema. */
export interface SoakParameters {
  readonly current: Amperes;
  readonly longest: Seconds;
  readonly every: Seconds;
  readonly dwell: Seconds;
  readonly readings: number;
  readonly settledWithin: Kelvins;
  readonly voltageWithin: Ratio;
  readonly over: Seconds;
  readonly sag: Ratio;
  readonly limit: Celsius | undefined;
}

/** Looks at the idle module before anything flows: they give the temperature that it starts from. */
const coldLooks = 5;
const betweenColdLooks: Seconds = 1;
/** How long a module that did not hold the current may take to come back. */
const patience: Seconds = 10;
/** Whoever watches sees the time pass. */
const tick: Seconds = 1;

/** A soak: a current held, a look at the module from time to time, until there is nothing new to see. */
export class Soak {
  readonly #parameters: SoakParameters;
  readonly #context: StepContext;
  readonly #points: Points;
  readonly #openCircuit: Volts;
  readonly #temperature: Settling;
  readonly #voltage: Settling;

  constructor(parameters: SoakParameters, context: StepContext) {
    const { settledWithin, voltageWithin, over } = parameters;
    this.#parameters = parameters;
    this.#context = context;
    this.#points = new Points(context);
    this.#openCircuit = openCircuitVoltage(context);
    this.#temperature = new Settling({ within: settledWithin, over });
    this.#voltage = new Settling({ within: voltageWithin * this.#openCircuit, over });
  }

  /** The load is off at the end; a module that dropped out has come back by then. */
  async run(): Promise<void> {
    const { load } = this.#context.bench;
    if (!(await givesVoltage(this.#context, this.#points, this.#least()))) return;
    await this.#lookCold();
    await load.unload();
    await load.inputOn();
    const began = this.#context.clock.now();
    for (let look = 0; ; look += 1) {
      const due = began + look * this.#parameters.every;
      await this.#waitUntil(due, began);
      const seen = await this.#look();
      if (seen.outcome === 'dropped') {
        await this.#dropped(began);
        return;
      }
      const end = this.#endAfter(seen, this.#context.clock.now() - began);
      if (end === undefined) continue;
      this.#note(end);
      break;
    }
    const { tried } = this.#context;
    tried.held = Math.max(this.#parameters.current, tried.held ?? this.#parameters.current);
    await load.unload();
    await load.inputOff();
  }

  async #lookCold(): Promise<void> {
    for (let look = 0; look < coldLooks; look += 1) {
      await this.#points.take({
        phase: 'idle',
        set: {},
        wanted: { temperature: true },
        dwell: betweenColdLooks,
        readings: this.#parameters.readings,
        judge: () => 'measured',
      });
    }
  }

  #look(): Promise<PointSeen> {
    const { current, dwell, readings, sag } = this.#parameters;
    return this.#points.take({
      phase: 'soak',
      set: { current },
      wanted: { temperature: true },
      dwell,
      readings,
      judge: holds(this.#openCircuit, sag, current),
    });
  }

  /** In words, why there is nothing more to wait for; undefined while there is. */
  #endAfter({ temperature, voltage, last }: PointSeen, gone: Seconds): string | undefined {
    const { bench } = this.#context;
    const { limit, longest, every } = this.#parameters;
    if (temperature !== undefined) this.#temperature.add(last, temperature);
    this.#voltage.add(last, voltage.mean);
    const after = formatQuantity(gone, 'time', { significant: 3 });
    if (temperature !== undefined && limit !== undefined && temperature > limit) {
      const read = formatQuantity(temperature, 'temperature', { significant: 3 });
      return `after ${after} the module reads ${read}, above its limit of ${formatQuantity(limit, 'temperature')}; the soak ends here`;
    }
    const settled = (bench.thermometer === undefined ? this.#voltage : this.#temperature).settled;
    if (settled) return `settled after ${after}`;
    return gone + every > longest ? `not settled after ${after}; the soak ends here` : undefined;
  }

  async #dropped(began: Seconds): Promise<void> {
    const { tried, clock, bench } = this.#context;
    const { current } = this.#parameters;
    tried.dropped = Math.min(current, tried.dropped ?? current);
    const after = formatQuantity(clock.now() - began, 'time', { significant: 3 });
    this.#note(`after ${after} the module did not hold the current any more; the soak ends here`);
    const back = await comeBack(this.#context, this.#points, this.#least(), patience);
    if (back === 'stayed-off') throw new ModuleStaysOffError(false);
    await bench.load.unload();
  }

  async #waitUntil(due: Seconds, began: Seconds): Promise<void> {
    const { clock, signal, show } = this.#context;
    const { longest, current } = this.#parameters;
    for (let now = clock.now(); now < due; now = clock.now()) {
      await clock.sleep(Math.min(tick, due - now), signal);
      const gone = minutes(clock.now() - began);
      show({ setCurrent: current, note: `soaking for ${gone} of ${minutes(longest)} at most` });
    }
  }

  #least(): Volts {
    return this.#openCircuit * (1 - this.#parameters.sag);
  }

  #note(text: string): void {
    this.#context.journal.append({ event: 'notice', text });
  }
}

function minutes(seconds: Seconds): string {
  return `${Math.floor(seconds / 60)} min`;
}
