import { voltageResolution } from '../bench/module-voltage.js';
import type { Amperes, Ratio, Seconds, Volts } from '../quantity/quantity.js';
import type { Phase } from '../record/journal-event.js';
import { holds } from './holding.js';
import { openCircuitVoltage } from './known-voltage.js';
import { type PointSeen, Points } from './point.js';
import { comeBack } from './recover.js';
import type { StepContext } from './step-kind.js';
import { firstUnsteady, type Probe, probeOf } from './steadiness.js';

/** All in amperes, seconds and ratios; what each means stands in the step's schema. */
export interface SearchParameters {
  readonly from: Amperes;
  readonly ceiling: Amperes;
  readonly resolution: Amperes;
  readonly sag: Ratio;
  readonly climb: number;
  readonly dwell: Seconds;
  readonly readings: number;
  readonly watch: Seconds;
  readonly recovery: Seconds;
}

/** The module held the one and dropped out at the other; no `dropped` means that the ceiling was held. */
export interface Bracket {
  readonly held: Amperes;
  readonly dropped: Amperes | undefined;
}

/** A module whose limit keeps moving would be probed for ever. */
const mostProbes = 80;
const watchInterval = 0.05;
/** Fewer do not tell how a module limits. */
const fewestLooks = 3;

/**
 * The search for the current at which a module drops out.
 *
 * Every probe starts from a current that the module is known to hold. A dropout is ended at once, but for
 * the first one, which is watched for a while because it shows how the module limits; then the load goes
 * off, the module must come back by itself, and the known good current is proved again.
 */
export class Search {
  readonly #parameters: SearchParameters;
  readonly #context: StepContext;
  readonly #points: Points;
  readonly #openCircuit: Volts;
  readonly #resolution: Volts;
  readonly #probes: Probe[] = [];
  #held: Amperes = 0;
  #dropped: Amperes | undefined;
  #watched = false;
  #retreats = 0;
  #givenUp = false;

  constructor(parameters: SearchParameters, context: StepContext) {
    this.#parameters = parameters;
    this.#context = context;
    this.#points = new Points(context);
    this.#openCircuit = openCircuitVoltage(context);
    this.#resolution = voltageResolution(context.bench);
  }

  async run(): Promise<Bracket> {
    const { load } = this.#context.bench;
    await load.unload();
    await load.inputOn();
    this.#dropped = this.#droppedBefore();
    await this.#probe('start', this.#firstCurrent());
    await this.#climb();
    await this.#halve();
    await this.#closeInOnSteadiness();
    // Looking for steadiness may have shown that the limit has come down since.
    await this.#halve();
    await load.unload();
    await load.inputOff();
    return { held: this.#held, dropped: this.#dropped };
  }

  /** What an earlier step saw the module drop is dropped, and need not be proved again. */
  #droppedBefore(): Amperes | undefined {
    const { dropped } = this.#context.tried;
    return dropped !== undefined && dropped <= this.#parameters.ceiling ? dropped : undefined;
  }

  /** As told; but where a step has seen the module drop at no more than that, what it held, or half of it. */
  #firstCurrent(): Amperes {
    const from = Math.min(this.#parameters.from, this.#parameters.ceiling);
    const { held, dropped } = this.#context.tried;
    if (dropped === undefined || from < dropped) return from;
    return held !== undefined && held < dropped ? held : dropped / 2;
  }

  async #climb(): Promise<void> {
    const { from, ceiling, climb } = this.#parameters;
    const stride = (ceiling - from) / climb;
    if (stride <= 0) return;
    for (let step = 1; step <= climb && this.#dropped === undefined; step += 1) {
      await this.#probe('climb', step === climb ? ceiling : from + stride * step);
    }
  }

  async #halve(): Promise<void> {
    while (this.#dropped !== undefined && !this.#givenUp && this.#probes.length < mostProbes) {
      const width = this.#dropped - this.#held;
      if (width <= this.#parameters.resolution * (1 + 1e-9)) return;
      await this.#probe('halve', this.#held + width / 2);
    }
  }

  /** Between the last steady and the first unsteady current, held ones all: it costs no dropout. */
  async #closeInOnSteadiness(): Promise<void> {
    while (!this.#givenUp && this.#probes.length < mostProbes) {
      const edge = firstUnsteady(this.#probes, this.#resolution);
      if (edge === undefined || edge.unsteady - edge.steady <= 2 * this.#parameters.resolution) return;
      await this.#probe('steadiness', (edge.steady + edge.unsteady) / 2);
    }
  }

  async #probe(phase: Phase, current: Amperes): Promise<void> {
    const seen = await this.#take(phase, current);
    this.#probes.push(probeOf(current, seen));
    if (seen.outcome === 'held') {
      this.#held = Math.max(this.#held, current);
      return;
    }
    this.#dropped = Math.min(this.#dropped ?? Number.POSITIVE_INFINITY, current);
    // What was held above it earlier proves nothing any more.
    if (this.#held >= current) this.#held = Math.max(0, current - this.#retreat());
    // A load that has let go overloads nothing any more.
    if (!this.#watched && seen.load === 'as-told') await this.#watch(current);
    await this.#return();
  }

  /**
   * The overload goes on for a while: a module's limit shows in how it fails. It ends by the clock and not by
   * the number of readings, as a slow meter must not make a long overload of a short one.
   */
  async #watch(current: Amperes): Promise<void> {
    this.#watched = true;
    const { clock, signal } = this.#context;
    if (this.#parameters.watch === 0) return;
    let end = clock.now();
    const { last } = await this.#points.take(() => {
      let before = clock.now();
      let count = 0;
      end = before + this.#parameters.watch;
      return {
        phase: 'overload',
        set: { current },
        dwell: 0,
        readings: Number.POSITIVE_INFINITY,
        every: watchInterval,
        judge: () => 'measured',
        until: ({ t }) => {
          const next = t + (t - before);
          before = t;
          count += 1;
          return count >= fewestLooks && next > end;
        },
      };
    });
    await clock.sleep(Math.max(0, end - last), signal);
  }

  /** Load off, module back, and the known good current proved; where it no longer holds, a lower one. */
  async #return(): Promise<void> {
    const { load } = this.#context.bench;
    for (;;) {
      const back = await comeBack(
        this.#context,
        this.#points,
        this.#openCircuit * (1 - this.#parameters.sag),
        this.#parameters.recovery,
      );
      if (back === 'stayed-off') {
        this.#givenUp = true;
        return;
      }
      await load.unload();
      await load.inputOn();
      if (this.#held === 0) return;
      const seen = await this.#take('return', this.#held);
      this.#probes.push(probeOf(this.#held, seen));
      if (seen.outcome === 'held') return;
      this.#dropped = this.#held;
      this.#held = Math.max(0, this.#held - this.#retreat());
      if (this.#probes.length >= mostProbes) {
        this.#givenUp = true;
        return;
      }
    }
  }

  /** The limit has come down, by warming mostly and by little: two resolutions, and twice as far each time. */
  #retreat(): Amperes {
    this.#retreats += 1;
    return this.#parameters.resolution * 2 ** this.#retreats;
  }

  #take(phase: Phase, current: Amperes): Promise<PointSeen> {
    return this.#points.take({
      phase,
      set: { current },
      dwell: this.#parameters.dwell,
      readings: this.#parameters.readings,
      judge: holds(this.#openCircuit, this.#parameters.sag, current),
    });
  }
}
