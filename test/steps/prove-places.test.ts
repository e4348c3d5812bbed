import { describe, expect, it } from 'vitest';
import { module } from '../bench/group-bench.js';
import { circuitStep, type CircuitStepChange } from './circuit-step.js';

const group = { from: '1 A', to: '6 A', points: 3, dwell: '100 ms', readings: 2 };
const stack = { ...group, from: '0 A', to: '2 A' };
const inSeries = { circuit: 'series' } as const;
/** So much above the others that these carry nothing while it is there. */
const hogging = (hog: string) => ['K1', 'K2', 'K3'].map((name) => module(name, name === hog ? 12.9 : 12.34));
/** The two plugs are marked with each other's name: to the meter, the modules stand in each other's place. */
const confused = { plugs: { K1: 'K2', K2: 'K1' } };

describe('two modules that stand in each other’s place are named as that', () => {
  const swapped: readonly [string, CircuitStepChange][] = (['scanner', 'meters'] as const).flatMap(
    (measuredBy) =>
      (['K1', 'K2', 'none'] as const).map((hog): [string, CircuitStepChange] => [
        `by ${measuredBy}, ${hog} hogs`,
        { measuredBy, modules: hogging(hog), named: ['K2', 'K1', 'K3'] },
      ]),
  );
  it.each(swapped)('in a group: %s', async (_, change) => {
    const step = await circuitStep('sharing-log', group, change);
    expect(step.error).toMatchObject({ code: 'WRONG_PLACE', what: 'modules-swapped' });
    expect(step.the('point-began').filter(({ phase }) => phase === 'share')).toEqual([]);
  });

  it.each(['scanner', 'meters'] as const)('in a stack, by %s', async (measuredBy) => {
    const change = { ...inSeries, measuredBy, named: ['K1', 'K3', 'K2'] };
    const step = await circuitStep('stack-check', stack, change);
    expect(step.error).toMatchObject({ code: 'WRONG_PLACE', what: 'modules-swapped' });
    expect(step.error).toMatchObject({ message: expect.stringContaining('K3 stands in place 3') as string });
  });

  it('in a stack of different voltages, where either reads what the other’s label says', async () => {
    const modules = [module('K1', 24.1), module('K2', 12.3), module('K3', 12.3)];
    const labels = { K1: { voltage: 24, current: 3 } };
    const right = await circuitStep('stack-check', stack, { ...inSeries, modules, labels });
    expect(right.error).toBeUndefined();
    const wrong = await circuitStep('stack-check', stack, {
      ...inSeries,
      modules,
      labels,
      named: ['K2', 'K1', 'K3'],
    });
    expect(wrong.error).toMatchObject({ what: 'modules-swapped' });
  });

  it.each(['K1', 'K2', 'none'])('where the operator moves the one meter, and %s hogs', async (hog) => {
    const change = { measuredBy: 'operator', modules: hogging(hog), ...confused } as const;
    const step = await circuitStep('sharing-log', group, change);
    expect(step.error).toMatchObject({ what: 'modules-swapped' });
    expect(step.error).toMatchObject({
      message: expect.stringMatching(/^K2 was unplugged.* stands in place 1$/) as string,
    });
    expect(step.acts.filter((act) => act.startsWith('unplug'))).toEqual([
      'unplug K1',
      'unplug K2',
      'unplug K3',
    ]);
  });

  it('in a stack, where the operator moves the one meter', async () => {
    const change = { ...inSeries, measuredBy: 'operator', ...confused } as const;
    const step = await circuitStep('stack-check', stack, change);
    expect(step.error).toMatchObject({ what: 'modules-swapped' });
  });
});

describe('the proof of the places', () => {
  it.each(['K1', 'K3'])(
    'blames nobody in a group that is wired as it is named, though %s hogs',
    async (hog) => {
      const step = await circuitStep('sharing-log', group, { modules: hogging(hog) });
      expect(step.error).toBeUndefined();
      expect(step.the('point-began').filter(({ phase }) => phase === 'share')).toHaveLength(3);
    },
  );

  it('says of which it could not tell them apart, as a third hogs', async () => {
    const step = await circuitStep('sharing-log', group, { modules: hogging('K1') });
    const texts = step.the('notice').map(({ text }) => text);
    expect(texts).toContain(
      'it could not be shown that the place of K2 is its own: next to nothing is read there without K3 either',
    );
  });

  it('takes a lead that came off for what it is, and not for swapped modules', async () => {
    const change = { measuredBy: 'operator', plugs: { K1: 'K2', K2: 'K2', K3: 'K3' } } as const;
    const step = await circuitStep('sharing-log', { ...group, from: '2 A' }, change);
    expect(step.acts.slice(0, 2)).toEqual(['probe ballast of K1', 'unplug K1']);
    expect(step.error).toMatchObject({ what: 'probes-elsewhere' });
  });

  it.each(['plug in K2', 'unplug K2'])(
    'says who may be unplugged when it is stopped at "%s"',
    async (stopAt) => {
      const step = await circuitStep('sharing-log', group, { stopAt });
      expect(step.error).toMatchObject({ code: 'STOPPED_BY_OPERATOR' });
      expect(step.the('notice').at(-1)?.text).toMatch(/K2 may still be unplugged$/);
      expect(step.the('input').at(-1)).toMatchObject({ state: 'off' });
    },
  );

  it('says where the probes may be when it is stopped in the middle of a pass', async () => {
    const step = await circuitStep('sharing-log', group, {
      measuredBy: 'operator',
      stopAt: 'probe ballast of K2',
    });
    expect(step.the('notice').at(-1)?.text).toMatch(
      /the meter's probes may still be across one module's place$/,
    );
  });
});
