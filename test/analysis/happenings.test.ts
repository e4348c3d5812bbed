import { describe, expect, it } from 'vitest';
import { HappeningCollector } from '../../src/analysis/happenings.js';
import { collected, headerOf } from './evidence-of.js';

describe('what happened on the way', () => {
  it('tells the same thing in the same step once, with how often and from when to when', () => {
    const collector = new HappeningCollector();
    collector.add('notice', 'the meter was slow', 1, 2);
    collector.add('notice', 'the meter was slow', 2, 5);
    collector.add('notice', 'the meter was slow', 1, 9);
    expect(collector.result()).toEqual({
      kept: [
        { kind: 'notice', text: 'the meter was slow', step: 1, first: 2, last: 9, times: 2 },
        { kind: 'notice', text: 'the meter was slow', step: 2, first: 5, last: 5, times: 1 },
      ],
      missed: 0,
    });
  });

  it('does not grow with a notice that an instrument repeats, nor with a million different ones', () => {
    const collector = new HappeningCollector();
    for (let t = 0; t < 100_000; t += 1) {
      collector.add('notice', 'again', 1, t);
      collector.add('notice', `error ${t}`, 1, t);
    }
    const { kept, missed } = collector.result();
    expect(kept).toHaveLength(200);
    expect(kept[0]).toMatchObject({ text: 'again', times: 100_000 });
    expect(kept.reduce((sum, { times }) => sum + times, 0) + missed).toBe(200_000);
    // What came last is what a reader looks for first.
    expect(kept.at(-1)).toMatchObject({ text: 'error 99999' });
  });

  it('keeps the beginning of a text without end, and never half a sign', () => {
    const collector = new HappeningCollector();
    collector.add('notice', `${'x'.repeat(999)}\u{1f50c}${'y'.repeat(1e6)}`, undefined, 0);
    const [only] = collector.result().kept;
    expect(only?.text).toBe(`${'x'.repeat(999)}… (shortened; the journal has all of it)`);
  });

  it('is told of a record in words: what was asked and answered, what the load was told, what tripped', () => {
    const events = [
      { t: 0, event: 'caution', name: 'mains', by: 'operator' },
      { t: 1, event: 'step-began', step: 1, kind: 'operator-step' },
      { t: 2, event: 'prompt', step: 1, text: 'Read the room thermometer.' },
      {
        t: 3,
        event: 'answer',
        step: 1,
        name: 'room',
        answer: '73 degF',
        value: 22.8,
        dimension: 'temperature',
      },
      { t: 4, event: 'step-ended', step: 1 },
      { t: 5, event: 'step-began', step: 2, kind: 'load-ramp' },
      { t: 6, event: 'input', state: 'on', confirmed: false },
      { t: 6, event: 'input', state: 'on', confirmed: true },
      { t: 7, event: 'guard-tripped', guard: 'temperature', text: 'the case reached 91 °C' },
      { t: 8, event: 'input', state: 'off', confirmed: false },
      { t: 9, event: 'recovery', step: 2, outcome: 'came-back', after: 0.42, within: 0.4812 },
    ] as const;
    const evidence = collected(events, headerOf());
    expect(evidence.happenings.kept.map(({ kind, text, step }) => [kind, text, step])).toEqual([
      ['asked', 'Read the room thermometer.', 1],
      ['answered', 'room: 73 degF, taken as 22.8 °C', 1],
      ['input', 'load told to go on', 2],
      ['input', 'load on, read back', 2],
      ['guard', 'temperature: the case reached 91 °C', 2],
      ['input', 'load told to go off; that it did was not read back', 2],
      ['recovery', 'the output came back by itself, 420 ms to 481 ms later', 2],
    ]);
    expect(evidence.cautions).toEqual([events[0]]);
    expect(evidence.steps.map(({ began, ended }) => [began, ended])).toEqual([
      [1, 4],
      [5, undefined],
    ]);
  });
});
