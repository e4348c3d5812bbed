import type { RunHeader } from '../../../src/record/run-header.js';
import type * as randomness from '../../../src/statistics/random.js';
import { built } from '../built.js';
import { keptHeader, shareOfRated } from './kept-header.js';
import { type Read, shown, WrittenRun } from './written-run.js';

const { randomFrom } = await built<typeof randomness>('statistics/random.js');

/** What is really there: two bricks of the nursery, each through a ballast of 220 mΩ. */
const ballast = 0.22;
const modules = [
  { name: 'K1', openCircuit: 15.21, inSeries: 0.0015 + ballast },
  { name: 'K2', openCircuit: 15.15, inSeries: 0.002 + ballast },
];
const leads = 0.035;
const rated = 8;

const settings = { readings: 5 };
const mostPoints = 1000;

/**
 * A run on K1 and K2 in parallel with `readings` readings, or a few more: idle, the proof of the places, the climb
 * with as many points as a procedure may ask for (or half of all, where that is less), the last of them held for
 * the rest.
 */
export function writeGroupRun(folder: string, readings: number): number {
  const random = randomFrom(readings);
  const perLook = settings.readings * (3 + modules.length);
  const points = Math.min(mostPoints, Math.round(readings / perLook / 2));
  const run = new WrittenRun(folder, header(points), random);

  const volts = (exact: number): number => shown(exact + 0.001 * random.normal(), 3);
  /** Kirchhoff: Σ (Vₖ − V)/Rₖ = I, over those that are plugged in. */
  const shared = (total: number, without?: string) => () => {
    const there = modules.filter(({ name }) => name !== without);
    const short = there.reduce((sum, { openCircuit, inSeries }) => sum + openCircuit / inSeries, 0) - total;
    const bus = short / there.reduce((sum, { inSeries }) => sum + 1 / inSeries, 0);
    return [
      { of: 'meter', what: 'voltage', value: volts(bus) },
      ...modules.map(({ name, openCircuit, inSeries }): Read => {
        const lost = name === without ? 0 : ((openCircuit - bus) / inSeries) * ballast;
        return { of: 'meter', what: 'voltage', at: `ballast-of-${name}`, value: volts(lost) };
      }),
      { of: 'load', what: 'voltage', value: volts(bus - leads * total) },
      { of: 'load', what: 'current', value: shown(total + 0.0005 * random.normal(), 3) },
    ];
  };
  const look = (phase: 'proof' | 'share', current: number, without?: string): void => {
    const { readings: samples } = settings;
    const outcome = phase === 'proof' ? 'measured' : 'held';
    const of = without === undefined ? {} : { of: without };
    run.point({ phase, current, ...of, outcome, samples, read: shared(current, without) });
  };
  const stepEnded = (): void => {
    const known = { 'rated-voltage': 15, 'rated-current': rated, 'open-circuit-voltage': 15.2 };
    run.stepEnded({ known, tried: { held: rated }, earths: {} });
  };
  const asked = (text: string, act: string): void => {
    run.append({ event: 'prompt', step: run.step, text, act });
    run.pass(2);
    run.append({ event: 'answer', step: run.step, name: act.replaceAll(' ', '-'), answer: 'done' });
  };

  run.stepBegan('open-circuit');
  run.input('off');
  for (let time = 0; time < 6; time += 1) {
    run.point({ phase: 'idle', outcome: 'measured', samples: settings.readings, read: shared(0) });
  }
  stepEnded();

  run.stepBegan('sharing-log');
  run.input('on');
  look('proof', 2.4);
  for (const { name } of modules) {
    run.input('off');
    asked(
      `Pull the mains plug (or the input) of ${name}, and only of ${name}. Nothing else is touched.`,
      `unplug ${name}`,
    );
    run.input('on');
    look('proof', 2.4, name);
    run.input('off');
    asked(`Plug ${name} in again.`, `plug in ${name}`);
    run.input('on');
  }
  for (let point = 0; point < points; point += 1) {
    look('share', rated * (0.1 + (0.9 * point) / (points - 1)));
  }
  while (run.readings < readings) {
    run.pass(0.5);
    look('share', rated);
  }
  run.input('off');
  stepEnded();
  run.ended();
  return run.readings;
}

function header(points: number): RunHeader {
  const kept = keptHeader('20261130T091500Z-K1-real-limit');
  const uncertain = { ballast: { resistance: ballast, uncertainty: 0.0004 } };
  const { readings } = settings;
  return {
    ...kept,
    modules: [...kept.modules, ...keptHeader('20261202T034336Z-K2-real-limit').modules],
    circuit: 'parallel',
    bench: {
      ...kept.bench,
      ambient: { temperature: 23, uncertainty: 2 },
      places: modules.map(() => uncertain),
    },
    procedure: { ...kept.procedure, name: 'sharing', title: 'How modules in parallel share their load' },
    steps: [
      { kind: 'open-circuit', summary: 'reads the idle module for 5 s', settings: { for: 5 } },
      {
        kind: 'sharing-log',
        summary: `${points} points from 10 % of rated-current to 100 % of rated-current, each module's current at each`,
        settings: {
          points,
          dwell: 0.5,
          readings,
          sag: 0.1,
          prove: true,
          from: shareOfRated(0.1),
          to: shareOfRated(1),
          imbalance: 0.1,
          tolerance: 0.01,
          hold: 86_400,
          every: 2,
        },
      },
    ],
    criteria: [
      { finding: 'group-current', requirement: { kind: 'at-least', value: shareOfRated(1) } },
      { finding: 'hogging-module', requirement: { kind: 'is', word: 'none' } },
    ],
  };
}
