import { describe, expect, it } from 'vitest';
import { module } from '../bench/group-bench.js';
import { circuitStep } from './circuit-step.js';

const parameters = { to: '3 A', points: 4, dwell: '100 ms', readings: 2 };
const series = { circuit: 'series' } as const;

describe('a stack-check', () => {
  it('proves each place with no load, then climbs, every module’s voltage read at each point', async () => {
    const step = await circuitStep('stack-check', parameters, series);
    expect(step.error).toBeUndefined();
    expect(step.the('point-began').map(({ phase, set, of }) => [phase, set.current, of])).toEqual([
      ['proof', undefined, undefined],
      ['proof', undefined, 'K1'],
      ['proof', undefined, 'K2'],
      ['proof', undefined, 'K3'],
      ['stack', 0, undefined],
      ['stack', 1, undefined],
      ['stack', 2, undefined],
      ['stack', 3, undefined],
    ]);
    const places = step.the('reading').flatMap(({ at }) => at ?? []);
    expect(new Set(places)).toEqual(new Set(['output-of-K1', 'output-of-K2', 'output-of-K3']));
  });

  it.each([
    [new Map([['K1', 'isolated']] as const), 'K2', undefined],
    [
      new Map([
        ['K1', 'isolated'],
        ['K2', 'bonded'],
        ['K3', 'isolated'],
      ] as const),
      'K2',
      'bonded',
    ],
  ])('refuses a module that is tied to earth, or that nobody has looked at', async (earths, name, earth) => {
    const step = await circuitStep('stack-check', parameters, { ...series, earths: new Map(earths) });
    expect(step.error).toMatchObject({ code: 'NOT_ISOLATED', module: name, earth });
    expect(step.the('point-began')).toEqual([]);
  });

  it('looks at the point that was not held on every pass, so that each place shows whose voltage goes', async () => {
    const modules = ['K1', 'K2', 'K3'].map((name) => ({
      ...module(name, 12.3),
      limit: { style: 'constant-current', current: name === 'K2' ? 2.2 : 4 } as const,
    }));
    const step = await circuitStep(
      'stack-check',
      { ...parameters, prove: false },
      { ...series, modules, measuredBy: 'operator' },
    );
    expect(step.error).toBeUndefined();
    const dropped = new Set(
      step
        .the('point-ended')
        .filter(({ outcome }) => outcome === 'dropped')
        .map(({ point }) => point),
    );
    const of = step
      .the('point-began')
      .filter(({ point, phase }) => dropped.has(point) && phase === 'stack')
      .map((one) => one.of);
    expect(of).toEqual(['K1', 'K2', 'K3']);
  });

  it('names modules that stand in each other’s place', async () => {
    const step = await circuitStep('stack-check', parameters, { ...series, named: ['K1', 'K3', 'K2'] });
    expect(step.error).toMatchObject({ code: 'WRONG_PLACE', what: 'modules-swapped' });
  });
});
