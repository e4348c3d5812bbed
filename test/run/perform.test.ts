import { describe, expect, it } from 'vitest';
import { RecordWriteError } from '../../src/record/record-error.js';
import { StoppedByOperator, UnforeseenError } from '../../src/run/stopped.js';
import type { Operator } from '../../src/steps/operator.js';
import { nobody } from '../steps/one-step.js';
import { type Rehearsal, rehearse, tidyUp } from './rehearsal.js';

tidyUp();

const ramp = 'load-ramp: { to: 4 A, points: 5, dwell: 500 ms, readings: 2 }';
const idle = 'open-circuit: { for: 1 s }';

/** Whatever happened: the load is off at the bench itself, that was read back, and the record says how it ended. */
function expectSafeEnd({ bench, safety, events, integrity, ending }: Rehearsal): void {
  expect(bench.simulation.world.load.input).toBe('off');
  expect(safety).toEqual({ kind: 'confirmed' });
  expect(integrity.kind).toBe('whole');
  expect(events.at(-1)).toMatchObject({
    event: 'ended',
    how: ending.how,
    reason: ending.how === 'completed' ? null : ending.reason,
  });
  expect(events.at(-2)).toMatchObject({ event: 'input', state: 'off', confirmed: true });
}

describe('a run that is completed', () => {
  it('goes through its steps in order and ends with the load off and read back', async () => {
    const run = await rehearse({
      steps: [idle, ramp, 'wait: { for: 1 min }'],
      cautions: '[mains, hot-surfaces]',
    });
    expect(run.ending).toEqual({ how: 'completed' });
    expectSafeEnd(run);
    expect(run.watched).toEqual([
      '1 open-circuit: reads the idle module for 1 s',
      '2 load-ramp: 5 points from 0 A to 4 A',
      '3 wait: waits 60 s',
    ]);
    const steps = run.events.filter(({ event }) => event === 'step-began' || event === 'step-ended');
    expect(steps).toMatchObject([
      { event: 'step-began', step: 1, kind: 'open-circuit' },
      { event: 'step-ended', step: 1 },
      { event: 'step-began', step: 2, kind: 'load-ramp' },
      { event: 'step-ended', step: 2 },
      { event: 'step-began', step: 3, kind: 'wait' },
      { event: 'step-ended', step: 3 },
    ]);
    expect(run.events.filter(({ event }) => event === 'caution')).toMatchObject([
      { name: 'mains', by: 'simulated-operator' },
      { name: 'hot-surfaces', by: 'simulated-operator' },
    ]);
    expect(run.inputs).toEqual(['on', 'off']);
    expect(run.noticed).toEqual([
      expect.stringMatching(/^before anything was switched on the module read 15\.\d+ V$/),
    ]);
  });

  it('hands what one step measured to the steps after it', async () => {
    const run = await rehearse({
      steps: [
        idle,
        'dropout-search: { from: 4 A, ceiling: 6 A, resolution: 50 mA }',
        'load-ramp: { from: 0 A, to: 50 % of dropout-current, points: 2, readings: 2 }',
      ],
    });
    expect(run.ending).toEqual({ how: 'completed' });
    const last = run.events.findLast((event) => event.event === 'point-began');
    expect(last?.set.current).toBeCloseTo(2.65, 1);
  });
});

describe('before anything is energised', () => {
  it('a caution that is refused ends the run', async () => {
    const asked: string[] = [];
    const run = await rehearse({
      steps: [ramp],
      cautions: '[mains, hot-surfaces]',
      operator: () => ({
        ...nobody,
        acknowledge: (caution, text) => {
          asked.push(`${caution}: ${text.slice(0, 16)}`);
          return Promise.resolve('refused');
        },
      }),
    });
    expect(run.ending).toMatchObject({
      how: 'stopped',
      reason: 'the caution "mains" was not acknowledged',
      error: { exitCode: 3 },
    });
    expect(asked).toEqual(['mains: The module is fe']);
    expect(run.inputs).toEqual([]);
    expect(run.events.filter(({ event }) => event === 'caution' || event === 'step-began')).toEqual([]);
    expectSafeEnd(run);
  });

  it('the wiring is shown, all of it, before the cautions, and acknowledged', async () => {
    const asked: string[] = [];
    const run = await rehearse({
      steps: [idle],
      cautions: '[mains]',
      wiring: '[Join the outputs through their ballasts., The load goes across the bus.]',
      operator: () => ({
        ...nobody,
        acknowledge: (caution, text) => {
          asked.push(`${caution}: ${text}`);
          return Promise.resolve('operator');
        },
      }),
    });
    expect(run.ending).toEqual({ how: 'completed' });
    expect(asked[0]).toBe('wiring: Join the outputs through their ballasts.\nThe load goes across the bus.');
    expect(asked[1]).toMatch(/^mains: /);
    expect(run.events.filter(({ event }) => event === 'caution')).toMatchObject([
      { name: 'wiring', by: 'operator' },
      { name: 'mains', by: 'operator' },
    ]);
  });

  it('a wiring that is not acknowledged ends the run', async () => {
    const run = await rehearse({
      steps: [ramp],
      wiring: '[Join the outputs.]',
      operator: () => ({ ...nobody, acknowledge: () => Promise.resolve('refused') }),
    });
    expect(run.ending).toMatchObject({
      how: 'stopped',
      reason: 'the wiring was not acknowledged',
      error: { exitCode: 3 },
    });
    expect(run.inputs).toEqual([]);
    expect(run.events.filter(({ event }) => event === 'caution' || event === 'step-began')).toEqual([]);
    expectSafeEnd(run);
  });

  it('a procedure without wiring asks for none', async () => {
    const run = await rehearse({ steps: [idle], cautions: '[]' });
    expect(run.events.filter((event) => event.event === 'caution' && event.name === 'wiring')).toEqual([]);
  });

  it('a meter that was left in another mode ends the run, named', async () => {
    const run = await rehearse({
      steps: [ramp],
      // Its driver does not set it, and takes it as it is.
      meter: { prepare: [{ text: '*CLS' }] },
      simulation: { faults: [{ at: 0, what: 'meter-wrong-mode' }] },
    });
    expect(run.ending).toMatchObject({
      how: 'stopped',
      reason: expect.stringMatching(/^the meter at .* says that it does not measure dc voltage$/) as string,
      error: { code: 'WRONG_PLACE', what: 'meter-in-wrong-mode' },
    });
    expect(run.inputs).toEqual([]);
    expectSafeEnd(run);
  });

  it('an input that is on already ends the run, and ends off', async () => {
    const run = await rehearse({
      steps: [ramp],
      onEvent: ({ event }, { simulation, clock }) => {
        if (event === 'opened') simulation.world.setLoad({ input: 'on', setCurrent: 1 }, clock.now());
      },
    });
    expect(run.ending).toMatchObject({
      how: 'stopped',
      reason: expect.stringMatching(/^before anything was switched on: the input of the load at /) as string,
    });
    expect(run.inputs).toEqual(['on', 'off']);
    expectSafeEnd(run);
  });

  it('a module that is not the one of the file ends the run', async () => {
    const run = await rehearse({ steps: [ramp], rated: { voltage: 24, current: 4 } });
    expect(run.ending).toMatchObject({
      how: 'stopped',
      reason: expect.stringMatching(/the module reads 15\.\d+ V and its nameplate says 24 V$/) as string,
    });
    expect(run.inputs).toEqual([]);
    expectSafeEnd(run);
  });

  it('a procedure that needs no live module does not ask for one', async () => {
    const run = await rehearse({
      steps: ['wait: { for: 1 s }'],
      simulation: { faults: [{ at: 0, what: 'module-dead' }] },
    });
    expect(run.ending).toEqual({ how: 'completed' });
  });
});

describe('a run that goes wrong ends with the load off and the record closed', () => {
  it('when a guard trips', async () => {
    const run = await rehearse({
      steps: [idle, ramp],
      simulation: { faults: [{ at: 3, what: 'reversed' }] },
    });
    expect(run.ending).toMatchObject({ how: 'stopped', error: { guard: 'reversed-polarity', exitCode: 3 } });
    expect(run.events.find(({ event }) => event === 'guard-tripped')).toMatchObject({
      guard: 'reversed-polarity',
      text: expect.stringMatching(/^the meter reads -\d.*: the polarity is reversed$/) as string,
    });
    expect(run.inputs).toEqual(['on', 'off']);
    expectSafeEnd(run);
  });

  it('when the operator stops it in the middle of a step', async () => {
    const stop = new AbortController();
    const run = await rehearse({
      steps: [ramp],
      signal: stop.signal,
      onEvent: (event, { simulation }) => {
        if (event.event !== 'point-ended' || event.point !== 3) return;
        expect(simulation.world.load.input).toBe('on');
        stop.abort(new StoppedByOperator('stopped with Ctrl-C'));
      },
    });
    expect(run.ending).toMatchObject({ how: 'stopped', reason: 'stopped with Ctrl-C' });
    expect(run.events.filter(({ event }) => event === 'point-ended')).toHaveLength(3);
    expect(run.events.some(({ event }) => event === 'step-ended')).toBe(false);
    expect(run.inputs).toEqual(['on', 'off']);
    expectSafeEnd(run);
  });

  it('when it was stopped before it began', async () => {
    const run = await rehearse({
      steps: [ramp],
      cautions: '[mains]',
      signal: AbortSignal.abort(new StoppedByOperator('stopped with Ctrl-C')),
    });
    expect(run.ending).toMatchObject({ how: 'stopped', reason: 'stopped with Ctrl-C' });
    expect(run.inputs).toEqual([]);
    expectSafeEnd(run);
  });

  it('when there is a fault of ours', async () => {
    let readings = 0;
    const fault = new TypeError('undefined is not a function');
    const run = await rehearse({
      steps: [ramp],
      onEvent: ({ event }) => {
        readings += event === 'reading' ? 1 : 0;
        if (readings === 7) {
          readings += 1;
          throw fault;
        }
      },
    });
    expect(run.ending).toEqual({ how: 'failed', reason: 'undefined is not a function', error: fault });
    expect(run.inputs).toEqual(['on', 'off']);
    expectSafeEnd(run);
  });

  it('when something of ours breaks while the load is put off at the end', async () => {
    const stop = new AbortController();
    const run = await rehearse({
      steps: [ramp],
      signal: stop.signal,
      onEvent: (event) => {
        if (event.event === 'input' && event.state === 'off') stop.abort(new UnforeseenError('a surprise'));
      },
    });
    expect(run.ending).toMatchObject({ how: 'failed', error: { exitCode: 70 } });
    expectSafeEnd(run);
  });

  it('when the meter falls silent', async () => {
    const run = await rehearse({
      steps: [idle, ramp],
      simulation: { faults: [{ at: 3, what: 'meter-silent' }] },
    });
    expect(run.ending).toMatchObject({ how: 'failed', error: { code: 'INSTRUMENT_SILENT', exitCode: 69 } });
    expectSafeEnd(run);
  });

  it('when the load has lost its power in the middle: nobody switches it on again', async () => {
    const run = await rehearse({
      steps: [ramp],
      simulation: { faults: [{ at: 3, what: 'load-restarted', for: 0.4 }] },
    });
    expect(run.ending).toMatchObject({ how: 'stopped', error: { code: 'LOAD_WENT_OFF' } });
    expect(run.status).toBe(3);
    expectSafeEnd(run);
  });
});

describe('a run that meets with a lost line', () => {
  it('goes on when it comes back', async () => {
    const run = await rehearse({
      steps: [ramp],
      onEvent: (event, { lines }) => {
        if (event.event === 'point-ended' && event.point === 3) void lines[0]?.close();
      },
    });
    expect(run.ending).toEqual({ how: 'completed' });
    expectSafeEnd(run);
  });
});

describe('a journal that can not be written any more', () => {
  const full = new RecordWriteError('runs/K1/journal.jsonl', { code: 'ENOSPC' });

  it('ends the run with the load off, which is confirmed though it can not be recorded', async () => {
    let isFull = false;
    const run = await rehearse({
      steps: [ramp],
      onEvent: (event, { simulation }) => {
        if (event.event === 'reading' && event.point === 3) isFull = true;
        if (!isFull) return;
        if (event.event === 'reading') expect(simulation.world.load.input).toBe('on');
        throw full;
      },
    });
    expect(run.ending).toEqual({ how: 'failed', reason: full.message, error: full });
    expect(run.safety).toEqual({ kind: 'confirmed' });
    expect(run.bench.simulation.world.load.input).toBe('off');
    expect(run.bench.lines).toHaveLength(2);
    expect(run.integrity.kind).toBe('cut-off');
  });

  it('does not hide why the run ended before', async () => {
    let isFull = false;
    const run = await rehearse({
      steps: [idle, ramp],
      simulation: { faults: [{ at: 3, what: 'reversed' }] },
      onEvent: ({ event }) => {
        isFull ||= event === 'guard-tripped';
        if (isFull) throw full;
      },
    });
    expect(run.ending).toMatchObject({ how: 'stopped', error: { guard: 'reversed-polarity' } });
    expect(run.safety).toEqual({ kind: 'confirmed' });
  });

  it('makes a failure of a run whose end alone could not be written', async () => {
    const run = await rehearse({
      steps: [ramp],
      onEvent: ({ event }) => {
        if (event === 'ended') throw full;
      },
    });
    expect(run.ending).toEqual({ how: 'failed', reason: full.message, error: full });
    expect(run.integrity.kind).toBe('cut-off');
  });
});

describe('a load that is gone for good', () => {
  it('is said to be unconfirmed, in the record too, and the first reason stands', async () => {
    const run = await rehearse({
      steps: [idle, ramp],
      simulation: { faults: [{ at: 3, what: 'load-lost' }] },
    });
    expect(run.ending).toMatchObject({ how: 'failed', error: { code: 'CONNECTION_LOST' } });
    expect(run.safety).toMatchObject({
      kind: 'unconfirmed',
      advice: expect.stringMatching(/^THE LOAD MAY/) as string,
    });
    expect(run.events.slice(-2)).toMatchObject([
      {
        event: 'notice',
        text: expect.stringMatching(/^it could not be confirmed that the load is off: /) as string,
      },
      { event: 'ended', how: 'failed' },
    ]);
    expect(run.integrity.kind).toBe('whole');
  });
});

describe('a procedure that asks the operator', () => {
  it('ends when there is nobody any more, with the load off', async () => {
    const gone: Operator = {
      present: true,
      acknowledge: () => Promise.resolve('operator'),
      ask: () => Promise.reject(new StoppedByOperator('the terminal was closed at a question')),
    };
    const run = await rehearse({
      steps: ['operator: { name: fan, ask: Switch the fan on }', ramp],
      operator: () => gone,
    });
    expect(run.ending).toMatchObject({ how: 'stopped', reason: 'the terminal was closed at a question' });
    expectSafeEnd(run);
  });
});
