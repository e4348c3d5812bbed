import { describe, expect, it } from 'vitest';
import { groupBench, type GroupChange, module } from '../bench/group-bench.js';
import { ask, say } from './bench-parts.js';

type Earth = 'bonded' | 'isolated' | number;
const stack = (...earths: readonly Earth[]): GroupChange => ({
  circuit: 'series',
  measuredBy: 'operator',
  modules: earths.map((earth, index) => module(`K${index + 1}`, 12.34, { earth })),
});

/** What the meter reads when a hand has done these acts, one after the other. */
async function after(change: GroupChange, ...acts: readonly string[]) {
  const bench = await groupBench(change);
  for (const act of acts) await bench.simulation.operator.act(act);
  const meter = bench.line('meter');
  return {
    volts: async () => Number(await ask(meter, 'CONF:VOLT;:READ?')),
    ohms: async () => Number(await ask(meter, 'CONF:RES;:READ?')),
  };
}

const open = 9.9e37;

describe('in resistance a meter shows', () => {
  const unplugged = stack('bonded', 2000, 'isolated');

  it('its own leads, held together', async () => {
    const { ohms } = await after(unplugged, 'leads together');
    const first = await ohms();
    expect(first).toBeGreaterThan(0.1);
    expect(first).toBeLessThan(0.3);
    expect(await ohms()).toBe(first);
  });

  it('overload, apart and on the way', async () => {
    expect(await (await after(unplugged, 'leads apart')).ohms()).toBe(open);
  });

  it('overload on an output that is live, and what bleeds it when it is not', async () => {
    expect(await (await after(unplugged)).ohms()).toBe(open);
    expect(await (await after(unplugged, 'unplug', 'probe output of K2')).ohms()).toBeCloseTo(2200, -1);
  });

  it('a bond, a leak and none between earth and 0 V, its leads in it', async () => {
    const at = async (name: string): Promise<number> =>
      (await after(unplugged, 'unplug', `probe earth and 0 V of ${name}`)).ohms();
    const leads = await (await after(unplugged, 'leads together')).ohms();
    expect(await at('K1')).toBeCloseTo(leads + 0.005, 6);
    expect(await at('K2')).toBeCloseTo(leads + 2000, 2);
    expect(await at('K3')).toBe(open);
  });

  it('a ballast without current, its leads in it', async () => {
    const { ohms } = await after({ measuredBy: 'operator' }, 'unplug', 'probe ballast of K2');
    const leads = await (await after({ measuredBy: 'operator' }, 'leads together')).ohms();
    expect(await ohms()).toBeCloseTo(leads + 0.05, 6);
  });

  it('overload with a broken lead, even when both are held together', async () => {
    const broken = { ...unplugged, faults: [{ at: 0, what: 'lead-broken' }] } as const;
    const { ohms, volts } = await after(broken, 'leads together');
    expect(await ohms()).toBe(open);
    expect(Math.abs(await volts())).toBeLessThan(0.02);
  });
});

describe('in voltage a meter shows', () => {
  it('about nothing and never quite the same, its leads apart; nothing, held together', async () => {
    const { volts } = await after(stack('bonded', 'isolated'), 'leads apart');
    const seen = [await volts(), await volts(), await volts()];
    expect(new Set(seen).size).toBe(3);
    for (const value of seen) expect(Math.abs(value)).toBeLessThan(0.02);
    expect(await (await after(stack('bonded', 'isolated'), 'leads together')).volts()).toBe(0);
  });

  it('that the uppermost 0 V of three in series stands at the sum of those below it, above earth', async () => {
    // Common practice: near 24 V for three bricks of 12 V of which the lowest is bonded.
    const { volts, ohms } = await after(stack('bonded', 'isolated', 'isolated'), 'probe earth and 0 V of K3');
    expect(await volts()).toBeCloseTo(2 * 12.34, 1);
    expect(await ohms()).toBe(open);
  });

  it('nothing between earth and a 0 V that nothing ties to it', async () => {
    const { volts } = await after(stack('isolated', 'isolated'), 'probe earth and 0 V of K2');
    expect(Math.abs(await volts())).toBeLessThan(0.02);
  });

  it('no number while two channels of the scanner are closed at once', async () => {
    const bench = await groupBench();
    await say(bench.line('scanner'), 'ROUT:CLOS (@101,102)');
    expect(await ask(bench.line('meter'), 'READ?')).toBe('+9.91E+37');
  });
});
