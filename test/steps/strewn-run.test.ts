import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { Guards } from '../../src/bench/guards.js';
import { makeSafe } from '../../src/bench/make-safe.js';
import { openBench } from '../../src/bench/open-bench.js';
import { VirtualClock } from '../../src/clock/virtual-clock.js';
import { RailproofError } from '../../src/errors/railproof-error.js';
import type { Bench } from '../../src/files/bench.js';
import { readDriver } from '../../src/files/read-driver.js';
import type { JournalEvent } from '../../src/record/journal-event.js';
import { stepKinds } from '../../src/steps/index.js';
import fc from '../property.js';
import { toyDriver, toyLoad } from '../instrument/fixtures/toy-load.js';
import type { Arrival } from '../instrument/fixtures/virtual-line.js';
import { k1, nobody } from './one-step.js';
import { type Mishap, StrewnInstrument } from './strewn-lines.js';

const somewhere = { kind: 'tcp', host: 'nowhere', port: 1 } as const;
const description: Bench = {
  name: 'strewn',
  instruments: {
    load: { driver: 'toy-load', connection: somewhere },
    meter: { driver: 'meter-read-scpi', connection: somewhere },
  },
  leads: { resistance: 0.035, uncertainty: 0.005 },
  voltageFrom: 'meter-at-module',
  limits: { voltage: 60, current: 8, power: 150 },
};
/** The toy knows no protections. */
const operations = Object.entries(toyDriver.operations).filter(([name]) => !name.startsWith('protect-'));
const load = { ...toyDriver, operations: Object.fromEntries(operations) };
const shelves = { relativeTo: '.', shipped: fileURLToPath(new URL('../../drivers', import.meta.url)) };
const { value: meter } = await readDriver('meter-read-scpi', shelves);

const toyMeter = (message: string, at: number): readonly Arrival[] => {
  const answers: Readonly<Record<string, string>> = {
    '*IDN?': 'NURSERY,METER,M1,1.0',
    'SYST:ERR?': '0,"No error"',
    'CONF?': '"VOLT 100,0.001"',
    'READ?': '15.2',
  };
  const answer = answers[message];
  return answer === undefined ? [] : [{ at: at + 0.01, bytes: Buffer.from(`${answer}\n`) }];
};

const question: Readonly<Record<string, string>> = {
  'load voltage': 'MEAS:VOLT?',
  'load current': 'MEAS:CURR?',
  'meter voltage': 'READ?',
};

/** A ramp over lines on which things go wrong; every reading is held against what was answered, as it comes. */
async function strewnRamp(mishaps: readonly Mishap[], keeps: boolean) {
  const clock = new VirtualClock(new Date(0));
  const toy = toyLoad();
  let calm = true;
  let next = 0;
  const mishap = (): Mishap => (calm ? undefined : mishaps[next++]) ?? { kind: 'none' };
  const there = {
    load: new StrewnInstrument({ post: 'load', clock, react: toy.react, mishap, keeps }),
    meter: new StrewnInstrument({ post: 'meter', clock, react: toyMeter, mishap, keeps }),
  };
  const events: JournalEvent[] = [];
  const strangers: unknown[] = [];
  const append = (event: JournalEvent): void => {
    events.push(event);
    if (event.event !== 'reading') return;
    const from = there[event.of as 'load' | 'meter'];
    const answer = from.answered.get(event.value ?? Number.NaN);
    // Its own question, and that is the last one that was asked of it.
    const own = question[`${event.of} ${event.what}`] === answer?.question && answer?.nth === from.asked;
    if (!own) strangers.push({ ...event, answer, asked: from.asked });
  };
  const bench = await openBench({
    bench: description,
    drivers: { load, meter },
    clock,
    connect: (_address, _driver, post) =>
      Promise.resolve().then(() => there[post as 'load' | 'meter'].open()),
    onInput: (state, confirmed) => {
      append({ event: 'input', state, confirmed });
    },
    onNotice: (text) => {
      append({ event: 'notice', text });
    },
  });
  await bench.load.prepare();
  calm = false;
  const limits = { ...bench.ceilings, ratedVoltage: 15 };
  const kind = stepKinds.find((one) => one.kind === 'load-ramp');
  const error: unknown = await kind
    ?.perform(kind.parameters.parse({ from: '0 A', to: '3 A', points: 4, dwell: '0 s', readings: 3 }), {
      step: 1,
      bench,
      limits,
      guards: new Guards(limits, description, { load, meter }),
      underTest: { circuit: 'single', modules: [k1], name: 'K1', rated: k1.rated },
      journal: { append },
      clock,
      signal: new AbortController().signal,
      operator: nobody,
      known: { 'rated-voltage': 15, 'rated-current': 4 },
      tried: {},
      earths: new Map(),
      latches: { cleared: 0 },
      show: () => undefined,
    })
    .then(
      () => undefined,
      (thrown: unknown) => thrown,
    );
  calm = true;
  // Whatever was late has come by then.
  await clock.sleep(60);
  const safety = await makeSafe(bench);
  return { events, strangers, error, safety, toy, gaps: bench.gaps };
}

const mishap: fc.Arbitrary<Mishap> = fc.oneof(
  { weight: 80, arbitrary: fc.constant<Mishap>({ kind: 'none' }) },
  {
    weight: 2,
    arbitrary: fc.record({
      kind: fc.constant('late' as const),
      by: fc.double({ min: 0.5, max: 6, noNaN: true }),
    }),
  },
  { weight: 1, arbitrary: fc.constant<Mishap>({ kind: 'garbled' }) },
  { weight: 1, arbitrary: fc.constant<Mishap>({ kind: 'swallowed' }) },
  {
    weight: 2,
    arbitrary: fc.record({
      kind: fc.constant('dropped' as const),
      when: fc.constantFrom('before' as const, 'after' as const),
      for: fc.double({ min: 0, max: 3, noNaN: true }),
    }),
  },
);

describe('a run over lines that drop, stall and garble', () => {
  it('journals no reading that is not the answer to its own question', async () => {
    const ended = { well: 0, badly: 0, interrupted: 0 };
    await fc.assert(
      fc.asyncProperty(
        fc.array(mishap, { minLength: 40, maxLength: 200, size: 'max' }),
        fc.boolean(),
        async (mishaps, keeps) => {
          const { events, strangers, error, safety, toy } = await strewnRamp(mishaps, keeps);
          expect(strangers).toEqual([]);
          if (error !== undefined) expect(error).toBeInstanceOf(RailproofError);
          ended[error === undefined ? 'well' : 'badly'] += 1;
          expect(safety).toEqual({ kind: 'confirmed' });
          expect(toy.state.input).toBe('0');
          const outcomes = new Map(
            events.flatMap((event) => (event.event === 'point-ended' ? [[event.point, event.outcome]] : [])),
          );
          if ([...outcomes.values()].includes('interrupted')) ended.interrupted += 1;
          // What counts was read at its own set-point, three times each.
          for (const began of events) {
            if (began.event !== 'point-began' || outcomes.get(began.point) !== 'held') continue;
            const currents = events.flatMap((event) =>
              event.event === 'reading' && event.point === began.point && event.what === 'current'
                ? [event.value ?? Number.NaN]
                : [],
            );
            expect(currents).toHaveLength(3);
            for (const current of currents) expect(current).toBeCloseTo(began.set.current ?? 0, 3);
          }
          if (error === undefined) {
            expect([...outcomes.values()].filter((outcome) => outcome === 'held')).toHaveLength(4);
          }
        },
      ),
      { numRuns: 150 },
    );
    // It is no proof if hardly any of them got through, or nothing ever went wrong.
    expect(ended.well).toBeGreaterThan(20);
    expect(ended.interrupted).toBeGreaterThan(20);
  });

  it('gets through any one mishap, at whichever question', async () => {
    const single: readonly Mishap[] = [
      { kind: 'late', by: 1.5 },
      { kind: 'garbled' },
      { kind: 'swallowed' },
      { kind: 'dropped', when: 'before', for: 1 },
      { kind: 'dropped', when: 'after', for: 1 },
    ];
    for (const one of single) {
      for (let at = 0; at < 40; at += 1) {
        const calm = Array.from({ length: at }, (): Mishap => ({ kind: 'none' }));
        const { strangers, error, gaps } = await strewnRamp([...calm, one], at % 2 === 0);
        expect({ one, at, error, strangers }).toEqual({ one, at, error: undefined, strangers: [] });
        expect(gaps).toBeLessThanOrEqual(2);
      }
    }
  });
});
