import { describe, expect, it } from 'vitest';
import { notBegun, viewedEnd, viewedLeft } from '../../../src/cli/live-view/viewed-end.js';
import type { PlanPerformed } from '../../../src/cli/perform-plan.js';
import { FoundOnError } from '../../../src/bench/found-on.js';
import { loadMayStillBeOn } from '../../../src/bench/make-safe.js';
import { RecordWriteError } from '../../../src/record/record-error.js';
import { runFolderAt } from '../../../src/record/run-folder.js';
import { answer } from '../../../src/report/answer.js';
import { understand } from '../../../src/report/understand.js';
import { OperatorAbsentError, StoppedByOperator } from '../../../src/run/stopped.js';

const path = 'fixtures/runs/20261130T091500Z-K1-real-limit';
const result = understand(path);
const completed: PlanPerformed = {
  ending: { how: 'completed' },
  safety: { kind: 'confirmed' },
  sourceSafety: undefined,
  status: 0,
  folder: runFolderAt(path),
  understood: { kind: 'result', result, unkept: undefined },
};

describe('the end of a run on a page', () => {
  it('is what it came to, the answer first, where the record is, and that the load is off', () => {
    expect(viewedEnd(completed)).toEqual({
      how: 'completed',
      reason: null,
      answer: answer(result),
      outcome: result.outcome,
      safety: [{ what: 'load', confirmed: true, text: 'The load is off; it was read back.' }],
      record: path,
      report: completed.folder.report,
    });
    expect(answer(result)[0]).toMatch(/^Load it continuously/);
  });

  it('is told, as the bench was left, before it is known what it came to', () => {
    const end = viewedEnd(completed);
    const { how, reason, safety, record } = end;
    expect(viewedLeft(completed, completed.folder)).toEqual({ how, reason, safety, record });
  });

  it('names no report where none was written', () => {
    const unkept = new RecordWriteError(completed.folder.report, new Error('no space'));
    const understood = { kind: 'result', result, unkept } as const;
    expect(viewedEnd({ ...completed, understood }).report).toBeNull();
  });

  it('says why it was stopped', () => {
    const error = new StoppedByOperator('stopped in the live view');
    const ending = { how: 'stopped', reason: error.message, error } as const;
    expect(viewedEnd({ ...completed, ending })).toMatchObject({
      how: 'stopped',
      reason: 'stopped in the live view',
    });
  });

  it('says what is to be done by hand where nobody could read back that the load is off', () => {
    const safety = {
      kind: 'unconfirmed',
      why: 'the load does not answer',
      advice: loadMayStillBeOn,
    } as const;
    const [words] = viewedEnd({ ...completed, safety }).safety;
    expect(words).toMatchObject({ what: 'load', confirmed: false });
    expect(words?.text).toContain('THE LOAD MAY STILL BE ON');
    expect(words?.text).toContain('the load does not answer');
  });

  it('is told also where what the record shows can not be', () => {
    const understood = { kind: 'error', error: new Error('the disk is full') } as const;
    expect(viewedEnd({ ...completed, understood })).toMatchObject({
      answer: ['What the record shows could not be told: the disk is full'],
      outcome: 'not-judged',
      safety: [{ confirmed: true }],
    });
  });

  it('of a run that did not begin promises nothing', () => {
    expect(notBegun(new Error('the load does not answer'))).toEqual({
      how: 'failed',
      reason: 'the load does not answer',
      answer: [],
      outcome: 'not-judged',
      safety: [],
      record: '',
      report: null,
    });
  });

  it('of a run that was stopped before it began says so, and of none that it failed', () => {
    expect(notBegun(new StoppedByOperator('stopped with Ctrl-C'))).toMatchObject({
      how: 'stopped',
      reason: 'stopped with Ctrl-C',
    });
  });

  it('of a run that did not begin says what to do next', () => {
    expect(notBegun(new OperatorAbsentError(['its wiring'])).answer).toEqual([
      expect.stringMatching(/^Run it in a terminal/),
    ]);
  });

  it('sends whoever finds the load on to it', () => {
    const found = new FoundOnError('tcp://127.0.0.1:9', new OperatorAbsentError(['its wiring']));
    expect(notBegun(found).safety).toEqual([
      {
        what: 'load',
        confirmed: false,
        text: expect.stringContaining('`railproof safe` switches it off') as string,
      },
    ]);
  });
});
