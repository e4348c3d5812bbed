import { PassThrough } from 'node:stream';
import { describe, expect, it } from 'vitest';
import { counted } from '../../../src/cli/progress/counted.js';
import { canRedraw, runProgress } from '../../../src/cli/progress/run-progress.js';
import { RunSoFar } from '../../../src/cli/progress/run-so-far.js';
import { VirtualClock } from '../../../src/clock/virtual-clock.js';
import { plan, pointEnded, stepEnded } from './a-run.js';

async function plain(facts: { readonly isTTY?: boolean; readonly columns?: number } = {}) {
  const stream = Object.assign(new PassThrough({ encoding: 'utf8' }), facts);
  const clock = new VirtualClock(new Date(0));
  const stderr = stream as unknown as NodeJS.WriteStream;
  const run = new RunSoFar(plan, clock, 0);
  const progress = counted(run, await runProgress({ stderr, environment: {} }, run));
  return { progress, clock, text: () => String(stream.read() ?? '') };
}

describe('the progress of a run in a log', () => {
  it('is a line when a step begins and one when it is done, with its time and its points', async () => {
    const { progress, clock, text } = await plain();
    progress.stepBegan(3, 'dropout-search', 'from 4 A up to 8 A');
    progress.progress(3, { voltage: 15.2, current: 0 });
    for (const outcome of ['held', 'interrupted', 'held', 'dropped'] as const) {
      progress.recorded(pointEnded(outcome, 3));
    }
    progress.noticed('the meter was found again');
    await clock.sleep(125);
    progress.recorded(stepEnded(3));
    progress.end();
    expect(text()).toBe(
      'step 3 of 5: dropout-search, from 4 A up to 8 A\n' +
        '  the meter was found again\n' +
        'step 3 of 5 done in 2 min 5 s: 2 points held, 1 not\n',
    );
  });

  it('says nothing of points where a step takes none', async () => {
    const { progress, text } = await plain();
    progress.stepBegan(1, 'wait', 'waits for 5 s');
    progress.recorded(stepEnded(1));
    expect(text()).toMatch(/^step 1 of 5 done in under 1 s\n$/m);
  });

  it('takes nothing of what a record took over for its own', async () => {
    const { progress, text } = await plain();
    progress.recorded({ event: 'step-began', step: 1, kind: 'open-circuit' });
    progress.recorded(stepEnded(1));
    expect(text()).toBe('');
  });

  it('lets nothing of a file steer the terminal', async () => {
    const { progress, text } = await plain();
    progress.stepBegan(1, 'operator', 'asks: \u001b[2J');
    expect(text()).toBe('step 1 of 5: operator, asks: \\u001b[2J\n');
  });
});

describe('lines are taken back', () => {
  const terminal = { isTTY: true, columns: 80, rows: 24 } as const;
  it.each([
    ['on a terminal', terminal, {}, true],
    ['not in a pipe', { columns: 80, rows: 24 }, {}, false],
    ['not on one that can not', terminal, { TERM: 'dumb' }, false],
    ['not where a machine keeps the log', terminal, { CI: 'true' }, false],
    ['on a terminal where that was denied', terminal, { CI: 'false' }, true],
    ['not where nobody knows how large it is', { ...terminal, columns: 0, rows: 0 }, {}, false],
  ])('%s', (_, stream, environment, can) => {
    expect(canRedraw(stream, environment)).toBe(can);
  });
});
