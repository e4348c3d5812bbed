import { PassThrough } from 'node:stream';
import { describe, expect, it } from 'vitest';
import { loadPlan } from '../../src/cli/load-plan.js';
import { ProgressLine } from '../../src/cli/progress-line.js';
import { VirtualClock } from '../../src/clock/virtual-clock.js';

const { plan } = await loadPlan({
  procedure: 'real-limit',
  bench: 'fixtures/benches/nursery.yaml',
  modules: ['fixtures/modules/K1.yaml'],
});

function lineOn(
  terminal: boolean,
  columns = 120,
): { progress: ProgressLine; clock: VirtualClock; text: () => string } {
  const stream = Object.assign(new PassThrough({ encoding: 'utf8' }), { isTTY: terminal, columns });
  const clock = new VirtualClock(new Date(0));
  return {
    progress: new ProgressLine(stream as unknown as NodeJS.WriteStream, plan, clock),
    clock,
    text: () => String(stream.read() ?? ''),
  };
}

describe('the progress of a run', () => {
  it('is one line that changes in place: step, set-point, readings, time gone and left', async () => {
    const { progress, clock, text } = lineOn(true);
    progress.stepBegan(2, 'load-ramp', '21 points from 0 A to 4 A');
    await clock.sleep(7);
    progress.progress(2, { setCurrent: 1.2, voltage: 15.1884, current: 1.1993 });
    const shown = text();
    expect(shown).toContain('step 2 of 5: load-ramp, 21 points from 0 A to 4 A\n');
    expect(shown).toContain('2/5  set 1.200 A  15.19 V  1.199 A  18.22 W  0:07 gone, about 1:41 left');
    expect(shown.split('\n')).toHaveLength(2);
  });

  it('has room for all of it on a terminal of 80 columns, in milliamperes too', () => {
    const { progress, text } = lineOn(true, 80);
    progress.progress(2, { setCurrent: 0.2, voltage: 15.2, current: 0.204 });
    expect(text()).toMatch(/ 200\.0 mA .* left$/);
  });

  it('leaves on the screen what whoever stands there should know', () => {
    const { progress, text } = lineOn(true);
    progress.stepBegan(2, 'load-ramp', '21 points from 0 A to 4 A');
    progress.noticed('K1 may still be unplugged');
    expect(text()).toMatch(/\n[^\n]* {2}K1 may still be unplugged\n$/);
  });

  it('breaks no word of what it leaves there', () => {
    const { progress, text } = lineOn(true, 40);
    progress.noticed('the meter did not answer; it was found again after 2.1 s');
    expect(text()).toMatch(/ {2}the meter did not answer; it was found\n {2}again after 2\.1 s\n$/);
  });

  it('shows how warm the module is, where that is measured', () => {
    const { progress, text } = lineOn(true);
    progress.progress(2, { voltage: 15, current: 4, temperature: 41.23 });
    expect(text()).toContain('15.00 V  4.000 A  60.00 W  41.23 °C');
  });

  it('never breaks the line of a narrow terminal', async () => {
    const { progress, text } = lineOn(true);
    progress.progress(1, { voltage: 15.2, current: 0, note: 'x'.repeat(300) });
    const drawn = text().split('\u001b[2K').at(-1) ?? '';
    expect(drawn.length).toBeLessThan(120);
    await Promise.resolve();
  });

  it('is a plain line a step where there is no terminal', () => {
    const { progress, text } = lineOn(false);
    progress.stepBegan(1, 'open-circuit', 'reads the idle module for 5 s');
    progress.progress(1, { voltage: 15.2, current: 0 });
    progress.clear();
    expect(text()).toBe('step 1 of 5: open-circuit, reads the idle module for 5 s\n');
  });

  it('says so when an instrument has no reading', () => {
    const { progress, text } = lineOn(true);
    progress.progress(1, { voltage: Number.NaN, current: 0 });
    expect(text()).toContain('no reading');
  });
});
