import { describe, expect, it } from 'vitest';
import { firstState } from '../../../src/cli/live-view/first-state.js';
import { viewProgress } from '../../../src/cli/live-view/view-progress.js';
import { loadPlan } from '../../../src/cli/load-plan.js';
import { counted } from '../../../src/cli/progress/counted.js';
import { RunSoFar } from '../../../src/cli/progress/run-so-far.js';
import { VirtualClock } from '../../../src/clock/virtual-clock.js';
import type { JournalEvent } from '../../../src/record/journal-event.js';
import type { Told } from '../../../src/view/audience.js';

const loaded = await loadPlan({
  procedure: 'real-limit',
  bench: 'fixtures/benches/nursery.yaml',
  modules: ['fixtures/modules/K1.yaml'],
});

function watched() {
  const clock = new VirtualClock(new Date(0));
  const run = new RunSoFar(loaded.plan, clock, 0);
  const told: Told[] = [];
  const state = firstState(loaded, { began: clock.wall() });
  const progress = counted(run, viewProgress(run, { state, show: (message) => told.push(message) }));
  return { progress, clock, told, run };
}

const begun: JournalEvent = {
  ...{ event: 'point-began', step: 2, point: 1, phase: 'ramp', set: { current: 1.2 } },
};
function read(of: string, what: string, value: number | null, sample = 1): JournalEvent {
  return { event: 'reading', step: 2, point: 1, sample, of, what, value };
}

describe('what a page is told of a run', () => {
  it('is each step with the time that went and what is left', async () => {
    const { progress, clock, told, run } = watched();
    await clock.sleep(7);
    progress.stepBegan(1, 'open-circuit', 'reads the idle module for 3 s');
    expect(told).toEqual([{ kind: 'step', step: 1, elapsed: 7, remaining: run.left }]);
  });

  it('is what is read at the moment, together with what was set', () => {
    const { progress, told } = watched();
    progress.stepBegan(2, 'load-ramp', '21 points');
    progress.progress(2, { setCurrent: 1.2 });
    progress.progress(2, { setCurrent: 1.2, voltage: 15.18, current: 1.199, note: 'settles' });
    expect(told.at(-1)).toMatchObject({
      kind: 'figures',
      figures: { setCurrent: 1.2, voltage: 15.18, current: 1.199, note: 'settles' },
    });
  });

  it('is that there was no reading, where an instrument had none', () => {
    const { progress, told } = watched();
    progress.stepBegan(2, 'load-ramp', '21 points');
    progress.progress(2, { voltage: Number.NaN, current: 2, temperature: Number.NaN });
    expect(told.at(-1)).toMatchObject({ figures: { voltage: null, current: 2, temperature: null } });
  });

  it('is each point when it is over, its readings averaged, with the voltage at the module', async () => {
    const { progress, clock, told } = watched();
    await clock.sleep(9);
    progress.stepBegan(2, 'load-ramp', '21 points');
    progress.recorded(begun);
    for (const [sample, more] of [0, 0.002].entries()) {
      progress.recorded(read('load', 'voltage', 15.1 + more, sample));
      progress.recorded(read('meter', 'voltage', 15.18 + more, sample));
      progress.recorded(read('load', 'current', 1.198 + more, sample));
    }
    await clock.sleep(1);
    progress.recorded({ event: 'point-ended', step: 2, point: 1, outcome: 'held' });
    const last = told.at(-1);
    expect(last).toMatchObject({
      kind: 'point',
      point: { step: 2, phase: 'ramp', set: { current: 1.2 }, t: 9, temperature: null, outcome: 'held' },
    });
    if (last?.kind !== 'point') throw new Error('no point');
    expect(last.point.voltage).toBeCloseTo(15.181, 9);
    expect(last.point.current).toBeCloseTo(1.199, 9);
  });

  it('is of a point at which nothing was read that nothing was', () => {
    const { progress, told } = watched();
    progress.recorded(begun);
    progress.recorded(read('load', 'voltage', null));
    progress.recorded(read('load', 'current', null));
    progress.recorded({ event: 'point-ended', step: 2, point: 1, outcome: 'interrupted' });
    expect(told.at(-1)).toMatchObject({ point: { voltage: null, current: null, outcome: 'interrupted' } });
  });

  it.each([
    ['on', true, 'on'],
    ['off', true, 'off'],
    ['on', false, 'on'],
    ['off', false, 'on'],
  ] as const)('takes a load that is to be %s, read back %s, for %s', (state, confirmed, input) => {
    const { progress, told } = watched();
    progress.recorded({ event: 'input', state, confirmed });
    expect(told).toEqual([{ kind: 'input', input }]);
  });

  it('is who acknowledged a caution, with its text', () => {
    const { progress, told } = watched();
    progress.recorded({ event: 'caution', name: 'mains', by: 'operator' });
    const text = expect.stringContaining('fed from the mains') as string;
    expect(told).toEqual([{ kind: 'caution', caution: { name: 'mains', text, by: 'operator' } }]);
  });

  it('is a notice when it comes, cut where an instrument says more than anybody reads', async () => {
    const { progress, clock, told } = watched();
    await clock.sleep(3);
    progress.noticed('the meter was found again');
    progress.noticed('x'.repeat(100_000));
    expect(told[0]).toEqual({ kind: 'notice', notice: { t: 3, text: 'the meter was found again' } });
    const [, long] = told;
    expect(long?.kind === 'notice' && long.notice.text.length).toBe(1000);
  });

  it('is nothing of each reading', () => {
    const { progress, told } = watched();
    progress.recorded(begun);
    for (let sample = 1; sample <= 1000; sample += 1) {
      progress.recorded(read('load', 'current', 1.2, sample));
    }
    expect(told).toEqual([]);
  });
});
