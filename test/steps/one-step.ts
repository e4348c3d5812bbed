import { type GuardLimits, Guards } from '../../src/bench/guards.js';
import type { OpenBench } from '../../src/bench/open-bench.js';
import type { Module } from '../../src/files/module.js';
import type { JournalEvent } from '../../src/record/journal-event.js';
import { stepKinds } from '../../src/steps/index.js';
import type { Operator } from '../../src/steps/operator.js';
import type { Known, Progress, Tried } from '../../src/steps/step-kind.js';
import { type Nursery, nursery, type NurseryChange } from '../bench/nursery-bench.js';

export const k1: Module = {
  name: 'K1',
  description: '15 V brick from a retired label printer',
  rated: { voltage: 15, current: 4 },
  protectionClass: 'I',
  input: 'mains',
  outputIsolation: 'unknown',
  changes: [],
};

export const k7: Module = {
  ...k1,
  name: 'K7',
  description: '24 V to 15 V converter from a retired irrigation controller',
  rated: { voltage: 15, current: 2.5 },
  protectionClass: 'II',
  input: 'dc',
};

/** Nobody is at the bench. */
export const nobody: Operator = {
  present: false,
  acknowledge: () => Promise.resolve('refused'),
  ask: () => Promise.reject(new Error('nobody is here')),
};

export type Timed = JournalEvent & { readonly t: number };

export interface Stage extends Nursery {
  readonly bench: OpenBench;
  /** All that was journalled, with the bench's time. */
  readonly events: Timed[];
  readonly known: Known;
  readonly tried: Tried;
  readonly shown: Progress[];
  /** Does one step with the parameters as a procedure file writes them. */
  readonly perform: (kind: string, parameters?: Readonly<Record<string, unknown>>) => Promise<void>;
  /** The events of one name, in order. */
  readonly the: <Name extends JournalEvent['event']>(name: Name) => Extract<Timed, { event: Name }>[];
}

export interface StageChange extends NurseryChange {
  readonly operator?: Operator | ((bench: Nursery) => Operator);
  readonly signal?: AbortSignal;
  readonly known?: Known;
  /** Told of each event as it is journalled. */
  readonly onEvent?: (event: Timed) => void;
}

/** A nursery bench, opened and prepared, on which single steps can be performed. */
export async function stage(change: StageChange = {}): Promise<Stage> {
  const events: Timed[] = [];
  const append = (event: JournalEvent): void => {
    const timed = { t: place.clock.now(), ...event };
    events.push(timed);
    change.onEvent?.(timed);
  };
  const place = await nursery({
    onInput: (state, confirmed) => {
      append({ event: 'input', state, confirmed });
    },
    onNotice: (text) => {
      append({ event: 'notice', text });
    },
    ...change,
  });
  const bench = await place.open();
  await bench.load.prepare();
  if (bench.source !== undefined) {
    await bench.source.prepare();
    await bench.source.on();
    await place.clock.sleep(2);
  }
  const known: Known = { 'rated-voltage': 15, 'rated-current': 4, ...change.known };
  const limits: GuardLimits = { ...bench.ceilings, ratedVoltage: 15 };
  const tried: Tried = {};
  const shown: Progress[] = [];
  const operator = typeof change.operator === 'function' ? change.operator(place) : change.operator;
  return {
    ...place,
    bench,
    events,
    known,
    tried,
    shown,
    async perform(name, parameters = {}) {
      const kind = stepKinds.find((one) => one.kind === name);
      if (kind === undefined) throw new Error(`no step is called ${name}`);
      await kind.perform(kind.parameters.parse(parameters), {
        step: 1,
        bench,
        limits,
        guards: new Guards(limits, place.description, place.drivers),
        underTest: { circuit: 'single', modules: [k1], name: 'K1', rated: k1.rated },
        journal: { append },
        clock: place.clock,
        signal: change.signal ?? new AbortController().signal,
        operator: operator ?? nobody,
        known,
        tried,
        earths: new Map(),
        latches: { cleared: 0 },
        show: (progress) => shown.push(progress),
      });
    },
    the: <Name extends JournalEvent['event']>(name: Name) =>
      events.filter((event): event is Extract<Timed, { event: Name }> => event.event === name),
  };
}
