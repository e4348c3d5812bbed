import { describe, expect, it } from 'vitest';
import { analyse } from '../../src/analysis/analyse.js';
import type { Evidence, PointEvidence } from '../../src/analysis/evidence.js';
import { type Finding, findingNamed } from '../../src/analysis/finding.js';
import { PointCollector } from '../../src/analysis/point-evidence.js';
import { soaksSeen } from '../../src/analysis/soak-seen.js';
import type { TimedEvent } from '../../src/record/journal-event.js';
import { normalScatter } from '../statistics/normal-scatter.js';
import { collected } from './evidence-of.js';
import { soak, thermometerHeader } from './soak-events.js';

const room = { ambient: { temperature: 22, uncertainty: 0.5 } };
const header = thermometerHeader(room);

/** The same evidence with every look kept, as if memory had no end. */
function lookByLook(evidence: Evidence, events: readonly TimedEvent[]): Evidence {
  const points: PointEvidence[] = [];
  let collector: PointCollector | undefined;
  for (const event of events) {
    if (event.event === 'point-began') collector = new PointCollector(header.bench, event, event.t);
    if (event.event === 'reading') collector?.add(event);
    if (event.event !== 'point-ended' || collector === undefined || event.outcome === 'interrupted') continue;
    collector.point.outcome = event.outcome;
    points.push(collector.point);
  }
  return { ...evidence, steps: evidence.steps.map((step) => ({ ...step, points })) };
}

/** A thermometer that shows tenths, a meter with a millivolt of noise, and a module that drifts as it warms. */
function soaked(seed: number, timeConstant: number, { looks, every }: { looks: number; every: number }) {
  const scatter = normalScatter(seed);
  const risen = (t: number): number => 1 - Math.exp(-t / timeConstant);
  const events = soak(1, 0, {
    until: (looks - 1) * every,
    every,
    temperature: (t) => Math.round((23 + 36 * risen(t) + 0.2 * scatter()) * 10) / 10,
    voltage: (t) => 15.1 - 0.02 * risen(t) - 1e-9 * t + 0.001 * scatter(),
  });
  const evidence = collected(events, header);
  return { pooled: evidence, whole: lookByLook(evidence, events) };
}

function numberOf(findings: readonly Finding[], name: string) {
  const finding = findingNamed(findings, name);
  return { value: finding?.value as number, uncertainty: finding?.standardUncertainty ?? NaN };
}

describe('a soak that is longer than what is kept look by look', () => {
  it.each([
    [1, 720, { looks: 40_000, every: 10 }],
    [2, 720, { looks: 15_000, every: 1 }],
    [3, 3600, { looks: 20_000, every: 20 }],
    [4, 120, { looks: 30_000, every: 10 }],
    [5, 40_000, { looks: 15_000, every: 10 }],
  ])('comes to what all of its looks come to (%i: %i s)', (seed, timeConstant, length) => {
    const { pooled, whole } = soaked(seed, timeConstant, length);
    expect(pooled.steps[0]?.points.length).toBeLessThan(9000);
    expect(whole.steps[0]?.points).toHaveLength(length.looks + 3);
    const [short, long] = [analyse(pooled), analyse(whole)];
    expect(short.map(({ name, bound }) => [name, bound])).toEqual(
      long.map(({ name, bound }) => [name, bound]),
    );
    const [settling, reference] = [soaksSeen(pooled)[0]?.settling, soaksSeen(whole)[0]?.settling];
    if (settling === undefined || reference === undefined) throw new Error('it settles nowhere');
    // What grouping leaves open is no more than what the scatter leaves open, and says so.
    expect(Math.abs(settling.settled - reference.settled)).toBeLessThan(2 * reference.uncertainty);
    expect(settling.uncertainty / reference.uncertainty).toBeCloseTo(1, 0);
    const [slow, fast] = [settling.timeConstant, reference.timeConstant];
    expect(Math.abs((slow?.value ?? NaN) - (fast?.value ?? NaN))).toBeLessThan(
      2 * Math.hypot(slow?.uncertainty ?? NaN, fast?.uncertainty ?? NaN),
    );
    expect(Math.abs((slow?.value ?? NaN) - timeConstant)).toBeLessThan(4 * (slow?.uncertainty ?? NaN));
    const [rise, all] = [short, long].map((findings) => numberOf(findings, 'temperature-rise'));
    expect(rise?.uncertainty).toBeCloseTo(all?.uncertainty ?? NaN, 3);
    // The last hour is kept as it is.
    expect(numberOf(short, 'thermal-drift')).toEqual(numberOf(long, 'thermal-drift'));
    expect(findingNamed(short, 'thermal-drift')?.note).toBe(findingNamed(long, 'thermal-drift')?.note);
  });

  it('has an idle module before it whose voltage is the mean of all looks, and as uncertain', () => {
    const scatter = normalScatter(6);
    const events: TimedEvent[] = [{ t: 0, event: 'step-began', step: 1, kind: 'open-circuit' }];
    for (let point = 1; point <= 20_000; point += 1) {
      const at = { t: point, step: 1, point };
      const reading = { ...at, event: 'reading', sample: 1 } as const;
      events.push({ ...at, event: 'point-began', phase: 'idle', set: {} });
      events.push({ ...reading, of: 'meter', what: 'voltage', value: 15.2 + 0.01 * scatter() });
      events.push({ ...reading, of: 'load', what: 'current', value: 0 });
      events.push({ ...at, event: 'point-ended', outcome: 'measured' });
    }
    const pooled = collected(events, header);
    const whole = lookByLook(pooled, events);
    const [short, long] = [pooled, whole].map((evidence) =>
      numberOf(analyse(evidence), 'open-circuit-voltage'),
    );
    expect(pooled.steps[0]?.points.length).toBeLessThan(9000);
    expect(Math.abs((short?.value ?? NaN) - (long?.value ?? NaN))).toBeLessThan(
      0.1 * (long?.uncertainty ?? 0),
    );
    expect((short?.uncertainty ?? NaN) / (long?.uncertainty ?? NaN)).toBeCloseTo(1, 1);
  });
});
