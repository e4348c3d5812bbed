import { describe, expect, it } from 'vitest';
import type { JournalEvent } from '../../src/record/journal-event.js';
import { isolationCheck } from '../../src/steps/isolation-check.js';
import { k1 } from './one-step.js';
import { checkIsolation, type IsolationBench } from './isolation-bench.js';

const k2 = { ...k1, name: 'K2' };
const k3 = { ...k1, name: 'K3' };

function phasesOf({ events }: IsolationBench): string[] {
  return events.flatMap((event) => (event.event === 'point-began' ? [event.phase] : []));
}

const inOrder = [
  'unplug',
  'leads together',
  'leads apart',
  'probe earth and 0 V',
  'leads together',
  'leads apart',
  'probe the output',
  'plug in',
];

describe('the check of the isolation', () => {
  it.each([
    [0, 'bonded'],
    [3, 'bonded'],
    [47e3, 'leaky'],
    [12e6, 'isolated'],
    [Infinity, 'isolated'],
    [1e6, 'undetermined'],
  ])('%s Ω from output to earth is %s', async (ohms, relation) => {
    const done = await checkIsolation({ earths: { K1: ohms } });
    expect(done.error).toBeUndefined();
    expect(done.earths.get('K1')).toBe(relation);
    expect(done.acts).toEqual(inOrder);
  });

  it('asks first for the plug, and for the earth only when the leads are proved', async () => {
    const done = await checkIsolation();
    expect(done.asked[0]).toMatch(/^Pull the plug of K1 out of its socket and leave it out\./);
    expect(done.asked[3]).toMatch(/^The plug of K1 is out of the socket.* the earth pin of its plug, /);
    expect(phasesOf(done)).toEqual([
      'discharge',
      'leads-together',
      'leads-apart',
      'discharge',
      'earth',
      'leads-together',
      'leads-apart',
    ]);
  });

  it('journals what was asked for and where the probes were', async () => {
    const { events } = await checkIsolation({ earths: { K1: 47e3 } });
    const of = <Name extends JournalEvent['event']>(name: Name) =>
      events.filter(
        (event): event is Extract<(typeof events)[number], { event: Name }> => event.event === name,
      );
    expect(of('prompt').map(({ act }) => act)).toEqual(inOrder);
    expect(of('answer')).toHaveLength(inOrder.length);
    expect(of('reading').find(({ what }) => what === 'voltage')).not.toHaveProperty('at');
    const places = of('reading').flatMap(({ what, at }) => (what === 'resistance' ? [at] : []));
    expect(new Set(places)).toEqual(new Set(['leads', 'earth-of-K1']));
    expect(of('point-began').find(({ phase }) => phase === 'earth')).toMatchObject({ of: 'K1', set: {} });
  });

  it('records an open circuit as overload and never as a number', async () => {
    const { events } = await checkIsolation();
    const earth = events.filter(
      (event) => event.event === 'reading' && event.at === 'earth-of-K1' && event.what === 'resistance',
    );
    expect(earth).toHaveLength(5);
    expect(
      earth.every(
        (event) => event.event === 'reading' && event.value === null && event.problem === 'overload',
      ),
    ).toBe(true);
  });

  it('keeps the load off, and leaves the meter measuring voltages at its usual place', async () => {
    const { events, told, bench } = await checkIsolation();
    expect(events.filter((event) => event.event === 'input')).toMatchObject([
      { state: 'off', confirmed: true },
    ]);
    expect(told.findLast((message) => message.startsWith('CONF'))).toBe('CONF:VOLT:DC');
    expect(bench.places.movedAt).toBeUndefined();
  });

  it('measures voltages, not resistances, while the probes are brought to earth', async () => {
    const told: string[] = [];
    const done = await checkIsolation({ operator: (act) => told.push(act) });
    const confAt = (act: string): string | undefined => {
      const asked = done.events.findIndex((event) => event.event === 'prompt' && event.act === act);
      const next = done.events.slice(asked).find((event) => event.event === 'reading');
      return next?.event === 'reading' ? next.what : undefined;
    };
    expect(confAt('probe earth and 0 V')).toBe('voltage');
    expect(confAt('leads together')).toBe('resistance');
  });

  it('leaves the module unplugged where it is told to', async () => {
    const done = await checkIsolation({ parameters: { 'plug-in': false } });
    expect(done.acts.at(-1)).toBe('probe the output');
    expect(done.error).toBeUndefined();
  });

  it('waits for the output to discharge', async () => {
    const { events, error } = await checkIsolation({ bleeds: 10 });
    expect(error).toBeUndefined();
    const began = events.find((event) => event.event === 'point-began')?.t ?? 0;
    const ended = events.find((event) => event.event === 'point-ended')?.t ?? 0;
    // From 15.2 V to 1 V in ln(15.2) time constants, less what passed before the first look.
    expect(ended - began).toBeGreaterThan(25);
    expect(ended - began).toBeLessThan(28);
  });
});

describe('a check of the isolation that may not be believed', () => {
  it('ends before the leads are touched while the output is still charged', async () => {
    const done = await checkIsolation({ bleeds: Infinity, parameters: { wait: '20 s' } });
    expect(done.error).toMatchObject({
      code: 'WRONG_PLACE',
      what: 'still-charged',
      exitCode: 3,
      message: '20.0 s after it was unplugged the output of K1 still reads 15.2 V',
    });
    expect(done.acts).toEqual(['unplug']);
  });

  it.each([
    ['together, before', 2, 'lead-open', 'before'],
    ['after the first proof', 4, 'lead-open', 'after'],
    ['after the measurement', 5, 'lead-open', 'after'],
  ])('leads that break %s are never isolation', async (_when, brokenFrom, what, when) => {
    const done = await checkIsolation({ brokenFrom });
    expect(done.error).toMatchObject({ code: 'WRONG_PLACE', what });
    expect((done.error as Error).message).toContain(`held together ${when} the measurement`);
    expect(done.earths.get('K1')).toBe('undetermined');
  });

  it.each([
    [2, 'before'],
    [4, 'after'],
  ])('leads that touch each other from act %s on are never a bond', async (shortedFrom, when) => {
    const done = await checkIsolation({ shortedFrom });
    expect(done.error).toMatchObject({ code: 'WRONG_PLACE', what: 'lead-shorted' });
    expect((done.error as Error).message).toContain(`held apart ${when} the measurement`);
    expect(done.earths.get('K1')).toBe('undetermined');
  });

  it('leads that read too much when held together are not sound', async () => {
    const { error } = await checkIsolation({ leads: 2.4 });
    expect(error).toMatchObject({ what: 'lead-open' });
    expect((error as Error).message).toContain('read 2.40 Ω instead of less than 2.00 Ω');
  });

  it('stops where a voltage is between earth and 0 V, before the ohmmeter is switched on', async () => {
    const { error, events, earths } = await checkIsolation({ between: -48 });
    expect(error).toMatchObject({
      what: 'still-charged',
      message: 'between earth and the 0 V of K1 there are 48.0 V',
    });
    expect(events.some((event) => event.event === 'point-began' && event.phase === 'earth')).toBe(false);
    expect(earths.get('K1')).toBe('undetermined');
  });

  it('notices a meter that stays in another mode', async () => {
    const { error, acts } = await checkIsolation({ stuck: true });
    expect(error).toMatchObject({ what: 'meter-in-wrong-mode' });
    expect((error as Error).message).toContain('told to measure resistance');
    expect(acts).toEqual(['unplug']);
  });

  it('ends when the meter gives no value any more', async () => {
    const { error } = await checkIsolation({ answers: { from: 4, with: '9.91E37' } });
    expect(error).toMatchObject({ code: 'GUARD_TRIPPED', guard: 'no-reading' });
  });

  it.each([2, 4, 5])(
    'puts the meter back and tells that the module is unplugged: broken from act %s',
    async (brokenFrom) => {
      const { told, events } = await checkIsolation({ brokenFrom });
      expect(told.findLast((message) => message.startsWith('CONF'))).toBe('CONF:VOLT:DC');
      expect(events.at(-1)).toMatchObject({
        event: 'notice',
        text: expect.stringContaining('K1 may still be unplugged') as string,
      });
    },
  );

  it('puts the meter back when it is stopped at a question', async () => {
    const stop = new AbortController();
    const done = await checkIsolation({
      signal: stop.signal,
      operator: (act) => {
        if (act === 'leads apart') stop.abort(new Error('stopped with Ctrl-C'));
      },
    });
    expect(done.error).toMatchObject({ message: 'stopped with Ctrl-C' });
    expect(done.told.findLast((message) => message.startsWith('CONF'))).toBe('CONF:VOLT:DC');
  });

  it('tells what failed first when the journal fails', async () => {
    let full = false;
    const done = await checkIsolation({
      onEvent: (event) => {
        full ||= event.event === 'point-began' && event.phase === 'earth';
        if (full) throw new Error('the disk is full');
      },
    });
    expect(done.error).toMatchObject({ message: 'the disk is full' });
  });
});

describe('the isolation of several modules', () => {
  it('takes all plugs out first, and proves the leads between one and the next', async () => {
    const done = await checkIsolation({
      modules: [k1, k2],
      circuit: 'parallel',
      earths: { K1: 0.05, K2: 47e3 },
    });
    expect(done.error).toBeUndefined();
    expect(done.acts).toEqual([
      'unplug',
      'probe output of K1',
      'probe output of K2',
      'leads together',
      'leads apart',
      'probe earth and 0 V of K1',
      'leads together',
      'leads apart',
      'probe earth and 0 V of K2',
      'leads together',
      'leads apart',
      'probe the output',
      'plug in',
    ]);
    expect([...done.earths]).toEqual([
      ['K1', 'bonded'],
      ['K2', 'leaky'],
    ]);
    expect(done.asked[0]).toMatch(/^Pull the plugs of K1 and K2 out of their sockets and leave them out\./);
  });

  it('plugs a stack in again only where every module is isolated', async () => {
    const stack = { modules: [k1, k2, k3], circuit: 'series' } as const;
    const all = await checkIsolation(stack);
    expect(all.error).toBeUndefined();
    expect(all.acts.at(-1)).toBe('plug in');
    const one = await checkIsolation({ ...stack, earths: { K2: 0 } });
    expect(one.error).toMatchObject({ code: 'NOT_ISOLATED', module: 'K2', earth: 'bonded' });
    expect(one.acts).not.toContain('plug in');
    expect(one.acts).not.toContain('probe the output');
  });
});

describe('what may be told to the check of the isolation', () => {
  it('has a default for everything', () => {
    expect(isolationCheck.parameters.parse({})).toEqual({
      bondedBelow: 10,
      isolatedAbove: 1e6,
      openAbove: 10e6,
      leadResistanceBelow: 2,
      dischargedBelow: 1,
      wait: 60,
      dwell: 1,
      readings: 5,
      plugIn: true,
    });
  });

  it.each([
    [{ 'bonded-below': '2 MΩ' }, 'bonded-below'],
    [{ 'open-above': '500 kΩ' }, 'isolated-above'],
    [{ 'lead-resistance-below': '20 Ω' }, 'lead-resistance-below'],
  ])('refuses limits that contradict each other: %j', (given, path) => {
    const parsed = isolationCheck.parameters.safeParse(given);
    expect(parsed.success).toBe(false);
    expect(parsed.error?.issues[0]?.path).toEqual([path]);
  });
});
