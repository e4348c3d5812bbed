import { Guards } from '../../src/bench/guards.js';
import { openBench } from '../../src/bench/open-bench.js';
import type { Post } from '../../src/files/bench.js';
import type { Module } from '../../src/files/module.js';
import type { JournalEvent } from '../../src/record/journal-event.js';
import { underTestOf } from '../../src/run/plan-circuit.js';
import { StoppedByOperator } from '../../src/run/stopped.js';
import { stepKinds } from '../../src/steps/index.js';
import type { Operator } from '../../src/steps/operator.js';
import type { StepContext } from '../../src/steps/step-kind.js';
import { type GroupChange, groupBench } from '../bench/group-bench.js';
import { k1, type Timed } from './one-step.js';

export interface CircuitStepChange extends GroupChange {
  /** As --module names them; in the order in which they stand when left out. */
  readonly named?: readonly string[];
  /** What the label of each says, where it is not 12 V, 3 A. */
  readonly labels?: Readonly<Record<string, Module['rated']>>;
  /** Whose plug is really pulled, by the name that is marked on it. */
  readonly plugs?: Readonly<Record<string, string>>;
  /** Aborts the run when it is asked for this act; it is not done. */
  readonly stopAt?: string;
  /** How each stands to earth; isolated when left out. */
  readonly earths?: StepContext['earths'];
}

export interface CircuitStep {
  readonly events: readonly Timed[];
  /** What was asked for, in order. */
  readonly acts: readonly string[];
  /** Undefined when the step came to its end. */
  readonly error: unknown;
  readonly the: <Name extends JournalEvent['event']>(name: Name) => Extract<Timed, { event: Name }>[];
}

/** Does one step on a simulated group or stack of K1, K2 and K3, with a simulated operator at hand. */
export async function circuitStep(
  kind: string,
  parameters: Readonly<Record<string, unknown>>,
  change: CircuitStepChange = {},
): Promise<CircuitStep> {
  const place = await groupBench(change);
  const { circuit = 'parallel', named = ['K1', 'K2', 'K3'] } = change;
  const events: Timed[] = [];
  const acts: string[] = [];
  const stop = new AbortController();
  const { clock, simulation } = place;
  const append = (event: JournalEvent): void => {
    events.push({ t: clock.now(), ...event });
  };
  const bench = await openBench({
    bench: place.description,
    drivers: place.drivers,
    clock,
    connect: (_address, _driver, post) => Promise.resolve(place.line(post as Post)),
    onInput: (state, confirmed) => {
      append({ event: 'input', state, confirmed });
    },
    onNotice: (text) => {
      append({ event: 'notice', text });
    },
  });
  await bench.load.prepare();
  const [first, ...others] = named.map((name): Module => ({
    ...k1,
    name,
    rated: change.labels?.[name] ?? { voltage: 12, current: 3 },
  }));
  if (first === undefined) throw new Error('a circuit has modules');
  const underTest = underTestOf(circuit, [first, ...others]);
  const operator: Operator = {
    present: true,
    acknowledge: () => Promise.resolve('operator'),
    async ask({ act = '' }, signal) {
      acts.push(act);
      if (act === change.stopAt) stop.abort(new StoppedByOperator('stopped with Ctrl-C'));
      signal.throwIfAborted();
      const [, plug = '', marked = ''] = /^((?:un)?plug(?: in)?) (K\d)$/.exec(act) ?? [];
      await simulation.operator.act(marked === '' ? act : `${plug} ${change.plugs?.[marked] ?? marked}`);
      return 'done';
    },
  };
  const step = stepKinds.find((one) => one.kind === kind);
  if (step === undefined) throw new Error(`no step is called ${kind}`);
  const isolated = new Map(underTest.modules.map(({ name }) => [name, 'isolated'] as const));
  const limits = { ...bench.ceilings, ratedVoltage: underTest.rated.voltage };
  const error: unknown = await step
    .perform(step.parameters.parse(parameters), {
      step: 1,
      bench,
      limits,
      guards: new Guards(limits, bench.description, place.drivers),
      underTest,
      journal: { append },
      clock,
      signal: stop.signal,
      operator,
      known: { 'rated-current': underTest.rated.current, 'rated-voltage': underTest.rated.voltage },
      tried: {},
      earths: change.earths ?? isolated,
      latches: { cleared: 0 },
      show: () => undefined,
    })
    .then(
      () => undefined,
      (thrown: unknown) => thrown,
    );
  return {
    events,
    acts,
    error,
    the: <Name extends JournalEvent['event']>(name: Name) =>
      events.filter((event): event is Extract<Timed, { event: Name }> => event.event === name),
  };
}
