import { describe, expect, it } from 'vitest';
import { module } from '../bench/group-bench.js';
import { stepKinds } from '../../src/steps/index.js';
import { circuitStep } from './circuit-step.js';

const parameters = { to: '6 A', points: 3, dwell: '100 ms', readings: 2 };

describe('a sharing-log', () => {
  it('proves each place by unplugging its module, then climbs, every place read at each point', async () => {
    const step = await circuitStep('sharing-log', { ...parameters, from: '2 A' });
    expect(step.error).toBeUndefined();
    expect(step.acts).toEqual(['K1', 'K2', 'K3'].flatMap((name) => [`unplug ${name}`, `plug in ${name}`]));
    expect(step.the('point-began').map(({ phase, set, of }) => [phase, set.current?.toFixed(3), of])).toEqual(
      [
        ['proof', '1.800', undefined],
        ['proof', '1.800', 'K1'],
        ['proof', '1.800', 'K2'],
        ['proof', '1.800', 'K3'],
        ['share', '2.000', undefined],
        ['share', '4.000', undefined],
        ['share', '6.000', undefined],
      ],
    );
    const last = step.the('reading').filter(({ point }) => point === 7);
    expect(new Set(last.flatMap(({ at }) => at ?? []))).toEqual(
      new Set(['ballast-of-K1', 'ballast-of-K2', 'ballast-of-K3']),
    );
    expect(step.the('input').at(-1)).toMatchObject({ state: 'off', confirmed: true });
  });

  it('asks nobody to unplug anything where it is told not to prove', async () => {
    const step = await circuitStep('sharing-log', { ...parameters, prove: false });
    expect(step.acts).toEqual([]);
    expect(step.the('point-began').every(({ phase }) => phase === 'share')).toBe(true);
  });

  it('goes through the same set-points once for each place where the operator moves the meter', async () => {
    const step = await circuitStep(
      'sharing-log',
      { ...parameters, prove: false },
      { measuredBy: 'operator' },
    );
    expect(step.error).toBeUndefined();
    expect(step.acts).toEqual([
      'probe ballast of K1',
      'probe ballast of K2',
      'probe ballast of K3',
      'probe the output',
    ]);
    const points = step.the('point-began').map(({ of, set }) => [of, set.current]);
    const sets = points.filter(([of]) => of === 'K1').map(([, set]) => set);
    expect(sets).toHaveLength(3);
    expect(points).toEqual(['K1', 'K2', 'K3'].flatMap((of) => sets.map((set) => [of, set])));
  });

  it('has the load off whenever a hand is at the probes or at a plug', async () => {
    const step = await circuitStep('sharing-log', parameters, { measuredBy: 'operator' });
    let input = 'off';
    const states = step.events.flatMap((event) => {
      if (event.event === 'input') input = event.state;
      return event.event === 'prompt' ? [input] : [];
    });
    expect(states.length).toBeGreaterThan(8);
    expect(step.the('input').filter(({ state }) => state === 'on').length).toBeGreaterThan(8);
    expect(new Set(states)).toEqual(new Set(['off']));
  });

  it('goes no higher than was held, proves that it comes back, and looks once more who is there', async () => {
    const weak = [module('K1', 12.34), module('K2', 12.34), module('K3', 12.34)].map((one) => ({
      ...one,
      limit: { style: 'hiccup', current: 1.5, period: 0.8 } as const,
    }));
    const step = await circuitStep(
      'sharing-log',
      { ...parameters, from: '1 A', points: 6, prove: false },
      { modules: weak },
    );
    expect(step.error).toBeUndefined();
    const outcomes = step.the('point-ended').map(({ outcome }) => outcome);
    expect(outcomes).toContain('dropped');
    expect(step.the('recovery').map(({ outcome }) => outcome)).toEqual(['came-back']);
    const last = step.the('point-began').at(-1);
    expect([last?.phase, last?.set.current]).toEqual(['proof', 1]);
  });

  it('leaves out on later passes what an earlier one saw dropped', async () => {
    const weak = [module('K1', 12.34), module('K2', 12.34), module('K3', 12.34)].map((one) => ({
      ...one,
      limit: { style: 'hiccup', current: 1.5, period: 0.8 } as const,
    }));
    const step = await circuitStep(
      'sharing-log',
      { ...parameters, from: '1 A', points: 6, prove: false },
      { modules: weak, measuredBy: 'operator' },
    );
    expect(step.the('point-ended').filter(({ outcome }) => outcome === 'dropped').length).toBeLessThan(5);
    const highest = (of: string): number =>
      Math.max(
        ...step
          .the('point-began')
          .flatMap((one) => (one.of === of && one.phase === 'share' ? [one.set.current ?? 0] : [])),
      );
    expect(highest('K2')).toBeLessThan(highest('K1'));
  });

  it('holds the last point and looks again and again', async () => {
    const step = await circuitStep('sharing-log', {
      ...parameters,
      prove: false,
      hold: '1 min',
      every: '10 s',
    });
    const last = step.the('point-began').filter(({ set }) => set.current === 6);
    expect(last.length).toBeGreaterThanOrEqual(6);
    expect((last.at(-1)?.t ?? 0) - (last[0]?.t ?? 0)).toBeGreaterThan(45);
  });

  it('takes the load off as soon as the group no longer holds what it is held at, and waits for it', async () => {
    const warming = ['K1', 'K2', 'K3'].map((name) =>
      module(name, 12.34, {
        limit: { style: 'hiccup', current: 2.2, period: 0.8 },
        thermal: { riseAtRated: 40, timeConstant: 120, ambient: 23, limitPerKelvin: -0.005 },
        ratedCurrent: 2,
      }),
    );
    const step = await circuitStep(
      'sharing-log',
      { ...parameters, from: '2 A', prove: false, hold: '1 h', every: '10 s' },
      { modules: warming },
    );
    expect(step.error).toBeUndefined();
    const outcomes = step.the('point-ended').map(({ outcome }) => outcome);
    expect(outcomes.length).toBeGreaterThan(5);
    expect(outcomes.filter((outcome) => outcome === 'dropped').length).toBeLessThanOrEqual(2);
    expect(step.the('recovery').map(({ outcome }) => outcome)).toEqual(['came-back']);
    expect(step.the('point-began').at(-1)).toMatchObject({ phase: 'proof', set: { current: 2 } });
    expect(step.the('input').at(-1)).toMatchObject({ state: 'off' });
  });

  it('never leaves a group unwatched for longer than a minute', () => {
    const [log] = stepKinds.filter(({ kind }) => kind === 'sharing-log');
    expect(log?.parameters.safeParse({ ...parameters, every: '60 s' }).success).toBe(true);
    expect(log?.parameters.safeParse({ ...parameters, every: '61 s' }).success).toBe(false);
  });
});

describe('the proof of the places', () => {
  it.each([
    [{ faults: [{ at: 0, what: 'scanner-stuck' }] }, 'scanner-stuck'],
    [{ faults: [{ at: 0, what: 'probes-reversed', of: 'K2' }] }, 'probes-reversed'],
    [{ named: ['K2', 'K1', 'K3'] }, 'modules-swapped'],
  ] as const)('names what is wrong, and nothing is logged: %j', async (change, what) => {
    const step = await circuitStep('sharing-log', parameters, change);
    expect(step.error).toMatchObject({ code: 'WRONG_PLACE', what });
    expect(step.the('point-began').filter(({ phase }) => phase === 'share')).toEqual([]);
  });

  it('says so where the meter cannot tell a dead ballast from a live one, and blames no probe', async () => {
    const joined = [module('K1', 12.35), module('K2', 12.34), module('K3', 12.34)].map((one) => ({
      ...one,
      ballast: 0.001,
    }));
    const step = await circuitStep('sharing-log', { ...parameters, from: '1 A' }, { modules: joined });
    expect(step.error).toBeUndefined();
    const notices = step.the('notice').map(({ text }) => text);
    expect(notices.filter((text) => text.includes('could not be shown that the place of'))).toHaveLength(3);
  });
});
