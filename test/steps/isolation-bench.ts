import { expression } from '../../src/files/expression.js';
import { Guards } from '../../src/bench/guards.js';
import { type OpenBench, openBench } from '../../src/bench/open-bench.js';
import type { Driver } from '../../src/files/driver.js';
import type { Module } from '../../src/files/module.js';
import type { Circuit } from '../../src/files/procedure.js';
import type { JournalEvent } from '../../src/record/journal-event.js';
import { underTestOf } from '../../src/run/plan-circuit.js';
import { isolationCheck } from '../../src/steps/isolation-check.js';
import type { Operator } from '../../src/steps/operator.js';
import type { StepContext } from '../../src/steps/step-kind.js';
import { nursery } from '../bench/nursery-bench.js';
import { VirtualLine } from '../instrument/fixtures/virtual-line.js';
import { k1, type Timed } from './one-step.js';

/** What a meter at the end of a line finds, act after act; it shows open as 9.9E37. */
export interface IsolationScript {
  readonly modules?: readonly [Module, ...Module[]];
  readonly circuit?: Circuit;
  /** From output to earth in Ω, by module; isolated where left out. */
  readonly earths?: Readonly<Record<string, number>>;
  /** Of the leads held together, in Ω. */
  readonly leads?: number;
  /** Seconds in which the output falls to a third once the plug is out; it never does when infinite. */
  readonly bleeds?: number;
  /** Volts between earth and 0 V, as when something is still plugged in. */
  readonly between?: number;
  /** From this act on (counted from 1) the leads are broken, or touch each other. */
  readonly brokenFrom?: number;
  readonly shortedFrom?: number;
  /** It stays in the mode it was in, whatever it is told. */
  readonly stuck?: boolean;
  /** What it answers to READ? whatever is there, from this act on. */
  readonly answers?: { readonly from: number; readonly with: string };
  readonly operator?: (act: string, count: number) => void;
  readonly signal?: AbortSignal;
  readonly onEvent?: (event: JournalEvent) => void;
  readonly parameters?: Readonly<Record<string, unknown>>;
}

export interface IsolationBench {
  readonly events: readonly Timed[];
  readonly earths: StepContext['earths'];
  readonly bench: OpenBench;
  /** What was asked for, in order. */
  readonly acts: readonly string[];
  readonly asked: readonly string[];
  /** What the meter was told, in order. */
  readonly told: readonly string[];
  readonly notes: readonly string[];
  /** Undefined when the step came to its end. */
  readonly error: unknown;
}

export const ohmmeterAccuracy = { ofReading: 0.002, fixed: 0.05, resolution: 0.01 };

function ohmmeter(driver: Driver): Driver {
  return {
    ...driver,
    operations: {
      ...driver.operations,
      'measure-voltage': [{ text: 'CONF:VOLT:DC' }],
      'measure-resistance': [{ text: 'CONF:RES' }],
    },
    readings: {
      ...driver.readings,
      resistance: { kind: 'number', ask: [{ text: 'READ?' }], dimension: 'resistance', factor: 1 },
      'measures-voltage': {
        kind: 'flag',
        ask: [{ text: 'FUNC?' }],
        trueWhen: expression('VOLT'),
        falseWhen: expression('[A-Z]{3,}'),
      },
      'measures-resistance': {
        kind: 'flag',
        ask: [{ text: 'FUNC?' }],
        trueWhen: expression('RES'),
        falseWhen: expression('[A-Z]{3,}'),
      },
    },
    accuracy: { ...driver.accuracy, resistance: ohmmeterAccuracy },
  };
}

/** Performs one isolation check with a meter and a person that do as the script says. */
export async function checkIsolation(script: IsolationScript = {}): Promise<IsolationBench> {
  const { modules = [k1], circuit = 'single', leads = 0.12, bleeds = 4 } = script;
  const place = await nursery();
  const { clock } = place;
  const drivers = { ...place.drivers, meter: ohmmeter(place.drivers.meter) };
  const acts: string[] = [];
  const asked: string[] = [];
  let mode: 'VOLT' | 'RES' = 'VOLT';
  let unplugged: number | undefined;
  let probes = 'the output';

  const since = (act: number | undefined): boolean => act !== undefined && acts.length >= act;
  const volts = (): number => {
    if (probes.startsWith('earth')) return script.between ?? 0;
    if (probes.startsWith('leads')) return 0;
    return unplugged === undefined ? 15.2 : 15.2 * Math.exp((unplugged - clock.now()) / bleeds);
  };
  const ohms = (): number => {
    if (since(script.shortedFrom)) return leads;
    if (since(script.brokenFrom) || probes === 'leads apart') return Infinity;
    if (probes === 'leads together') return leads;
    return leads + (script.earths?.[probes.split(' of ')[1] ?? 'K1'] ?? Infinity);
  };
  const line = new VirtualLine(clock, (message, at) => {
    const answer = (text: string) => [{ at: at + 0.02, bytes: Buffer.from(`${text}\n`) }];
    if (message.startsWith('CONF:') && script.stuck !== true) mode = message.includes('RES') ? 'RES' : 'VOLT';
    switch (message) {
      case '*IDN?':
        return answer('NURSERY,METER,K,1');
      case 'SYST:ERR?':
        return answer('0,"No error"');
      case 'FUNC?':
        return answer(`"${mode}"`);
      case 'READ?': {
        if (script.answers !== undefined && since(script.answers.from)) return answer(script.answers.with);
        const shown = mode === 'VOLT' ? volts() : ohms();
        return answer(Number.isFinite(shown) ? shown.toExponential(6) : '9.9E37');
      }
      default:
        return [];
    }
  });

  const events: Timed[] = [];
  const append = (event: JournalEvent): void => {
    script.onEvent?.(event);
    events.push({ t: clock.now(), ...event });
  };
  const bench = await openBench({
    bench: place.description,
    drivers,
    clock,
    connect: (_address, driver, role) =>
      Promise.resolve(role === 'meter' ? line : place.simulation.connect(role, driver)),
    onInput: (state, confirmed) => {
      append({ event: 'input', state, confirmed });
    },
    onNotice: () => undefined,
  });
  const operator: Operator = {
    present: true,
    acknowledge: () => Promise.resolve('operator'),
    async ask({ text, act = '' }) {
      acts.push(act);
      asked.push(text);
      script.operator?.(act, acts.length);
      await clock.sleep(2);
      if (act === 'unplug') unplugged = clock.now();
      else if (act === 'plug in') unplugged = undefined;
      else probes = act.replace(/^probe (the )?/, '');
      return 'done';
    },
  };
  const earths: StepContext['earths'] = new Map();
  const notes: string[] = [];
  const limits = { ...bench.ceilings, ratedVoltage: 15 };
  const performed = isolationCheck.perform(isolationCheck.parameters.parse(script.parameters ?? {}), {
    step: 1,
    bench,
    limits,
    guards: new Guards(limits, place.description, drivers),
    underTest: underTestOf(circuit, modules),
    journal: { append },
    clock,
    signal: script.signal ?? new AbortController().signal,
    operator,
    known: {},
    tried: {},
    earths,
    latches: { cleared: 0 },
    show: ({ note }) => {
      if (note !== undefined) notes.push(note);
    },
  });
  const error: unknown = await performed.then(
    () => undefined,
    (thrown: unknown) => thrown,
  );
  return { events, earths, bench, acts, asked, told: line.sent, notes, error };
}
