import type { Evidence } from '../../src/analysis/evidence.js';
import type { JournalEvent, Phase, PointOutcome, TimedEvent } from '../../src/record/journal-event.js';
import type { RunHeader } from '../../src/record/run-header.js';
import { collected, faultless, headerOf } from './evidence-of.js';

type Accuracy = RunHeader['instruments'][number]['accuracy'];

/** A circuit of bricks, and what its bench file says; instruments are faultless unless told otherwise. */
export interface CircuitHeader {
  readonly circuit: 'parallel' | 'series';
  /** By module: the measured value of what is in series with it, and its half-width. */
  readonly ballasts: Readonly<Record<string, readonly [ohms: number, halfWidth: number]>>;
  readonly meter?: Accuracy;
  /** Each place has a meter of its own with this promise. */
  readonly ownMeters?: Accuracy;
  readonly load?: Accuracy;
  readonly rated?: RunHeader['modules'][number]['rated'];
  readonly outputIsolation?: number;
  readonly settings?: Readonly<Record<string, unknown>>;
}

export function circuitHeader(given: CircuitHeader): RunHeader {
  const single = headerOf({ ...(given.rated === undefined ? {} : { rated: given.rated }) });
  const [module] = single.modules;
  const [instrument] = single.instruments;
  if (module === undefined || instrument === undefined) throw new Error('no module or instrument');
  const names = Object.keys(given.ballasts);
  const at = (role: string, accuracy: Accuracy = faultless) => ({ ...instrument, role, accuracy });
  return {
    ...single,
    circuit: given.circuit,
    modules: names.map((name) => ({
      ...module,
      name,
      outputIsolation: given.outputIsolation ?? 'unknown',
    })),
    bench: {
      ...single.bench,
      places: Object.values(given.ballasts).map(([resistance, uncertainty]) => ({
        ballast: { resistance, uncertainty },
      })),
    },
    steps: [{ kind: stepOf(given.circuit), summary: '', settings: given.settings ?? {} }],
    instruments: [
      at('load', given.load),
      at('meter', given.meter),
      ...(given.ownMeters === undefined
        ? []
        : names.map((_, index) => at(`meter-${index + 1}`, given.ownMeters))),
    ],
  };
}

/** One point of a sharing-log or a stack-check. */
export interface CircuitPoint {
  readonly phase?: Phase;
  readonly set?: number;
  readonly of?: string;
  readonly outcome?: PointOutcome;
  /** At the output, by the meter; by the load where it was elsewhere. */
  readonly output: number;
  readonly by?: 'meter' | 'load';
  readonly current?: number;
  /** By module, one value or one for each sample. */
  readonly places: Readonly<Record<string, number | readonly number[]>>;
}

/** The evidence of one step at the places of a circuit. */
export function circuitEvidence(header: RunHeader, points: readonly CircuitPoint[]): Evidence {
  return collected(circuitEvents(header, points), header);
}

/** The events of one step at the places of a circuit, to the end of its run. */
export function* circuitEvents(header: RunHeader, points: readonly CircuitPoint[]): Generator<TimedEvent> {
  const across = header.circuit === 'parallel' ? 'ballast' : 'output';
  let t = 0;
  const timed = (event: JournalEvent): TimedEvent => ({ t, ...event });
  const step = 1;
  yield timed({ event: 'step-began', step, kind: stepOf(header.circuit) });
  for (const [index, given] of points.entries()) {
    const { phase = header.circuit === 'parallel' ? 'share' : 'stack', set, of, outcome } = given;
    const point = index + 1;
    t += 1;
    const about = of === undefined ? {} : { of };
    yield timed({
      event: 'point-began',
      step,
      point,
      phase,
      set: set === undefined ? {} : { current: set },
      ...about,
    });
    const samples = Math.max(1, ...Object.values(given.places).map((volts) => [volts].flat().length));
    for (let sample = 1; sample <= samples; sample += 1) {
      const reading = (post: string, what: string, value: number, at?: string): TimedEvent =>
        timed({
          event: 'reading',
          step,
          point,
          sample,
          of: post,
          what,
          value,
          ...(at === undefined ? {} : { at }),
        });
      if (given.by !== 'load') yield reading('meter', 'voltage', given.output);
      for (const [module, volts] of Object.entries(given.places)) {
        const all = [volts].flat();
        yield reading('meter', 'voltage', all[sample - 1] ?? all[0] ?? 0, `${across}-of-${module}`);
      }
      const current = given.current ?? set ?? 0;
      const atLoad =
        given.by === 'load' ? given.output - current * header.bench.leads.resistance : given.output;
      yield reading('load', 'voltage', atLoad);
      yield reading('load', 'current', current);
    }
    yield timed({
      event: 'point-ended',
      step,
      point,
      outcome: outcome ?? (phase === 'proof' ? 'measured' : 'held'),
    });
  }
  yield timed({ event: 'step-ended', step });
  yield timed({ event: 'ended', how: 'completed', reason: null, status: 0 });
}

function stepOf(circuit: CircuitHeader['circuit'] | RunHeader['circuit']): string {
  return circuit === 'parallel' ? 'sharing-log' : 'stack-check';
}

/** A brick behind its ballast: what it gives at a bus. */
export interface Brick {
  readonly voltage: number;
  readonly droop: number;
  readonly ballast: number;
}

/** Where bricks below their limits come to rest at a load, all of them carrying; those left out are unplugged. */
export function atRest(
  bricks: Readonly<Record<string, Brick>>,
  load: number,
  without?: string,
): { readonly bus: number; readonly currents: Readonly<Record<string, number>> } {
  let on = Object.entries(bricks).filter(([name]) => name !== without);
  for (;;) {
    const short = on.reduce((sum, [, { voltage, droop, ballast }]) => sum + voltage / (droop + ballast), 0);
    const conductance = on.reduce((sum, [, { droop, ballast }]) => sum + 1 / (droop + ballast), 0);
    const bus = (short - load) / conductance;
    const idle = on.find(([, { voltage }]) => voltage < bus);
    if (idle === undefined) {
      const carrying = new Map(
        on.map(([name, { voltage, droop, ballast }]) => [name, (voltage - bus) / (droop + ballast)]),
      );
      return {
        bus,
        currents: Object.fromEntries(Object.keys(bricks).map((name) => [name, carrying.get(name) ?? 0])),
      };
    }
    on = on.filter((one) => one !== idle);
  }
}

/** The points of a sharing-log on such a group: the proof, and a climb through these loads. */
export function sharingPoints(
  bricks: Readonly<Record<string, Brick>>,
  loads: readonly number[],
  proving = 2,
): readonly CircuitPoint[] {
  const at = (load: number, rest: Partial<CircuitPoint>, without?: string): CircuitPoint => {
    const { bus, currents } = atRest(bricks, load, without);
    const places = Object.fromEntries(
      Object.entries(bricks).map(([name, { ballast }]) => [name, (currents[name] ?? 0) * ballast]),
    );
    return { set: load, output: bus, places, ...rest };
  };
  return [
    at(proving, { phase: 'proof' }),
    ...Object.keys(bricks).map((name) => at(proving, { phase: 'proof', of: name }, name)),
    ...loads.map((load) => at(load, {})),
  ];
}
