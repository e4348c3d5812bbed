import { describe, expect, it } from 'vitest';
import type { SimulatedFault } from '../../src/files/simulation-section.js';
import { exactInstruments } from '../bench/nursery-bench.js';
import { circuitStep } from './circuit-step.js';
import { type Stage, stage, type StageChange } from './one-step.js';

// A module without noise: exact instruments read the same of the same.
const quiet = { noise: 0 };
const plain: StageChange = { module: quiet, simulation: { instruments: exactInstruments } };
const withFaults = (...faults: SimulatedFault[]): StageChange => ({
  module: quiet,
  simulation: { instruments: exactInstruments, faults },
});

/** Set-point, phase and outcome of each point, in order. */
function pointsOf({ the }: Pick<Stage, 'the'>) {
  const outcomes = new Map(the('point-ended').map(({ point, outcome }) => [point, outcome]));
  return the('point-began').map(({ point, phase, set, t }) => ({
    point,
    phase,
    set,
    t,
    outcome: outcomes.get(point),
  }));
}

const whole = (bench: Pick<Stage, 'the'>) =>
  pointsOf(bench).filter(({ outcome }) => outcome !== 'interrupted');

const ramp = { from: '0 A', to: '4 A', points: 5, dwell: '200 ms', readings: 5 };

async function ramped(change: StageChange) {
  const bench = await stage(change);
  await bench.perform('load-ramp', ramp);
  return bench;
}

/** When the third point of a ramp is in the middle of its readings. */
async function inMidPoint(): Promise<number> {
  const clean = await ramped(plain);
  return clean.the('reading').filter(({ point }) => point === 3)[7]?.t ?? Number.NaN;
}

describe('a point across which the connection was lost', () => {
  it.each(['load-lost', 'meter-lost', 'meter-silent', 'load-silent', 'meter-restarted'] as const)(
    'is taken again from its set-point, and nothing else is otherwise: %s',
    async (what) => {
      const clean = await ramped(plain);
      const bench = await ramped(withFaults({ at: await inMidPoint(), what, for: 0.6 }));
      const points = pointsOf(bench);
      expect(points.map(({ set, outcome }) => [set.current, outcome])).toEqual([
        [0, 'held'],
        [1, 'held'],
        [2, 'interrupted'],
        [2, 'held'],
        [3, 'held'],
        [4, 'held'],
      ]);
      const readings = (of: Stage, point: number | undefined) =>
        of
          .the('reading')
          .filter((one) => one.point === point)
          .map(({ of: post, what: which, value }) => [post, which, value]);
      expect(readings(bench, 4)).toEqual(readings(clean, 3));
      expect(bench.tried).toEqual(clean.tried);
      expect(bench.simulation.world.load.input).toBe('off');
    },
  );

  it('leaves in the journal what happened, in the order it happened', async () => {
    const bench = await ramped(withFaults({ at: await inMidPoint(), what: 'load-lost', for: 0.6 }));
    const began = bench.events.findIndex((event) => event.event === 'point-began' && event.point === 3);
    const story = bench.events
      .slice(began)
      .filter(({ event }) => event !== 'reading')
      .slice(0, 6)
      .map((event) => {
        if (event.event === 'notice') return event.text;
        if (event.event === 'point-ended') return event.outcome;
        return event.event === 'input' ? `input ${event.state}` : event.event;
      });
    expect(story).toEqual([
      'point-began',
      'input on',
      expect.stringMatching(/connection lost: .*; it answers again after \d+ ms; its input is still on$/),
      'interrupted',
      'the point was interrupted, so nothing is made of it; it is taken again',
      'point-began',
    ]);
  });

  it('three times in a row ends the run: over such a line nothing can be measured', async () => {
    const at = await inMidPoint();
    const faults = Array.from({ length: 40 }, (_, index) => ({
      at: at + index * 0.2,
      what: 'meter-lost' as const,
      for: 0.01,
    }));
    const bench = await stage(withFaults(...faults));
    await expect(bench.perform('load-ramp', ramp)).rejects.toMatchObject({
      code: 'UNSTEADY_LINE',
      exitCode: 69,
      takes: 3,
      message: expect.stringMatching(
        /^one point was interrupted 3 times in a row; the last time: simulated:.*connection lost/,
      ) as string,
    });
    expect(
      pointsOf(bench)
        .slice(-3)
        .map(({ outcome }) => outcome),
    ).toEqual(Array(3).fill('interrupted'));
  });

  it('is no dropout where a sample of it was taken across the gap', async () => {
    const reads = (dip: number) => (count: number) => (count === dip ? '0.1' : '15.15');
    const clean = await ramped({ ...plain, meterReads: reads(0) });
    const at = clean.the('reading').filter(({ of }) => of === 'meter')[10]?.t ?? 0;
    const bench = await ramped({
      ...withFaults({ at: at + 0.0005, what: 'load-lost', for: 0.3 }),
      meterReads: reads(11),
    });
    const believed = bench.the('point-ended').map(({ outcome }) => outcome);
    expect(believed).toEqual(['held', 'held', 'interrupted', 'held', 'held', 'held']);
    expect(bench.the('reading').filter(({ value }) => value === 0.1)).toHaveLength(1);
    expect(bench.tried).toEqual({ held: 4 });
  });

  it('while the program was merely waiting is noticed at the next question, and costs nothing', async () => {
    const soak = { current: '2 A', for: '40 s', every: '10 s', over: '60 s' };
    const clean = await stage(plain);
    await clean.perform('soak', soak);
    const waits = clean.the('point-ended').filter(({ point }) => point === 8)[0]?.t ?? 0;
    const bench = await stage(withFaults({ at: waits + 1, what: 'load-lost', for: 0.4 }));
    await bench.perform('soak', soak);
    expect(bench.bench.gaps).toBe(1);
    expect(pointsOf(bench).filter(({ outcome }) => outcome === 'interrupted')).toEqual([]);
    expect(whole(bench).map(({ phase, set }) => [phase, set])).toEqual(
      whole(clean).map(({ phase, set }) => [phase, set]),
    );
  });

  it('in a soak costs one look', async () => {
    const soak = { current: '2 A', for: '40 s', every: '10 s', over: '60 s' };
    const clean = await stage(plain);
    await clean.perform('soak', soak);
    const at = clean.the('reading').filter(({ point }) => point === 8)[4]?.t ?? 0;
    const bench = await stage(withFaults({ at, what: 'meter-lost', for: 0.4 }));
    await bench.perform('soak', soak);
    expect(pointsOf(bench).filter(({ outcome }) => outcome === 'interrupted')).toHaveLength(1);
    expect(whole(bench).map(({ phase, set, outcome }) => [phase, set, outcome])).toEqual(
      whole(clean).map(({ phase, set, outcome }) => [phase, set, outcome]),
    );
  });
});

describe('a search with an interrupted probe', () => {
  const search = { ceiling: '200 % of rated-current', resolution: '50 mA' };

  it('gives the same bracket as without, whichever probe it is, and judges nothing of it', async () => {
    const clean = await stage(plain);
    await clean.perform('dropout-search', search);
    const points = pointsOf(clean);
    for (const { point, phase } of points.filter(({ phase }) => phase !== 'recovery').slice(0, 9)) {
      const at = clean.the('reading').filter((one) => one.point === point)[1]?.t ?? 0;
      const bench = await stage(withFaults({ at, what: 'meter-lost', for: 0.2 }));
      await bench.perform('dropout-search', search);
      expect(bench.bench.gaps, `${phase} ${point}`).toBe(1);
      expect(bench.known['dropout-current'], phase).toBe(clean.known['dropout-current']);
      expect(bench.tried, phase).toEqual(clean.tried);
      expect(
        whole(bench).map(({ phase: what, set, outcome }) => [what, set, outcome]),
        phase,
      ).toEqual(points.map(({ phase: what, set, outcome }) => [what, set, outcome]));
    }
  });
});

describe('a load that lost its power in the middle of a ramp', () => {
  it('ends it, and is off', async () => {
    const bench = await stage(withFaults({ at: await inMidPoint(), what: 'load-restarted', for: 0.6 }));
    await expect(bench.perform('load-ramp', ramp)).rejects.toMatchObject({ code: 'LOAD_WENT_OFF' });
    expect(bench.simulation.world.load.input).toBe('off');
    expect(bench.tried).toEqual({ held: 1 });
  });
});

describe('a share whose scanner loses its power', () => {
  const share = { from: '2 A', to: '8 A', points: 3, prove: false };

  it.each(['scanner-lost', 'scanner-restarted'] as const)(
    'has every place read through its own relay in what counts: %s',
    async (what) => {
      const clean = await circuitStep('sharing-log', share);
      expect(clean.error).toBeUndefined();
      const readings = clean.the('reading').filter(({ point }) => point === 2);
      for (const { t } of [readings[1], readings[3], readings.at(-3), readings.at(-1)].flatMap(
        (one) => one ?? [],
      )) {
        const step = await circuitStep('sharing-log', share, {
          faults: [{ at: t + 0.0005, what, for: 0.3 }],
        });
        expect(step.error).toBeUndefined();
        const ended = step.the('point-ended');
        const counts = (one: typeof step) =>
          one
            .the('reading')
            .filter(
              ({ point }) => one.the('point-ended').find((end) => end.point === point)?.outcome === 'held',
            )
            .map(({ of, what: which, at, value }) => ({ of, which, at, value }));
        expect(ended.filter(({ outcome }) => outcome === 'interrupted').length).toBeLessThanOrEqual(1);
        const [there, were] = [counts(step), counts(clean)];
        expect(there.map(({ of, which, at }) => [of, which, at])).toEqual(
          were.map(({ of, which, at }) => [of, which, at]),
        );
        for (const [index, { value }] of there.entries()) {
          expect(value).toBeCloseTo(were[index]?.value ?? Number.NaN, 2);
        }
      }
    },
  );
});
