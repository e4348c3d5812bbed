import { describe, expect, it } from 'vitest';
import { frame } from '../../../src/cli/progress/frame.js';
import { plainStyle } from '../../../src/report/style.js';
import fc from '../../property.js';
import { aRun, plan, pointEnded, stepEnded } from './a-run.js';

const window = { columns: 80, rows: 24, unicode: true, style: plainStyle };

/** In the second step, after 12 s. */
async function inRamp() {
  const { run, clock } = aRun();
  run.stepBegan(1);
  run.recorded(pointEnded('measured'));
  await clock.sleep(5);
  run.recorded(stepEnded(1));
  run.stepBegan(2);
  await clock.sleep(7);
  run.seen({ setCurrent: 1.2, voltage: 15.1884, current: 1.1993 });
  return run;
}

describe('the block that shows a run', () => {
  it('shows the module, the steps, what is read and the time, in 80 columns', async () => {
    expect(frame(await inRamp(), 'the meter was found again after 2.1 s', window)).toEqual([
      'K1 · What one module really delivers                                step 2 of 5',
      '✓ done     1  open-circuit    in 5 s, 1 point',
      '▸ now      2  load-ramp       21 points from 0 A to 100 % of rated-current',
      '  to come  3  dropout-search  about 22 s',
      '  to come  4  limit-trace     about 40 s',
      '  to come  5  recovery-check  about 26 s',
      '',
      '      set to     voltage     current       power',
      '     1.200 A     15.19 V     1.199 A     18.22 W',
      '',
      '  ████░░░░░░░░░░░░░░░░░░░░░░░░░░░░░░░░░░░░  0:12 gone, about 1:41 left',
      'last notice: the meter was found again after 2.1 s',
    ]);
  });

  it('folds the steps on a low and narrow window, and keeps the one under way', async () => {
    expect(frame(await inRamp(), 'found again', { ...window, columns: 40, rows: 10 })).toEqual([
      'K1 · real-limit             step 2 of 5',
      '✓ done     1  open-circuit  in 5 s, 1…',
      '▸ now      2  load-ramp     21 points…',
      '  3 more to come',
      '      set to     voltage     current',
      '     1.200 A     15.19 V     1.199 A',
      '       power',
      '     18.22 W',
      '  █░░░░░░░░  0:12 gone, about 1:41 left',
    ]);
  });

  it('has nothing but ASCII where the locale has no more', async () => {
    const lines = frame(await inRamp(), 'found again', { ...window, columns: 60, unicode: false });
    expect(lines.join('\n')).toMatch(/^[\n -~]+$/);
    expect(lines).toContain('+ done     1  open-circuit    in 5 s, 1 point');
  });

  it('says what a step does at the moment, how warm the module is, and that there was no reading', async () => {
    const run = await inRamp();
    run.seen({ voltage: Number.NaN, current: 2, temperature: 41.23, note: 'soaking for 3 min' });
    const text = frame(run, undefined, window).join('\n');
    expect(text).toMatch(/now +2 {2}load-ramp +soaking for 3 min$/m);
    expect(text).toMatch(/temperature\n +- {2}no reading +2\.000 A {2}no reading +41\.23 °C$/m);
  });

  it('says of a run that goes on with another one what was done there', () => {
    const { run } = aRun(2);
    expect(run.left).toBeCloseTo(86.8);
    run.stepBegan(3);
    expect(frame(run, undefined, window)[2]).toBe('✓ taken over  2  load-ramp       in an earlier run');
  });

  it('fits every window, at every step, with the step under way in it', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 12, max: 200 }),
        fc.integer({ min: 2, max: 60 }),
        fc.integer({ min: 0, max: plan.steps.length }),
        fc.option(fc.string({ maxLength: 300 }), { nil: undefined }),
        fc.boolean(),
        (columns, rows, step, notice, unicode) => {
          const { run } = aRun();
          for (let each = 1; each <= step; each += 1) run.stepBegan(each);
          const lines = frame(run, notice, { columns, rows, unicode, style: plainStyle });
          expect(lines.length).toBeLessThan(rows);
          for (const line of lines) expect(Array.from(line).length).toBeLessThan(columns);
          if (rows > 8 && columns >= 40 && step > 0) {
            expect(lines.join('\n')).toMatch(
              new RegExp(`now +${step}  ${plan.steps[step - 1]?.kind.kind ?? ''}`),
            );
          }
        },
      ),
    );
  });
});
