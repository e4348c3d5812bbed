import { describe, expect, it } from 'vitest';
import { checkAgainstLoad } from '../../src/bench/meter-against-load.js';
import type { Taken } from '../../src/bench/sample.js';
import { nursery } from './nursery-bench.js';

const seen = (meter: number | undefined, load: number): Taken[] => [
  ...(meter === undefined
    ? []
    : [{ of: 'meter', what: 'voltage', measurement: { kind: 'value', value: meter } } as const]),
  { of: 'load', what: 'voltage', measurement: { kind: 'value', value: load } },
];
const atModule = { voltageFrom: 'meter-at-module' } as const;

/** Whether it is let pass, and how often it was looked at again. */
async function passes(first: Taken[], ...later: Taken[][]): Promise<{ looks: number }> {
  let looks = 0;
  await checkAgainstLoad(atModule, first, () => Promise.resolve(later[looks++] ?? first));
  return { looks };
}

describe('the meter at the module and the load', () => {
  it.each<[string, Taken[]]>([
    ['a module at work', seen(15.1, 14.9)],
    ['a module that is off', seen(0, 0)],
    ['leads that lose a lot', seen(15.1, 9)],
    ['a module that goes while it is read', seen(15.1, 0.4)],
    ['errors of both', seen(15.0, 15.1)],
    ['a little at the load', seen(0, 1.9)],
    ['reversed leads', seen(-15.1, -15)],
    ['a meter that is elsewhere, and known to be', seen(undefined, 15)],
    ['a meter without a value', seen(Number.NaN, 15)],
  ])('are let pass at once: %s', async (_, taken) => {
    await expect(passes(taken)).resolves.toEqual({ looks: 0 });
  });

  it('are let pass where the module was coming back as they were read', async () => {
    await expect(passes(seen(2, 9), seen(13, 15))).resolves.toEqual({ looks: 1 });
    await expect(passes(seen(2, 9), seen(4, 12), seen(9, 15), seen(14.9, 15))).resolves.toEqual({ looks: 3 });
  });

  it('are not where the load has more than the module, time and again', async () => {
    await expect(passes(seen(0.15, 14.9))).rejects.toMatchObject({
      code: 'WRONG_PLACE',
      exitCode: 3,
      what: 'probes-elsewhere',
      message:
        'the meter reads 150.0 mV where the load has 14.90 V at its terminals, which is never more than the module gives',
    });
  });

  it('are not compared where the load is where the voltage is read', async () => {
    const looked = checkAgainstLoad({ voltageFrom: 'load-terminals' }, seen(0, 15), () =>
      Promise.reject(new Error('looked again')),
    );
    await expect(looked).resolves.toBeUndefined();
  });

  it('are compared in every sample: a lead that comes off is no dropout of the module', async () => {
    const { open, clock } = await nursery({ simulation: { faults: [{ at: 10, what: 'lead-broken' }] } });
    const bench = await open();
    await expect(bench.sample(() => undefined)).resolves.toHaveLength(3);
    await clock.sleep(10);
    const taken: Taken[] = [];
    await expect(bench.sample((one) => taken.push(one))).rejects.toMatchObject({ what: 'probes-elsewhere' });
    expect(taken).toHaveLength(3);
  });
});
