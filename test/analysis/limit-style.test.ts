import { describe, expect, it } from 'vitest';
import { limitStyleFindings } from '../../src/analysis/limit-style.js';
import { evidenceOf, type Point, type Recovered, type Sample, type Step } from './evidence-of.js';

const module = { dropout: 5, openCircuit: 15, droop: 0.018 };
const backSoon: Recovered = ['came-back', 0, 0.05];

/** As the volts and amperes that were read under an overload set to 5.4 A. */
function watched(...pairs: readonly (readonly [voltage: number | null, current: number | null])[]): Point {
  const samples: readonly Sample[] = pairs.map(([meter, current]) => ({ meter, current }));
  return { phase: 'overload', set: 5.4, outcome: 'measured', samples };
}

function styleOf(overload: Point, recovered: readonly Recovered[] = [backSoon], of = module) {
  const step: Step = { kind: 'dropout-search', points: [overload], recoveries: recovered };
  return limitStyleFindings(evidenceOf([step]), of).map(({ value, note }) => [value, note]);
}

const pulses = watched([0, 0], [8, 4.9], [0, 0.01], [0.1, 0], [8, 5.1], [0, 0]);
const nothing = watched([0, 0], [0.1, 0.02], [0, 0], [0, 0]);
const steadily = (voltage: number, current: number): Point =>
  watched([voltage, current], [voltage, current + 0.01], [voltage, current - 0.01], [voltage, current]);

describe('how a module limits', () => {
  it.each([
    ['latch-off', 'the voltage stays away', nothing, 'stayed-off'],
    ['latch-off', 'whatever the samples look like', pulses, 'stayed-off'],
    ['hiccup', 'current comes and goes', pulses, 'came-back'],
    ['hiccup', 'nothing comes, and it is back when the load goes', nothing, 'came-back'],
    ['constant-current', 'the current stays at the limit', steadily(1, 5.05), 'came-back'],
    ['constant-current', '…within a tenth', steadily(1, 4.6), 'came-back'],
    ['foldback', 'a steady current well below it', steadily(0.8, 1.5), 'came-back'],
    ['constant-power', 'the set current flows at the power of the limit', steadily(13.2, 5.4), 'came-back'],
  ] as const)('%s: %s', (style, _, overload, recovered) => {
    expect(styleOf(overload, [[recovered, 0, 0.05]])[0]?.[0]).toBe(style);
  });

  it.each([
    ['a current that wanders', watched([1, 5], [1, 3], [1, 2.5], [1, 4]), /neither steady nor in pulses/],
    ['a voltage that collapses now and then', watched([14, 5], [1, 5], [14, 5], [1, 5]), /part of the time/],
    ['a sag with less than the power of the limit', steadily(9, 5.4), /sagged and did not collapse/],
    ['a sag in which the set current does not flow', steadily(14, 4.8), /sagged and did not collapse/],
    ['a current above the limit into nothing', steadily(1, 5.8), /no rule fits/],
  ])('is undetermined for %s', (_, overload, note) => {
    expect(styleOf(overload)).toEqual([['undetermined', expect.stringMatching(note) as string]]);
  });

  it('is undetermined for a sag that the droop explains: a soft module has not limited', () => {
    const soft = { ...module, droop: 0.15 };
    expect(styleOf(steadily(15 - 0.15 * 5.4, 5.4), [backSoon], soft)).toEqual([
      ['undetermined', 'the voltage sags by droop alone: no limit was met yet'],
    ]);
  });

  it('is constant-power where droop and limit share the fall', () => {
    // 15 V less 5.4 A × 65 mΩ is 14.65 V; the limit takes another 0.25 V.
    const drooping = { ...module, droop: 0.065 };
    expect(styleOf(steadily(14.4, 5.4), [backSoon], drooping)[0]?.[0]).toBe('constant-power');
  });

  it('is undetermined for nothing at all where the record ends before the recovery', () => {
    expect(styleOf(nothing, [])[0]?.[0]).toBe('undetermined');
  });

  it('says how far a foldback falls', () => {
    expect(styleOf(steadily(0.8, 1.5))).toEqual([
      ['foldback', 'under overload the current falls to 30 % of the limit'],
    ]);
  });

  it('leaves out samples that could not be read, and says nothing when too few remain', () => {
    const holes = watched([null, 5], [1, 5], [1, null], [1, 5.02], [1, 4.99]);
    expect(styleOf(holes)[0]?.[0]).toBe('constant-current');
    expect(styleOf(watched([null, null], [null, null], [null, null], [1, 5]))).toEqual([]);
    expect(styleOf(watched([1, 5], [1, 5]))).toEqual([]);
  });

  it('is not told without a dropout, without a voltage to compare with, or without an overload', () => {
    expect(styleOf(pulses, [backSoon], { ...module, dropout: undefined as never })).toEqual([]);
    expect(styleOf(pulses, [backSoon], { ...module, openCircuit: undefined as never })).toEqual([]);
    expect(styleOf({ ...pulses, phase: 'climb' })).toEqual([]);
  });
});
