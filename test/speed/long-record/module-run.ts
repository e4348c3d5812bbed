import type { RunHeader } from '../../../src/record/run-header.js';
import type * as randomness from '../../../src/statistics/random.js';
import { built } from '../built.js';
import { keptHeader, quantity, shareOfRated } from './kept-header.js';
import { type Read, shown, WrittenRun } from './written-run.js';

const { randomFrom } = await built<typeof randomness>('statistics/random.js');

/** What is really there, as in the nursery: 15.21 V, 18 mΩ, a limit of 5.3 A, 35 K warmer within 12 min each. */
const openCircuit = 15.21;
const droop = 0.018;
const limit = 5.3;
const leads = 0.035;
const ambient = 23;
const rise = 35;
const timeConstant = 720;
const rated = 4;

const settings = { readings: 5, soaked: 3, overload: 30, every: 10, resolution: 0.01 };

/**
 * A run on K1 with `readings` readings, or a few more: idle, a ramp up and back with three tenths of them, the
 * search for its dropout, overloads with their recoveries, and a soak with the rest. All are as many and as long as
 * a procedure may ask for, up to some millions: a soak of seven days.
 */
export function writeModuleRun(folder: string, readings: number): number {
  const random = randomFrom(readings);
  const rampPoints = Math.round((0.3 * readings) / (2 * 3 * settings.readings));
  const overloads = Math.max(3, Math.min(100, Math.round(readings / 5000)));
  const run = new WrittenRun(folder, header(rampPoints, overloads), random);

  const volts = (exact: number): number => shown(exact + 0.001 * random.normal(), 3);
  const loaded = (current: number, atModule: number): readonly Read[] => [
    { of: 'meter', what: 'voltage', value: volts(atModule) },
    { of: 'load', what: 'voltage', value: volts(atModule - leads * current) },
    { of: 'load', what: 'current', value: shown(current + 0.0005 * random.normal(), 3) },
  ];
  const at = (current: number) => () => loaded(current, openCircuit - droop * current);
  /** It hiccups: mostly nothing, now and then an attempt. */
  const overloaded = () => (random.uniform(0, 1) < 0.2 ? loaded(limit, 0.95) : loaded(0, 0));
  const warm = (current: number, temperature: number) => (): readonly Read[] => {
    const [meter, ...load] = loaded(
      current,
      openCircuit - droop * current - 0.0003 * (temperature - ambient),
    );
    const read = shown(temperature + 0.05 * random.normal(), 1);
    return [...(meter ? [meter] : []), { of: 'thermometer', what: 'temperature', value: read }, ...load];
  };
  const idle = (samples: number, read = at(0)): void => {
    run.point({ phase: 'idle', outcome: 'measured', samples, read });
  };
  /** Whether it held; where it did not, it is unloaded until it is back. */
  const tried = (phase: 'climb' | 'halve' | 'return', current: number): boolean => {
    const holds = current <= limit;
    const outcome = holds ? 'held' : 'dropped';
    run.point({
      phase,
      current,
      outcome,
      samples: settings.readings,
      read: holds ? at(current) : overloaded,
    });
    if (holds) return true;
    recovered();
    run.input('on');
    return false;
  };
  const recovered = (): void => {
    run.input('off');
    run.point({ phase: 'recovery', outcome: 'held', samples: 6, read: at(0) });
    const after = random.uniform(0.2, 0.5);
    run.append({ event: 'recovery', step: run.step, outcome: 'came-back', after, within: after + 0.063 });
  };
  const known = { 'rated-voltage': 15, 'rated-current': rated, 'open-circuit-voltage': openCircuit };
  const stepEnded = (): void => {
    run.stepEnded({ known, tried: { held: rated }, earths: {} });
  };

  run.stepBegan('open-circuit');
  run.input('off');
  for (let look = 0; look < 6; look += 1) idle(settings.readings);
  stepEnded();

  run.stepBegan('load-ramp');
  run.input('on');
  const currents = Array.from({ length: rampPoints }, (_, index) => (rated * index) / (rampPoints - 1));
  for (const phase of ['ramp', 'down'] as const) {
    for (const current of phase === 'ramp' ? currents : currents.toReversed()) {
      run.point({ phase, current, outcome: 'held', samples: settings.readings, read: at(current) });
    }
  }
  run.input('off');
  stepEnded();

  run.stepBegan('dropout-search');
  run.input('on');
  run.point({ phase: 'start', current: rated, outcome: 'held', samples: settings.readings, read: at(rated) });
  let held = rated;
  let dropped = rated + 0.4;
  for (; tried('climb', dropped); dropped += 0.4) held = dropped;
  while (dropped - held > settings.resolution) {
    tried('return', held);
    const middle = (held + dropped) / 2;
    if (tried('halve', middle)) held = middle;
    else dropped = middle;
  }
  run.input('off');
  stepEnded();

  run.stepBegan('recovery-check');
  for (let time = 0; time < overloads; time += 1) {
    idle(2);
    run.input('on');
    const { overload: samples } = settings;
    run.point({ phase: 'overload', current: 1.3 * limit, outcome: 'dropped', samples, read: overloaded });
    recovered();
    run.pass(5);
  }
  stepEnded();

  run.stepBegan('soak');
  for (let look = 0; look < 5; look += 1) idle(settings.soaked, warm(0, ambient));
  run.input('on');
  for (let t = 0; run.readings < readings; t += settings.every) {
    const read = warm(rated, ambient + rise * (1 - Math.exp(-t / timeConstant)));
    run.point({ phase: 'soak', current: rated, outcome: 'held', samples: settings.soaked, read });
    run.pass(settings.every - 0.7);
  }
  run.input('off');
  stepEnded();
  run.ended();
  return run.readings;
}

function header(points: number, times: number): RunHeader {
  const kept = keptHeader('20261130T091500Z-K1-real-limit');
  const { readings, soaked, every, resolution } = settings;
  return {
    ...kept,
    bench: { ...kept.bench, ambient: { temperature: ambient, uncertainty: 1 } },
    instruments: [
      ...kept.instruments,
      {
        role: 'thermometer',
        driver: 'thermometer-query-scpi',
        address: 'simulated:query-thermometer',
        identity: 'railproof,simulated thermometer,K-bench,1',
        accuracy: { temperature: { ofReading: 0.005, fixed: 1.5, resolution: 0.1 } },
        ratings: {},
      },
    ],
    steps: [
      { kind: 'open-circuit', summary: 'reads the idle module for 5 s', settings: { for: 5 } },
      {
        kind: 'load-ramp',
        summary: `${points} points from 0 A to 100 % of rated-current and back`,
        settings: {
          from: quantity(0),
          to: shareOfRated(1),
          points,
          dwell: 0.5,
          readings,
          sag: 0.2,
          back: true,
        },
      },
      {
        kind: 'dropout-search',
        summary: 'from 100 % of rated-current up to 200 % of rated-current, to within 10 mA',
        settings: {
          from: shareOfRated(1),
          ceiling: shareOfRated(2),
          resolution,
          sag: 0.05,
          climb: 10,
          readings,
        },
      },
      {
        kind: 'recovery-check',
        summary: `${times} overloads`,
        settings: { times, for: 2, dwell: 0.3, rest: 5, sag: 0.05, recovery: 10 },
      },
      {
        kind: 'soak',
        summary: '100 % of rated-current until settled, 7 d at most',
        settings: {
          current: shareOfRated(1),
          for: 604_800,
          every,
          readings: soaked,
          'settled-within': 0.001,
          over: 600,
        },
      },
    ],
  };
}
