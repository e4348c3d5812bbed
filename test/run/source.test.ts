import { describe, expect, it } from 'vitest';
import { simulatedOperator } from '../../src/cli/simulated-operator.js';
import type { SimulatedFault } from '../../src/files/simulation-section.js';
import type { TimedEvent } from '../../src/record/journal-event.js';
import { StoppedByOperator } from '../../src/run/stopped.js';
import { exactInstruments, type Nursery } from '../bench/nursery-bench.js';
import { k7 } from '../steps/one-step.js';
import { rehearse, type RehearsalChange, tidyUp } from './rehearsal.js';

tidyUp();

const ramp = 'load-ramp: { from: 1 A, to: 2.5 A, points: 4 }';

/** A run on the bench whose source feeds K7, and all that load and source did, as it really was. */
async function fed(change: Partial<RehearsalChange> & { readonly fault?: SimulatedFault }) {
  const acts: string[] = [];
  const wanted = change.operator ?? ((bench: Nursery) => simulatedOperator(bench.simulation));
  const { fault } = change;
  const rehearsal = await rehearse({
    steps: ['open-circuit: { for: 1 s }', ramp],
    file: 'nursery-source',
    label: k7,
    simulation: { instruments: exactInstruments, faults: fault === undefined ? [] : [fault] },
    ...change,
    operator: (bench) => {
      const { world, began } = bench.simulation;
      let last = { load: 'off', source: 'off' };
      world.onStep(() => {
        const now = {
          load: world.load.input,
          source: world.sourceAt(bench.clock.now() - began).output,
        };
        if (now.load !== last.load) acts.push(`load ${now.load}`);
        if (now.source !== last.source) acts.push(`source ${now.source}`);
        last = now;
      });
      const operator = wanted(bench);
      return {
        ...operator,
        acknowledge: (caution, text, signal) => {
          acts.push(`caution ${caution}`);
          return operator.acknowledge(caution, text, signal);
        },
      };
    },
  });
  const { world, began } = rehearsal.bench.simulation;
  const output = world.sourceAt(rehearsal.bench.clock.now() - began).output;
  return { ...rehearsal, acts, output };
}

function lastNoticeOf(events: readonly TimedEvent[]): string | undefined {
  return events.flatMap((event) => (event.event === 'notice' ? [event.text] : [])).at(-1);
}

describe('a run whose module is fed by a source', () => {
  it('feeds it once everything was acknowledged, and ends with the load off and then the source', async () => {
    const { acts, ending, status, sourceSafety, noticed, events, output } = await fed({
      cautions: '[hot-surfaces]',
      wiring: '[Source to the input]',
    });
    expect(ending).toEqual({ how: 'completed' });
    expect(acts).toEqual([
      'caution wiring',
      'caution hot-surfaces',
      'source on',
      'load on',
      'load off',
      'source off',
    ]);
    expect(sourceSafety).toEqual({ kind: 'confirmed' });
    expect(status).toBe(0);
    expect(output).toBe('off');
    expect(noticed.slice(0, 2)).toEqual([
      'the source at simulated:dc-source feeds what is under test from here on: 24 V, 4 A at most',
      'before the load was switched on the module read 15.08 V',
    ]);
    expect(lastNoticeOf(events)).toBe('the source is off; it was read back');
  });

  it('says in its record that the source goes on before it does, and when it is off', async () => {
    const outputs: string[] = [];
    const { events } = await fed({
      onEvent: (event, { simulation, clock }) => {
        if (event.event !== 'notice' || !event.text.includes('source')) return;
        const { output } = simulation.world.sourceAt(clock.now() - simulation.began);
        outputs.push(`${output}: ${event.text.includes('feeds') ? 'feeds' : 'is off'}`);
      },
    });
    expect(outputs).toEqual(['off: feeds', 'off: is off']);
    expect(events.filter(({ event }) => event === 'reading').length).toBeGreaterThan(10);
  });

  it('does not feed it while a step may have it unplugged, nor where no step needs it alive', async () => {
    const before = await fed({ steps: ['wait: { for: 5 s }', 'open-circuit: { for: 1 s }'] });
    const began = before.events.find(({ event }) => event === 'point-began');
    const fedFrom = before.events.find((one) => one.event === 'notice' && one.text.includes('feeds'));
    expect(fedFrom?.t).toBeGreaterThan(5);
    expect(began?.t).toBeGreaterThan(fedFrom?.t ?? 0);
    const never = await fed({ steps: ['wait: { for: 5 s }'] });
    expect(never.acts).toEqual([]);
    expect(never.ending.how).toBe('completed');
  });

  it('feeds nothing when a caution is refused', async () => {
    const { acts, ending, status } = await fed({
      cautions: '[hot-surfaces]',
      operator: (bench) => ({
        ...simulatedOperator(bench.simulation),
        acknowledge: () => Promise.resolve('refused'),
      }),
    });
    expect(ending.how).toBe('stopped');
    expect(acts).toEqual(['caution hot-surfaces']);
    expect(status).toBe(3);
  });

  it('does not begin when the source is on already, and leaves it off', async () => {
    const { ending, output, events } = await fed({
      onEvent: ({ event }, { simulation }) => {
        if (event === 'opened') simulation.world.setSource({ output: 'on', setVoltage: 12 }, 0);
      },
    });
    expect(ending).toMatchObject({
      how: 'stopped',
      reason: 'before anything was switched on: the output of the source at simulated:dc-source is on',
    });
    expect(output).toBe('off');
    expect(events.some(({ event }) => event === 'reading')).toBe(false);
  });

  it('that is stopped in the middle has the load off first', async () => {
    const stop = new AbortController();
    const { acts, ending, output } = await fed({
      signal: stop.signal,
      onEvent: (event) => {
        if (event.event === 'point-began' && event.phase === 'ramp' && event.set.current === 2)
          stop.abort(new StoppedByOperator('stopped with Ctrl-C'));
      },
    });
    expect(ending).toMatchObject({ how: 'stopped', reason: 'stopped with Ctrl-C' });
    expect(acts.slice(-3)).toEqual(['load on', 'load off', 'source off']);
    expect(output).toBe('off');
  });

  it('that is stopped while the input is away leaves it away', async () => {
    const stop = new AbortController();
    const { acts, ending, output } = await fed({
      steps: ['open-circuit: { for: 1 s }', 'dropout-search: { from: 2 A, ceiling: 5 A }'],
      signal: stop.signal,
      onEvent: (event) => {
        if (event.event === 'notice' && event.text.includes('takes its input away'))
          stop.abort(new StoppedByOperator('stopped with Ctrl-C'));
      },
    });
    expect(ending.how).toBe('stopped');
    expect(acts.slice(-2)).toEqual(['load off', 'source off']);
    expect(output).toBe('off');
  });

  it('that a guard stops has both off', async () => {
    const { acts, ending, output } = await fed({ fault: { at: 6, what: 'reversed' } });
    expect(ending.how).toBe('stopped');
    expect(acts.slice(-2)).toEqual(['load off', 'source off']);
    expect(output).toBe('off');
  });

  it('and whose source loses its power in the middle ends there, and makes no dropout of it', async () => {
    const { ending, status, events, output, acts } = await fed({
      fault: { at: 6, what: 'source-restarted', for: 0.5 },
    });
    expect(ending).toMatchObject({ how: 'stopped', error: { code: 'SOURCE_WENT_OFF' } });
    expect(status).toBe(3);
    expect(events.filter((event) => event.event === 'point-ended' && event.outcome === 'dropped')).toEqual(
      [],
    );
    expect(output).toBe('off');
    expect(acts.at(-1)).toBe('load off');
  });

  it('and whose source falls silent for good ends with the load off, and says that the source may be on', async () => {
    const { ending, safety, sourceSafety, events, bench, status } = await fed({
      fault: { at: 6, what: 'source-silent' },
    });
    expect(ending).toMatchObject({ how: 'failed', error: { code: 'INSTRUMENT_SILENT' } });
    expect(safety).toEqual({ kind: 'confirmed' });
    expect(bench.simulation.world.load.input).toBe('off');
    expect(sourceSafety).toMatchObject({ kind: 'unconfirmed' });
    expect(lastNoticeOf(events)).toMatch(/^it could not be confirmed that the source is off: /);
    expect(status).toBe(69);
  });

  it('that was completed is no success when nobody knows whether the source is off', async () => {
    const { ending, sourceSafety, status } = await fed({
      source: {
        operations: {
          'make-safe': [{ text: '*CLS' }],
          'output-on': [{ text: 'OUTP ON' }],
          'output-off': [{ text: 'OUTP OFF' }],
          'set-voltage': [{ text: 'VOLT {volts}' }],
          'set-current': [{ text: 'CURR {amps}' }],
        },
      },
    });
    expect(ending.how).toBe('completed');
    expect(sourceSafety).toMatchObject({ kind: 'unconfirmed' });
    expect(status).toBe(69);
  });
});
