import { appendFileSync, mkdirSync, readFileSync, truncateSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import type { JournalEvent } from '../../src/record/journal-event.js';
import { JournalWriter } from '../../src/record/journal-writer.js';
import { readUnfinished } from '../../src/record/resume.js';
import { copyDoneSteps } from '../../src/record/resume-copy.js';
import { runFolderAt, writeHeader } from '../../src/record/run-folder.js';
import { someHeader } from './some-header.js';
import { opened, readBack, temporaryFolder, writeJournal } from './some-run.js';

const place = temporaryFolder();
let made = 0;

const kinds = ['open-circuit', 'load-ramp', 'dropout-search'] as const;
const header = { ...someHeader, steps: kinds.map((kind) => ({ kind, summary: kind, settings: {} })) };

const carried = (held: number) => ({
  known: { 'rated-current': 4 },
  tried: { held },
  earths: { K1: 'isolated' },
});

/** A step with one reading, and a question. */
function step(number: number): readonly JournalEvent[] {
  return [
    { event: 'step-began', step: number, kind: kinds[number - 1] ?? '' },
    { event: 'prompt', step: number, text: `question ${number}` },
    { event: 'point-began', step: number, point: 1, phase: 'ramp', set: { current: number } },
    { event: 'reading', step: number, point: 1, sample: 1, of: 'load', what: 'current', value: number },
    { event: 'point-ended', step: number, point: 1, outcome: 'held' },
    { event: 'step-ended', step: number, carried: carried(number) },
  ];
}

const stopped: JournalEvent = {
  event: 'ended',
  how: 'stopped',
  reason: 'somebody needs the bench',
  status: 3,
};

/** A record with these events, as a run leaves it. */
function record(events: readonly JournalEvent[]): string {
  const path = place(`20261201T090000Z-K1-rehearsal-${(made += 1)}`);
  mkdirSync(path);
  const sha256 = writeHeader(runFolderAt(path), header);
  writeJournal(join(path, 'journal.jsonl'), [{ ...opened, header: sha256 } as JournalEvent, ...events]);
  return path;
}

function failure(path: string): unknown {
  try {
    readUnfinished(path);
  } catch (error) {
    return error;
  }
  return undefined;
}

describe('of a run that was broken off', () => {
  it('what was done is every step that ended, and what the last of them carries', () => {
    const run = readUnfinished(record([...step(1), ...step(2), ...step(3).slice(0, 4), stopped]));
    expect(run.done).toEqual([
      { step: 1, kind: 'open-circuit', asked: 'question 1' },
      { step: 2, kind: 'load-ramp', asked: 'question 2' },
    ]);
    expect(run.carried).toEqual(carried(2));
    expect(run.ended).toMatchObject({ how: 'stopped', reason: 'somebody needs the bench' });
    // The last event of step 2 is the thirteenth, 0.1 s from event to event.
    expect(run.until).toBe(1.2);
  });

  it('a torn tail counts for nothing', () => {
    const path = record([...step(1), ...step(2)]);
    const journal = join(path, 'journal.jsonl');
    truncateSync(journal, readFileSync(journal).length - 1);
    expect(readUnfinished(path).done).toHaveLength(1);
  });

  it.each([
    [
      'that was completed',
      [...step(1), { ...stopped, how: 'completed' }],
      /the run was completed, there is nothing to continue/,
    ],
    ['with nothing finished', [...step(1).slice(0, 5), stopped], /no step of it was finished/],
    ['with no step begun', [], /no step of it was finished/],
    [
      'made before steps carried anything',
      [...step(1).slice(0, 5), { event: 'step-ended', step: 1 }, stopped],
      /it was made before steps wrote down what later ones rest on/,
    ],
  ] as [string, JournalEvent[], RegExp][])('a record %s is refused', (_what, events, words) => {
    const path = record(events);
    expect(failure(path)).toMatchObject({ code: 'NOT_RESUMABLE', exitCode: 65, run: path });
    expect(String(failure(path))).toMatch(words);
  });

  it('a record that was changed is refused, with the line and what is wrong with it', () => {
    const path = record([...step(1), ...step(2), stopped]);
    const journal = join(path, 'journal.jsonl');
    writeFileSync(journal, readFileSync(journal, 'utf8').replace('"value":1', '"value":2'));
    expect(failure(path)).toMatchObject({
      code: 'NOT_RESUMABLE',
      message: `${path} can't be resumed: line 6 of its journal: the seal does not agree with the lines before it`,
    });
  });

  it('a record whose plan was changed is refused', () => {
    const path = record([...step(1), stopped]);
    appendFileSync(join(path, 'run.json'), '\n');
    expect(String(failure(path))).toMatch(/line 1 of its journal: it does not begin with the run.json/);
  });

  it('what a run went on from is believed of no line that bears no seal', () => {
    const path = record(step(1));
    const resumed = { run: 'another', header: '', began: '2026-11-20T09:00:00.000Z', steps: 1 };
    appendFileSync(
      join(path, 'journal.jsonl'),
      `${JSON.stringify({ t: 1, event: 'resumed', ...resumed })}\n`,
    );
    expect(String(failure(path))).toMatch(/line 8 of its journal: the line is no event/);
  });

  it('the end of a step that bears no seal is no end', () => {
    const path = record([]);
    appendFileSync(
      join(path, 'journal.jsonl'),
      `${JSON.stringify({ t: 1, event: 'step-began', step: 1, kind: 'open-circuit' })}\n` +
        `${JSON.stringify({ t: 2, event: 'step-ended', step: 1, carried: carried(9) })}\n`,
    );
    expect(String(failure(path))).toMatch(/line 3 of its journal: the line is no event/);
  });

  it.each([
    [
      'of another kind than was planned',
      [{ event: 'step-began', step: 1, kind: 'soak' }],
      /step 1 of the journal is none that run.json planned/,
    ],
    ['beyond the plan', [{ event: 'step-began', step: 4, kind: 'soak' }], /step 4 of the journal is none/],
    ['out of turn', [...step(2)], /step 2 of the journal ended out of turn/],
  ] as [string, JournalEvent[], RegExp][])('a step %s is refused', (_what, events, words) => {
    expect(failure(record(events))).toMatchObject({ code: 'BAD_RECORD' });
    expect(String(failure(record(events)))).toMatch(words);
  });
});

describe('a journal that goes on with another', () => {
  it('holds the events of the finished steps with their times, sealed anew, and counts on from there', () => {
    const path = record([
      ...step(1),
      { event: 'notice', text: 'between' },
      ...step(2),
      ...step(3).slice(0, 4),
      stopped,
    ]);
    const earlier = readBack(join(path, 'journal.jsonl')).events;
    const journal = place(`journal-${(made += 1)}.jsonl`);
    let now = 50;
    const writer = new JournalWriter(journal, () => now);
    writer.append(opened);
    now = 60;
    copyDoneSteps(readUnfinished(path), writer);
    now = 60.5;
    writer.append({ event: 'step-began', step: 3, kind: 'dropout-search' });
    writer.append({ event: 'ended', how: 'completed', reason: null, status: 0 });
    writer.close();
    const { events, integrity } = readBack(journal);
    expect(integrity.kind).toBe('whole');
    expect(events[1]).toMatchObject({ t: 0, event: 'resumed', run: path.split('/').at(-1), steps: 2 });
    // Opened, step 1, a notice between, step 2.
    expect(events.slice(2, 14)).toEqual([...earlier.slice(1, 7), ...earlier.slice(8, 14)]);
    expect(events[14]).toMatchObject({ t: (earlier[13]?.t ?? 0) + 0.5, event: 'step-began', step: 3 });
    expect(events).toHaveLength(16);
  });
});
