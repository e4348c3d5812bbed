import { createHash } from 'node:crypto';
import { copyFileSync, mkdirSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { analyse } from '../../src/analysis/analyse.js';
import { EvidenceCollector } from '../../src/analysis/evidence.js';
import { judge, overall } from '../../src/judgement/judge.js';
import type { JournalEvent, TimedEvent } from '../../src/record/journal-event.js';
import { JournalWriter } from '../../src/record/journal-writer.js';
import { resultAsJson } from '../../src/report/json.js';
import { endedHow, type Result } from '../../src/report/result.js';
import { plainStyle } from '../../src/report/style.js';
import { resultAsText } from '../../src/report/text.js';
import { understand } from '../../src/report/understand.js';
import type { ModuleLimit } from '../../src/files/simulation-section.js';
import { randomCase } from '../whole/random-case.js';
import { runQuietly } from '../whole/run-quietly.js';

const limits: readonly ModuleLimit[] = [
  { style: 'hiccup', current: 3.9, period: 0.8 },
  { style: 'constant-power', current: 3.9 },
  { style: 'latch-off', current: 3.9 },
];

describe('a record made on the simulated bench', () => {
  let runs: string;
  const made = new Map<string, Result>();

  beforeAll(async () => {
    runs = mkdtempSync(join(tmpdir(), 'railproof-understand-'));
    for (const limit of limits) {
      const { bench, module, truth } = randomCase(6);
      const { simulation } = bench;
      if (simulation === undefined) throw new Error('the bench is not simulated');
      const limited = { ...truth, limit, unsteadyAbove: 3.6 };
      const onIt = { ...bench, simulation: { ...simulation, modules: [limited] } };
      made.set(
        limit.style,
        await runQuietly('real-limit', onIt, { ...module, rated: { voltage: 12, current: 3 } }, runs),
      );
    }
  });

  afterAll(() => {
    rmSync(runs, { recursive: true, force: true });
  });

  function recordOf(style: string): {
    readonly result: Result;
    readonly path: string;
    readonly lines: readonly string[];
  } {
    const result = made.get(style);
    if (result === undefined) throw new Error(`no record of ${style}`);
    const path = join(runs, result.run);
    return { result, path, lines: readFileSync(join(path, 'journal.jsonl'), 'utf8').trimEnd().split('\n') };
  }

  it.each(limits.map(({ style }) => style))(
    'of a module of the style %s: gives the same findings again',
    (style) => {
      const { result, path, lines } = recordOf(style);
      const again = understand(path);
      const { seal } = JSON.parse(lines.at(-1) ?? '') as { seal: string };
      const header = createHash('sha256')
        .update(readFileSync(join(path, 'run.json')))
        .digest('hex');
      expect(again.fingerprints).toEqual({ header, lastSeal: seal });
      expect(again.findings).toEqual(result.findings);
      expect(again.decisions).toEqual(result.decisions);
      expect(again.integrity.kind).toBe('whole');
      expect(endedHow(again)).toEqual({ how: 'completed', reason: null });
      expect(again.findings.find(({ name }) => name === 'limit-style')?.value).toBe(style);
    },
  );

  it.each(limits.map(({ style }) => style))(
    'of the style %s, cut off at any line: gives what is whole',
    (style) => {
      const { result, lines } = recordOf(style);
      const collector = new EvidenceCollector(result.header);
      const seen: string[] = [];
      for (const [index, line] of lines.entries()) {
        const event = JSON.parse(line) as TimedEvent;
        collector.add(event);
        // A reading of a point that is not finished moves little; a few of them speak for the rest.
        if (event.event === 'reading' && index % 7 !== 0) continue;
        const evidence = collector.result();
        const findings = analyse(evidence);
        const decisions = judge(result.header, findings);
        const integrity = { kind: 'cut-off', lines: index + 1, bytes: 0, tornBytes: 0 } as const;
        const cut: Result = {
          ...result,
          evidence,
          integrity,
          findings,
          decisions,
          outcome: overall(decisions),
        };
        // Nobody knows of a record that is not finished that the module fails.
        if (index < lines.length - 1) expect(cut.outcome, `line ${index + 1}`).not.toBe('does-not-conform');
        seen.push(...findings.map(({ name }) => name));
        if (index % 4 !== 0) continue;
        expect(resultAsText(cut, plainStyle)).not.toMatch(/NaN|undefined|not a number|Infinity|∞/);
        expect(JSON.stringify(resultAsJson(cut))).not.toContain('"value":null');
      }
      expect([...new Set(seen)]).toEqual(expect.arrayContaining(result.findings.map(({ name }) => name)));
    },
  );

  it('cut off in the middle of a line: reads back to its last whole line', () => {
    const { path } = recordOf('hiccup');
    const journal = readFileSync(join(path, 'journal.jsonl'));
    const cutPath = join(runs, 'cut');
    mkdirSync(cutPath);
    copyFileSync(join(path, 'run.json'), join(cutPath, 'run.json'));
    for (let part = 1; part <= 40; part += 1) {
      writeFileSync(
        join(cutPath, 'journal.jsonl'),
        journal.subarray(0, Math.floor((journal.length * part) / 41)),
      );
      const cut = understand(cutPath);
      expect(cut.integrity.kind).toBe('cut-off');
      expect(endedHow(cut)).toEqual({ how: 'cut-off', reason: null });
      expect(resultAsText(cut, plainStyle)).toContain('CUT OFF');
    }
  });

  it('that was stopped never conforms, however good it looks so far', () => {
    const { path, lines } = recordOf('hiccup');
    const stoppedPath = join(runs, 'stopped');
    mkdirSync(stoppedPath);
    copyFileSync(join(path, 'run.json'), join(stoppedPath, 'run.json'));
    const journal = new JournalWriter(join(stoppedPath, 'journal.jsonl'), () => 0);
    for (const line of lines.slice(0, -1)) {
      const fields = Object.entries(JSON.parse(line) as object).filter(
        ([key]) => key !== 'seal' && key !== 't',
      );
      journal.append(Object.fromEntries(fields) as unknown as JournalEvent);
    }
    journal.append({ event: 'ended', how: 'stopped', reason: 'Ctrl-C', status: 3 });
    journal.close();
    const stopped = understand(stoppedPath);
    expect(stopped.integrity.kind).toBe('whole');
    expect(stopped.decisions.map(({ outcome }) => outcome)).toEqual(['conforms']);
    expect(stopped.outcome).toBe('undecided');
  });

  it('with a reading changed afterwards: is called damaged, and believed up to there', () => {
    const { path, lines, result } = recordOf('hiccup');
    const damagedPath = join(runs, 'damaged');
    mkdirSync(damagedPath);
    copyFileSync(join(path, 'run.json'), join(damagedPath, 'run.json'));
    const place = Math.floor(lines.length * 0.6);
    const changed = lines.map((line, index) =>
      index < place ? line : line.replace(/"value":(\d)/, '"value":9$1'),
    );
    writeFileSync(join(damagedPath, 'journal.jsonl'), `${changed.join('\n')}\n`);
    const damaged = understand(damagedPath);
    expect(damaged.integrity.kind).toBe('damaged');
    expect(damaged.evidence.readings).toBeLessThan(result.evidence.readings);
    expect(resultAsText(damaged, plainStyle)).toMatch(/DAMAGED RECORD: line \d+ of the journal/);
  });
});
