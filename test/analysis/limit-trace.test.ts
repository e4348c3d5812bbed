import { describe, expect, it } from 'vitest';
import { limitStyleFindings } from '../../src/analysis/limit-style.js';
import { limitTraceOf } from '../../src/analysis/limit-trace.js';
import { shortCircuitFindings } from '../../src/analysis/short-circuit.js';
import type { JournalEvent } from '../../src/record/journal-event.js';
import { collected, evenly, eventsOf, headerOf, type Recovered, type Step } from './evidence-of.js';
import { type Gives, traced } from './trace-events.js';

const known = { openCircuit: 15, droop: 0.02 };

const down = evenly(14.7, 1, 12);
const evidenceOf = (step: Step) => collected(eventsOf([step]), headerOf());

function verdict(gives: Gives, voltages = down, recoveries: readonly Recovered[] = []) {
  return limitTraceOf(evidenceOf(traced(gives, voltages, recoveries)), known);
}

const steady: Gives = () => 5;
const folding: Gives = (voltage) => 1.2 + (3.8 * voltage) / 14.9;
const power: Gives = (voltage) => (voltage > 9 ? (5 * 14.9) / voltage : null);
const pulsing: Gives = (_, sample) => (sample % 5 === 0 ? 5 : null);
const nothing: Gives = () => null;

describe('how a module limits, by a trace', () => {
  it.each<[string, Gives, readonly Recovered[], RegExp]>([
    ['constant-current', steady, [], /^the current stays the same down to 1\.00 V$/],
    ['foldback', folding, [], /^the current falls with the voltage, to 29 % at 1\.00 V$/],
    [
      'constant-power',
      power,
      [['came-back', 0, 0.1]],
      /^its power stays the same .*, and gives up at 8\.\d+ V$/,
    ],
    ['hiccup', pulsing, [], /^held at 14\.7 V and below it tries again and again/],
    ['hiccup', nothing, [['came-back', 0.2, 0.3]], /^held at 14\.7 V and below it gives nothing/],
    [
      'undetermined',
      nothing,
      [],
      /^held at 14\.7 V it gave nothing, and the run ended before it could come back$/,
    ],
    ['latch-off', nothing, [['stayed-off', 10, 10]], /switched itself off and stayed off/],
    [
      'undetermined',
      nothing,
      [
        ['stayed-off', 10, 10],
        ['stayed-off', 10, 10],
      ],
      /gave no voltage again/,
    ],
    ['undetermined', (voltage) => 5 + Math.sin(voltage), [], /neither stays nor falls/],
  ])('%s', (style, gives, recoveries, because) => {
    const found = verdict(gives, down, recoveries);
    expect(found?.style).toBe(style);
    expect(found?.because).toMatch(because);
  });

  it('is hiccup for a module that holds its current for a while, and pulses below', () => {
    const found = verdict((voltage, sample) => (voltage > 8 || sample % 5 === 0 ? 5 : null));
    expect(found).toMatchObject({
      style: 'hiccup',
      because: expect.stringMatching(/^held at 7\.\d+ V/) as string,
      limited: [],
    });
  });

  it('is undetermined where the trace ended early, or never left regulation', () => {
    expect(verdict(steady, evenly(14.7, 9, 6))?.because).toBe('the trace ended at 9.00 V');
    const regulated = verdict((voltage) => (15 - voltage) / 0.02, evenly(14.99, 14.95, 6));
    expect(regulated).toMatchObject({ style: 'undetermined', because: 'the trace met no limit' });
  });

  it('does not take the regulated line of a soft module for its limit', () => {
    const soft = { openCircuit: 15, droop: 0.5 };
    const gives: Gives = (voltage) => Math.min(5, (15 - voltage) / 0.5);
    const found = limitTraceOf(evidenceOf(traced(gives, down)), soft);
    expect(found?.style).toBe('constant-current');
    expect(found?.limited.every(({ current }) => current === 5)).toBe(true);
  });

  it('leaves out what could not be read, and a point that was broken off', () => {
    const step = traced(steady, down);
    const unread = (step.more ?? []).map((event, index): JournalEvent =>
      event.event === 'reading' && index % 11 === 0 ? { ...event, value: null } : event,
    );
    const broken = unread.filter((event) => event.event !== 'point-ended' || event.point !== 12);
    const found = limitTraceOf(evidenceOf({ ...step, more: broken }), known);
    expect(found?.style).toBe('constant-current');
    expect(found?.limited.length).toBe(11);
  });

  it('says nothing without a trace, or without a voltage to compare with', () => {
    expect(limitTraceOf(evidenceOf({ kind: 'limit-trace' }), known)).toBeUndefined();
    const evidence = evidenceOf(traced(steady, down));
    expect(limitTraceOf(evidence, { openCircuit: undefined, droop: 0 })).toBeUndefined();
  });
});

describe('a trace and the overload of a search', () => {
  const overload = (voltage: number, current: number): Step => ({
    kind: 'dropout-search',
    points: [
      {
        phase: 'overload',
        set: 5.4,
        outcome: 'measured',
        samples: Array.from({ length: 5 }, () => ({ meter: voltage, current })),
      },
    ],
    recoveries: [['came-back', 0, 0.05]],
  });

  function together(gives: Gives, search: Step) {
    const evidence = collected(eventsOf([traced(gives, down), search]), headerOf());
    const trace = limitTraceOf(evidence, known);
    return limitStyleFindings(evidence, { dropout: 5, ...known, trace })[0];
  }

  it('agree, and the trace gives the reason', () => {
    expect(together(folding, overload(0.8, 1.5))).toMatchObject({
      value: 'foldback',
      step: 1,
      note: 'the current falls with the voltage, to 29 % at 1.00 V',
    });
  });

  it('contradict each other: then it is undetermined, and both are named', () => {
    const found = together(steady, overload(0.8, 1.5));
    expect(found?.value).toBe('undetermined');
    expect(found?.note).toBe(
      'at constant voltage it looks like constant-current (the current stays the same down to 1.00 V), ' +
        'under overload like foldback (under overload the current falls to 30 % of the limit)',
    );
  });

  it('leave it to the one that speaks where the other cannot tell', () => {
    expect(together((voltage) => 5 + Math.sin(voltage), overload(0.8, 1.5))?.value).toBe('foldback');
    expect(together(folding, overload(14, 4.8))?.value).toBe('foldback');
  });
});

describe('the short-circuit current', () => {
  function shortOf(gives: Gives, voltages = down, header = headerOf()) {
    const evidence = collected(eventsOf([traced(gives, voltages)]), header);
    return shortCircuitFindings(evidence, limitTraceOf(evidence, known))[0];
  }

  it.each([
    ['constant current', steady, 5],
    ['foldback', folding, 1.2],
  ] as const)('is that of the line through the lowest points at 0 V: %s', (_, gives, expected) => {
    const found = shortOf(gives);
    expect(found?.value).toBeCloseTo(expected, 9);
    expect(found?.note).toBe('by a line through the 4 lowest points, 4.74 V to 1.00 V, extended to 0 V');
  });

  it.each([
    ['pulses', pulsing],
    ['gives up', power],
    ['fits no rule', (voltage: number) => 5 + Math.sin(voltage)],
  ] as const)('is not given for a module that %s', (_, gives) => {
    expect(shortOf(gives)).toBeUndefined();
  });

  it('is not given where too few points lie past the limit', () => {
    expect(shortOf(steady, evenly(14.7, 1, 3))).toBeUndefined();
  });

  it('has the promises of the instruments in its uncertainty, and the place of 0 V beyond the points', () => {
    const three = Math.sqrt(3);
    const header = headerOf({
      load: {
        voltage: { ofReading: 0, fixed: 0 },
        current: { ofReading: 0.01 * three, fixed: 0.02 * three, resolution: 0.002 * three },
      },
      meter: { voltage: { ofReading: 0.5, fixed: 0.1 * three } },
    });
    const found = shortOf(folding, down, header);
    const budget = Object.fromEntries((found?.budget ?? []).map((one) => [one.name, one.uncertainty]));
    expect(budget['load current, gain']).toBeCloseTo(0.01 * 1.2, 9);
    expect(budget['load current, offset']).toBeCloseTo(0.02, 9);
    expect(budget['meter voltage, offset']).toBeCloseTo((0.1 * 3.8) / 14.9, 9);
    const lowest = down.slice(-4);
    const middle = lowest.reduce((sum, one) => sum + one, 0) / 4;
    const spread = lowest.reduce((sum, one) => sum + (one - middle) ** 2, 0);
    expect(budget['scatter about the line, at 0 V']).toBeCloseTo(
      0.001 * Math.sqrt(1 / 4 + middle ** 2 / spread),
      9,
    );
  });
});
