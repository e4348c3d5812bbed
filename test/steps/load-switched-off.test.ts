import { describe, expect, it } from 'vitest';
import { exactInstruments } from '../bench/nursery-bench.js';
import { type Stage, stage, type StageChange, type Timed } from './one-step.js';

const exact: StageChange = { simulation: { instruments: exactInstruments }, module: { noise: 0 } };
const toTwice = { ceiling: '200 % of rated-current' };

/** Someone at the load's panel switches its input off at the first event that fits. */
async function switchedOffAt(when: (event: Timed) => boolean, change: StageChange = {}): Promise<Stage> {
  let done = false;
  const bench = await stage({
    ...exact,
    ...change,
    onEvent: (event) => {
      if (done || !when(event)) return;
      done = true;
      bench.simulation.world.setLoad({ input: 'off' }, bench.clock.now());
    },
  });
  return bench;
}

const outcomesOf = ({ the }: Stage): string[] => the('point-ended').map(({ outcome }) => outcome);

describe('a load that was switched off by something else is not taken for a dropout of the module', () => {
  it.each(['before its readings', 'in the middle of its readings', 'after its last reading'])(
    'in a ramp: the point ends %s without an outcome, and the run stops',
    async (_) => {
      const bench = await switchedOffAt((event) => {
        if (_ === 'before its readings') return event.event === 'point-began' && event.point === 3;
        const sample = _ === 'in the middle of its readings' ? 2 : 5;
        return (
          event.event === 'reading' &&
          event.point === 3 &&
          event.sample === sample &&
          event.what === 'current'
        );
      });
      await expect(bench.perform('load-ramp', { to: '4 A', points: 5 })).rejects.toMatchObject({
        code: 'LOAD_SWITCHED_OFF',
        exitCode: 3,
        set: { current: 2 },
        message:
          'the load at simulated:standard-load switched its input off by itself at 2.000 A: ' +
          'its own protection, or someone at its panel',
      });
      expect(outcomesOf(bench)).toEqual(['held', 'held']);
      expect(bench.the('notice')).toEqual([]);
    },
  );

  it('even at a current so small that its flowing can not be told', async () => {
    const bench = await switchedOffAt(({ event }) => event === 'point-began');
    await expect(bench.perform('load-ramp', { to: '40 mA', points: 3 })).rejects.toMatchObject({
      code: 'LOAD_SWITCHED_OFF',
    });
    expect(outcomesOf(bench)).toEqual([]);
  });

  it.each(['start', 'climb', 'halve', 'return'])('in the probe "%s" of a search', async (phase) => {
    const bench = await switchedOffAt((event) => event.event === 'point-began' && event.phase === phase);
    await expect(bench.perform('dropout-search', { ...toTwice, watch: '0 s' })).rejects.toMatchObject({
      code: 'LOAD_SWITCHED_OFF',
    });
    const last = bench.the('point-began').at(-1);
    expect(last?.phase).toBe(phase);
    expect(bench.the('point-ended').map(({ point }) => point)).not.toContain(last?.point);
    expect(bench.known).not.toHaveProperty('dropout-current');
  });

  it('by its own protection, below the limit of the module', async () => {
    const bench = await stage(exact);
    const { world } = bench.simulation;
    world.setLoad({ protection: { current: 4.6 } }, bench.clock.now());
    await expect(bench.perform('dropout-search', toTwice)).rejects.toMatchObject({
      code: 'LOAD_SWITCHED_OFF',
      set: { current: 4.8 },
    });
    expect(outcomesOf(bench)).toEqual(['held', 'held']);
    expect(bench.the('point-began').map(({ phase }) => phase)).not.toContain('overload');
  });

  it('while an overload is watched: what it shows from then on is not of the module', async () => {
    const bench = await switchedOffAt(
      (event) => event.event === 'reading' && event.sample === 4 && isOverload(event, bench),
      { file: 'nursery-constant-current' },
    );
    await expect(bench.perform('dropout-search', toTwice)).rejects.toMatchObject({
      code: 'LOAD_SWITCHED_OFF',
    });
    const overload = bench.the('point-began').at(-1);
    expect(overload?.phase).toBe('overload');
    expect(outcomesOf(bench).at(-1)).toBe('dropped');
    const voltages = bench
      .the('reading')
      .filter(({ of, point }) => of === 'meter' && point === overload?.point)
      .map(({ value }) => value ?? 0);
    // One sample of the idle module at most is among them.
    expect(voltages.filter((volts) => volts > 14).length).toBeLessThanOrEqual(1);
  });
});

describe('a load that lets go as the voltage of the module goes', () => {
  /** It is one of those that switch their input off when their voltage falls. */
  async function withLockout(file: string): Promise<Stage> {
    const bench = await stage({ ...exact, file });
    const { world } = bench.simulation;
    world.onStep((_, after) => {
      if (world.load.input === 'on' && after.moduleVoltage < 1) world.setLoad({ input: 'off' }, after.at);
    });
    return bench;
  }

  it('is noted, and the dropout is the module’s: the ramp ends there', async () => {
    const bench = await withLockout('nursery-latch-off');
    // Nobody is there to cycle the input of the latched module, so the run can't go on after it.
    await expect(bench.perform('load-ramp', { from: '5 A', to: '6 A', points: 3 })).rejects.toMatchObject({
      code: 'MODULE_STAYS_OFF',
    });
    expect(outcomesOf(bench).slice(0, 2)).toEqual(['held', 'dropped']);
    expect(bench.the('notice').map(({ text }) => text)).toEqual([
      "the module's voltage is gone and the load has switched its input off: taken for a dropout of the module",
      'the module did not hold this point; the ramp ends here',
      'the module has latched off and nobody is here to cycle its input',
    ]);
  });

  it('ends no search, which has no overload to watch then', async () => {
    const bench = await withLockout('nursery-latch-off');
    await bench.perform('dropout-search', toTwice);
    expect(outcomesOf(bench)).toContain('dropped');
    expect(bench.the('point-began').map(({ phase }) => phase)).not.toContain('overload');
    expect(bench.the('recovery')).toMatchObject([{ outcome: 'stayed-off' }]);
  });
});

function isOverload({ point }: { readonly point: number }, { the }: Stage): boolean {
  return the('point-began').some((began) => began.point === point && began.phase === 'overload');
}
