import {
  appendFileSync,
  closeSync,
  mkdirSync,
  openSync,
  readFileSync,
  truncateSync,
  writeFileSync,
  writeSync,
} from 'node:fs';
import { setFlagsFromString } from 'node:v8';
import { runInNewContext } from 'node:vm';
import { describe, expect, it } from 'vitest';
import { type JournalEvent, mustBeSealed } from '../../src/record/journal-event.js';
import { checkJournal, type Integrity } from '../../src/record/journal-check.js';
import { readJournal } from '../../src/record/journal-reader.js';
import { newSealer, sealLine } from '../../src/record/seal.js';
import fc from '../property.js';
import { opened, readBack, shortRun, temporaryFolder, writeJournal } from './some-run.js';

const place = temporaryFolder();
const good = place('good.jsonl');
const events = writeJournal(good, shortRun);
const bytes = readFileSync(good);
const lines = bytes.toString('utf8').trimEnd().split('\n');

let made = 0;
function journalOf(content: Uint8Array | readonly string[]): string {
  const path = place(`journal-${(made += 1)}.jsonl`);
  writeFileSync(path, content instanceof Uint8Array ? content : content.map((line) => `${line}\n`).join(''));
  return path;
}

/** The number of the first sealed line from this one on. */
const nextSeal = (line: number, text: readonly string[] = lines): number =>
  text.findIndex((one, index) => index + 1 >= line && one.includes('"seal"')) + 1;
/** The number of the last sealed line before this one; 0 when there is none. */
const lastSealBefore = (line: number): number =>
  lines.findLastIndex((one, index) => index + 1 < line && one.includes('"seal"')) + 1;

/** How many of these events stand up to the last that bears a seal. */
const lastSealIn = (read: readonly JournalEvent[]): number =>
  read.findLastIndex(({ event }) => mustBeSealed.has(event)) + 1;

/** What is before the last good seal is still given. */
function expectDamage(path: string, line: number, believed: number): void {
  const { events: read, integrity } = readBack(path);
  expect(integrity).toMatchObject({ kind: 'damaged', line, lines: believed });
  expect(read).toEqual(events.slice(0, believed));
}

const numbers = lines.map((_, index) => index + 1);
const lineAt = (number: number): string => lines[number - 1] ?? '';

describe('a journal that was cut off', () => {
  it('reads to its last whole line, and says so', () => {
    const upTo = lines.slice(0, 8).join('\n').length + 1;
    const path = journalOf(bytes.subarray(0, upTo + 20));
    expect(readBack(path)).toEqual({
      events: events.slice(0, 8),
      integrity: { kind: 'cut-off', lines: 8, bytes: upTo, tornBytes: 20 },
    });
  });

  it('at any byte gives the events up to there and never one that was not written', () => {
    const path = journalOf(bytes);
    for (let cut = bytes.length - 1; cut >= 0; cut -= 1) {
      truncateSync(path, cut);
      const whole = bytes.subarray(0, cut).toString('latin1').split('\n').length - 1;
      const { events: read, integrity } = readBack(path);
      expect(integrity).toMatchObject({ kind: 'cut-off', lines: whole });
      expect(read).toEqual(events.slice(0, whole));
    }
  });

  it('is empty when nothing was written', () => {
    expect(readBack(journalOf([]))).toEqual({
      events: [],
      integrity: { kind: 'cut-off', lines: 0, bytes: 0, tornBytes: 0 },
    });
  });

  it('is not made whole by an end that somebody wrote below it', () => {
    const path = journalOf(lines.slice(0, 13));
    appendFileSync(path, '{"t":9,"event":"ended","how":"completed","reason":null}\n');
    expectDamage(path, 14, 13);
  });
});

describe('a journal that was tampered with is found out at the next seal', () => {
  it('when any line was edited', () => {
    for (const line of numbers) {
      const edited = lines.with(line - 1, lineAt(line).replace('"t":', '"t":1'));
      expectDamage(journalOf(edited), nextSeal(line), lastSealBefore(nextSeal(line)));
    }
  });

  it('when any line was removed', () => {
    for (const line of numbers.slice(0, -1)) {
      const removed = lines.toSpliced(line - 1, 1);
      expectDamage(journalOf(removed), nextSeal(line, removed), lastSealBefore(line));
    }
  });

  it('when two lines that follow each other were swapped', () => {
    for (const line of numbers.slice(0, -2)) {
      const swapped = lines.toSpliced(line - 1, 2, lineAt(line + 1), lineAt(line));
      expectDamage(journalOf(swapped), nextSeal(line, swapped), lastSealBefore(line));
    }
  });

  it('when a line was inserted anywhere before the end', () => {
    for (const line of numbers) {
      const inserted = lines.toSpliced(line - 1, 0, '{"t":0.1,"event":"notice","text":"all is well"}');
      expectDamage(journalOf(inserted), nextSeal(line, inserted), lastSealBefore(line));
    }
  });

  it('when any line was truncated, and at that line', () => {
    for (const line of numbers) {
      const truncated = lines.with(line - 1, lineAt(line).slice(0, -10));
      expectDamage(journalOf(truncated), line, lastSealBefore(line));
    }
  });

  it('something after the end', () => {
    expectDamage(journalOf([...lines, '{"t":9,"event":"notice","text":"one more"}']), 18, 17);
  });

  it('a line without an end that is longer than any event', () => {
    const path = journalOf(lines.slice(0, 13));
    appendFileSync(path, Buffer.alloc(3 << 20, 'x'));
    expectDamage(path, 14, 13);
  });

  it('a line within a good journal that is longer than any event', () => {
    expectDamage(journalOf(lines.toSpliced(13, 0, `{"text":"${'x'.repeat(2 << 20)}"}`)), 14, 13);
  });
});

describe('a journal of any bytes', () => {
  const readable = (integrity: Integrity): boolean =>
    ['whole', 'cut-off', 'damaged'].includes(integrity.kind);

  it('never crashes the reader', () => {
    const anyLine = fc.oneof(
      fc.string({ unit: 'binary' }),
      fc.json(),
      fc.constantFrom(...lines, 'null', '[]', '{}', '{"t":1}', '{"event":"reading","t":1}'),
      fc
        .record({ t: fc.double(), event: fc.constantFrom(...lines.map((line) => line.slice(13, 20))) })
        .map((value) => JSON.stringify(value)),
    );
    const anyContent = fc.oneof(
      fc.uint8Array({ maxLength: 400 }),
      fc.array(anyLine, { maxLength: 12 }).map((some) => Buffer.from(some.join('\n'))),
    );
    fc.assert(
      fc.property(anyContent, (content) => {
        const { integrity } = readBack(journalOf(content));
        expect(readable(integrity)).toBe(true);
      }),
      { numRuns: 300 },
    );
  });

  it('gives events of a run only, whatever bytes of it were changed', () => {
    fc.assert(
      fc.property(
        fc.array(fc.tuple(fc.nat({ max: bytes.length - 1 }), fc.integer({ min: 0, max: 255 })), {
          minLength: 1,
          maxLength: 4,
        }),
        (changes) => {
          const changed = Buffer.from(bytes);
          for (const [at, byte] of changes) changed[at] = byte;
          fc.pre(!changed.equals(bytes));
          const path = journalOf(changed);
          const { events: read, integrity } = readBack(path);
          expect(integrity.kind).not.toBe('whole');
          // With the last line no longer whole nothing seals what stands after the last seal but one.
          const sealed = checkJournal(path).kind === 'cut-off' ? lastSealIn(read) : integrity.lines;
          expect(read.slice(0, sealed)).toEqual(events.slice(0, sealed));
        },
      ),
      { numRuns: 300 },
    );
  });

  it('gives what was written, up to where it was changed, whatever is done to its lines', () => {
    const at = fc.nat({ max: lines.length - 1 });
    const act = fc.oneof(
      at.map((line) => (all: string[]) => all.toSpliced(line, 1)),
      at.map((line) => (all: string[]) => all.toSpliced(line, 0, all[line] ?? '')),
      fc.tuple(at, at).map(
        ([one, other]) =>
          (all: string[]) =>
            all
              .with(one % all.length, all[other % all.length] ?? '')
              .with(other % all.length, all[one % all.length] ?? ''),
      ),
      fc.tuple(at, fc.json()).map(
        ([line, text]) =>
          (all: string[]) =>
            all.toSpliced(line, 0, text),
      ),
      fc.nat({ max: bytes.length }).map((end) => (all: string[]) => all.join('\n').slice(0, end).split('\n')),
    );
    fc.assert(
      fc.property(fc.array(act, { minLength: 1, maxLength: 3 }), (acts) => {
        const changed = acts.reduce((all, change) => (all.length === 0 ? all : change(all)), [...lines]);
        const path = journalOf(Buffer.from(changed.join('\n') + '\n'));
        const checked = checkJournal(path);
        const { events: read, integrity } = readBack(path);
        // What stands after the last seal of a journal that was cut off bears no seal yet.
        const sealed = checked.kind === 'cut-off' ? lastSealIn(read) : read.length;
        expect(read.slice(0, sealed)).toEqual(events.slice(0, sealed));
        if (integrity.kind === 'whole') expect(read).toEqual(events);
        expect(integrity.lines).toBeLessThanOrEqual(checked.lines);
        if (checked.kind === 'damaged') expect(integrity.kind).toBe('damaged');
      }),
      { numRuns: 500 },
    );
  });

  it.each([
    '{"t":1e309,"event":"notice","text":""}',
    '{"t":0.1,"event":"reading","step":1,"point":1,"sample":1,"of":"load","what":"current","value":1e309}',
    '{"t":0.1,"event":"point-began","step":1,"point":1,"phase":"ramp","set":{"current":-1e309}}',
    '{"t":0.1,"event":"recovery","step":1,"outcome":"came-back","after":0,"within":1e309}',
    '{"t":0.1,"event":"step-ended","step":1,"carried":{"known":{"a":1e309},"tried":{},"earths":{}}}',
    '{"t":0.1,"event":"step-ended","step":1,"carried":{"known":{},"tried":{"held":1e309},"earths":{}}}',
  ])('takes no number beyond all numbers: %s', (line) => {
    const first = sealLine(newSealer(), JSON.stringify({ t: 0, ...opened }));
    expect(readBack(journalOf([first, line]))).toMatchObject({
      events: [opened],
      integrity: { kind: 'damaged', line: 2, lines: 1 },
    });
  });

  it('ends at a line with good seals that holds no event of ours', () => {
    for (const strange of [
      '{"t":0.1,"event":"point-began","step":1,"point":1,"phase":"ramp"}',
      '{"t":0.1,"event":"reading","step":1,"point":1,"sample":1,"of":"load","what":"current","value":"2 A"}',
      '{"t":"soon","event":"notice","text":""}',
      '{"t":0.1,"event":"prune","tree":"pear"}',
      '{"t":0.1,"event":"toString"}',
      '{"t":0.1,"event":"opened","format":"railproof/journal 1","wallClock":"again","header":""}',
    ]) {
      const first = sealLine(newSealer(), JSON.stringify({ t: 0, ...opened }));
      const before = newSealer().update(`${first}\n${strange}\n`);
      const last = sealLine(before, '{"t":1,"event":"ended","how":"completed","reason":null,"status":0}');
      const path = journalOf([first, strange, last]);
      expect(checkJournal(path).kind).toBe('whole');
      expect(readBack(path)).toMatchObject({
        events: [opened],
        integrity: { kind: 'damaged', line: 2, lines: 1, problem: 'the line is no event' },
      });
    }
  });

  it('begins with the event that says what it is', () => {
    expectDamage(journalOf(lines.slice(1, 4)), 1, 0);
    const other = lines[0]?.replace('journal 1', 'journal 2') ?? '';
    expectDamage(journalOf([other]), 1, 0);
  });
});

describe('a journal that is not there', () => {
  it('is said to be none, with its path', () => {
    const path = place('no-journal.jsonl');
    expect(() => checkJournal(path)).toThrow(
      expect.objectContaining({
        exitCode: 66,
        message: `${path} is no record: there is no such file or folder`,
      }),
    );
  });

  it('nor is a folder of that name', () => {
    const path = place('folder.jsonl');
    mkdirSync(path);
    expect(() => checkJournal(path)).toThrow(
      expect.objectContaining({ exitCode: 66, message: `${path} is no record: it is a folder` }),
    );
  });
});

describe('a long journal', () => {
  setFlagsFromString('--expose-gc');
  const collect = runInNewContext('gc') as () => void;
  const usedHeap = (): number => {
    collect();
    return process.memoryUsage().heapUsed;
  };

  function longJournal(count: number): string {
    const path = place(`long-${count}.jsonl`);
    const file = openSync(path, 'w');
    const hash = newSealer();
    let batch = `${sealLine(newSealer(), JSON.stringify({ t: 0, ...opened }))}\n`;
    for (let index = 1; index < count; index += 1) {
      const t = index / 100;
      if (index % 30 === 0) {
        hash.update(batch);
        writeSync(file, batch);
        const point = `{"t":${t},"event":"point-ended","step":1,"point":${index / 30},"outcome":"held"}`;
        batch = `${sealLine(hash, point)}\n`;
      } else {
        batch += `{"t":${t},"event":"reading","step":1,"point":1,"sample":${index},"of":"load","what":"current","value":2.0001}\n`;
      }
    }
    writeSync(file, batch);
    closeSync(file);
    return path;
  }

  function timeOf(path: string, count: number): number {
    const began = performance.now();
    let seen = 0;
    const integrity = readJournal(path, checkJournal(path), () => {
      seen += 1;
    });
    expect(seen).toBe(count);
    expect(integrity).toMatchObject({ kind: 'cut-off', lines: count });
    return performance.now() - began;
  }

  it('is read in bounded memory', () => {
    const path = longJournal(300_000);
    const before = usedHeap();
    let highest = 0;
    let seen = 0;
    readJournal(path, checkJournal(path), () => {
      seen += 1;
      if (seen % 100_000 === 0) highest = Math.max(highest, usedHeap());
    });
    expect(seen).toBe(300_000);
    expect(highest - before).toBeLessThan(8e6);
  });

  it('is read in a time that grows as its length', () => {
    const short = longJournal(30_000);
    const shortTime = Math.min(timeOf(short, 30_000), timeOf(short, 30_000), timeOf(short, 30_000));
    // Ten times as long; were each line to cost as much as those before it, this would be a hundred.
    expect(timeOf(place('long-300000.jsonl'), 300_000)).toBeLessThan(35 * shortTime);
  });
});
