import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { coverageOf } from '../../../src/analysis/coverage-of.js';
import type { JournalEvent, TimedEvent } from '../../../src/record/journal-event.js';
import type { RunHeader } from '../../../src/record/run-header.js';
import type { Result } from '../../../src/report/result.js';
import { runPage } from '../../../src/report/run-page/run-page.js';
import { understand } from '../../../src/report/understand.js';
import { eventsOf } from '../../analysis/evidence-of.js';
import fc from '../../property.js';
import { header, resultOf, steps } from '../fixed-record.js';

const made = { program: 'railproof test', date: new Date('2026-12-02T18:20:00Z') };
const kept = 'fixtures/runs/20261130T091500Z-K1-real-limit';
const page = (result: Result): string => runPage(result, made);

/** What a page says, tag by tag left out. */
function said(html: string): string {
  return html
    .replace(/<style>[^]*?<\/style>|<head>[^]*?<\/head>/g, '')
    .replace(/<[^>]*>/g, ' ')
    .replace(/&#39;/g, "'")
    .replace(/&lt;/g, '<')
    .replace(/&gt;/g, '>')
    .replace(/&quot;/g, '"')
    .replace(/&amp;/g, '&')
    .replace(/[\s\u00a0]+/g, ' ');
}

/** What stands in large figures, to be read from two steps away. */
function large(html: string): readonly string[] {
  return [...html.matchAll(/<dd class="big">(.*?)<\/dd>/g)].map(([, text = '']) => said(text));
}

/** From one heading to the next. */
function sectionOf(html: string, heading: string): string {
  const start = html.indexOf(`>${heading}</h2>`);
  expect(start, heading).toBeGreaterThan(0);
  const end = html.indexOf('<h2', start);
  return said(html.slice(start + 1, end === -1 ? undefined : end));
}

describe('the report of a record', () => {
  const result = understand(kept);
  const html = page(result);

  it('says what was tested, then the answer, then all that it rests on', () => {
    const text = said(html);
    const inOrder = [
      '15 V brick from a retired label printer; label 15 V, 4 A',
      'Tested 2026-11-30 09:15 UTC, ran to its end after',
      'Conforms Load it continuously with up to 4.00 A.',
      'Decisions',
      'Measured by',
      'What was measured',
      'How the recommendation comes about',
      'Findings',
      'What each finding rests on',
      'How the run went',
      'The bench load',
      'Cautions',
      'The record Folder',
    ].map((piece) => text.indexOf(piece));
    expect(inOrder).not.toContain(-1);
    expect(inOrder).toEqual([...inOrder].sort((a, b) => a - b));
  });

  it('is the same page for the same record', () => {
    expect(page(understand(kept))).toBe(html);
  });

  it('needs no other file: it holds no script, and nothing in it leads away or loads', () => {
    expect(html.match(/<script|<link|<img|<iframe|\ssrc=|url\((?!#)|@import|https?:/g)).toBeNull();
    const ids = [...html.matchAll(/\sid="([^"]*)"/g)].map(([, id]) => id);
    expect(new Set(ids).size).toBe(ids.length);
    for (const [, target] of html.matchAll(/href="#([^"]*)"/g)) expect(ids).toContain(target);
  });

  it('names procedure, program, instruments and files, each with what it is known by', () => {
    const text = said(html);
    for (const { identity, driver, address } of result.header.instruments)
      expect(text).toContain(`${identity} driver ${driver} at ${address}`);
    for (const { path, sha256 } of result.header.files) expect(text).toContain(`${path} ${sha256}`);
    expect(text).toContain(`Tested with ${result.header.program.name} ${result.header.program.version}`);
    expect(sectionOf(html, 'The record')).toContain(result.fingerprints.lastSeal);
    expect(sectionOf(html, 'The record')).toContain(result.fingerprints.header);
    expect(sectionOf(html, 'The record')).toContain('Journal whole, every seal holds');
  });

  it('gives every finding its value, factor and step, and each line of its budget', () => {
    const found = sectionOf(html, 'Findings');
    const rests = sectionOf(html, 'What each finding rests on');
    for (const finding of result.findings) {
      expect(found).toContain(finding.name);
      expect(found).toContain(finding.note);
      const factor = coverageOf(finding)?.factor;
      if (factor !== undefined) expect(rests).toContain(`k = ${factor.toFixed(2)}`);
      for (const { name, kind } of finding.budget) expect(rests).toContain(`${name} ${kind} `);
    }
    expect(found).toContain('droop-resistance 18.14 ± 0.18 mΩ 2.08 2 straight line through 21 points');
    expect(found).toContain('usable-current 5.080 ± 0.018 A 1.96 3 conforms above that its output swings');
  });

  it('adds the shares of a budget up to all of the variance', () => {
    for (const { budget, standardUncertainty } of result.findings) {
      if (budget.length === 0 || standardUncertainty === null) continue;
      const sum = budget.reduce((total, { uncertainty }) => total + uncertainty ** 2, 0);
      expect(sum / standardUncertainty ** 2).toBeCloseTo(1, 9);
    }
    expect(sectionOf(html, 'What each finding rests on')).toMatch(
      /scatter about the line A 85 µΩ 93\.\d % 19 meter voltage, gain B 5\.2 µΩ 0\.\d % ∞/,
    );
  });

  it('tells where in the journal the readings of a step stand', () => {
    const lines = readFileSync(`${kept}/journal.jsonl`, 'utf8').split('\n');
    const rests = sectionOf(html, 'What each finding rests on');
    for (const { step, kind, lines: at, readings } of result.evidence.steps) {
      const first = JSON.parse(lines[at.first - 1] ?? '') as JournalEvent;
      const last = JSON.parse(lines[at.last - 1] ?? '') as JournalEvent;
      expect(first).toMatchObject({ event: 'step-began', step, kind });
      expect(last).toMatchObject({ event: 'step-ended', step });
      const within = lines.slice(at.first - 1, at.last).filter((line) => line.includes('"event":"reading"'));
      expect(within).toHaveLength(readings);
      expect(rests).toContain(
        `Step ${step}, ${kind}: ${result.evidence.steps[step - 1]?.points.length ?? 0} points, ` +
          `${readings} readings; lines ${at.first} to ${at.last} of journal.jsonl`,
      );
    }
  });

  it('says that a simulated bench measured no module, where it is read and where it is signed', () => {
    expect(said(html)).toContain('(simulated: no real module was measured)');
    expect(sectionOf(html, 'Signed')).toContain('a signature here releases no module');
    const real = page({
      ...result,
      header: { ...result.header, bench: { ...result.header.bench, simulated: false } },
    });
    expect(said(real)).not.toContain('simulated:  no');
    expect(sectionOf(real, 'Signed')).not.toContain('releases no');
  });

  it('names who acknowledged each caution, and who decides', () => {
    const cautions = sectionOf(html, 'Cautions');
    expect(cautions).toContain('mains : The module is fed from the mains.');
    expect(cautions).toMatch(/earth-link-removed : .*Acknowledged by/);
    expect(cautions).toContain(
      'Local codes and a licensed person decide what may be joined to the mains and to earth',
    );
    const unseen = page({ ...result, evidence: { ...result.evidence, cautions: [] } });
    expect(sectionOf(unseen, 'Cautions')).toContain('Nobody acknowledged it in this record.');
  });
});

describe('the report of a test that is not whole', () => {
  const whole = eventsOf(steps);
  const broken = (how: 'stopped' | 'failed'): Result =>
    resultOf([
      ...whole.slice(0, -1),
      {
        t: 60,
        event: 'ended',
        how,
        reason: how === 'stopped' ? 'stopped by the operator' : 'the meter fell silent',
        status: 3,
      },
    ]);
  const damage = {
    kind: 'damaged',
    lines: 100,
    bytes: 9,
    line: 101,
    problem: 'there is more after the end',
  } as const;
  const results: readonly (readonly [name: string, result: Result, word: string])[] = [
    ['stopped', broken('stopped'), 'Stopped: this test was not finished'],
    ['failed', broken('failed'), 'Failed: this test was not finished'],
    ['cut off', resultOf(eventsOf(steps, false)), 'Cut off: this test was not finished'],
    ['damaged after its end', { ...resultOf(), integrity: damage }, 'This record is damaged'],
  ];

  it.each(results)('%s says so before the answer, and tells nobody to load the module', (_, result, word) => {
    const html = page(result);
    const text = said(html);
    expect(text.indexOf(word)).toBeGreaterThan(0);
    expect(text.indexOf('Nobody should load or use K1 on the strength of this record.')).toBeGreaterThan(
      text.indexOf(word),
    );
    expect(text.indexOf('As far as it went:')).toBeGreaterThan(text.indexOf('Nobody should load'));
    expect(text).not.toMatch(/load it continuously|load the module continuously/i);
    expect(text).toContain('Recommended, continuously nothing');
    const [recommended, ...others] = large(html);
    expect(recommended).toBe('nothing');
    expect(others.length).toBeGreaterThan(1);
    expect([...new Set(others)]).toEqual([
      result.integrity.kind === 'damaged' ? 'record damaged' : 'not finished',
    ]);
    expect(text).toMatch(
      /Usable (record damaged as far as it can be believed|not finished seen so far): 5\.075 ±/,
    );
    expect(html).not.toContain('id="derating');
    expect(sectionOf(html, 'How the recommendation comes about')).toContain('Nothing is recommended');
    expect(sectionOf(html, 'Signed')).toContain('releases nothing');
  });

  it('names the line that is damaged, and the step that was broken off', () => {
    expect(sectionOf(page({ ...resultOf(), integrity: damage }), 'The record')).toContain(
      'line 101: there is more after the end',
    );
    const cut = page(resultOf(eventsOf(steps).slice(0, 60), { ...header, steps: planned }));
    expect(sectionOf(cut, 'How the run went')).toContain('broken off');
    expect(sectionOf(cut, 'How the run went')).toContain('not begun');
  });

  const planned = steps.map(({ kind }) => ({ kind, summary: `does ${kind}`, settings: {} }));

  it('with nothing in it is a page all the same', () => {
    const text = said(page(resultOf(eventsOf([], false))));
    expect(text).toContain('No findings: the record holds too little.');
    expect(text).toContain('Cut off: this test was not finished');
  });
});

describe('the large figures of a test that came to its end', () => {
  const result = understand(kept);
  const changed = (name: string): Result['findings'] =>
    result.findings.map((finding) => (finding.name === name ? { ...finding, bound: 'least' } : finding));

  it('say up to what it may be loaded', () => {
    expect(large(page(result))).toContain('up to 4.00 A');
  });

  it('say so where it is not decided whether it conforms', () => {
    const html = page({ ...result, outcome: 'undecided' });
    expect(large(html)).toContain('up to 4.00 A, if it conforms');
    expect(said(html)).toContain('if it conforms whether it does is undecided; ');
  });

  it('say so where no limit was met', () => {
    expect(large(page({ ...result, findings: changed('recommended-current') }))).toContain(
      'up to 4.00 A, as far as tried',
    );
    expect(large(page({ ...result, findings: changed('usable-current') }))).toContain(
      'at least 5.080 ± 0.018 A',
    );
  });
});

describe('the report of what does not conform', () => {
  it('recommends nothing in its first figures, and says what the limits alone would allow', () => {
    const result = resultOf();
    expect(result.outcome).toBe('does-not-conform');
    const html = page(result);
    expect(said(html)).toContain('Does not conform');
    expect(said(html)).toContain('Recommended, continuously nothing it does not conform');
    expect(sectionOf(html, 'How the recommendation comes about')).toContain('this is no release');
    expect(sectionOf(html, 'Decisions')).toMatch(/limit-style is constant-current hiccup does not conform/);
    expect(sectionOf(html, 'Decisions')).toMatch(/temperature-rise at most 40 K nothing undecided/);
  });
});

describe('foreign texts', () => {
  /** Text that breaks out of a page where it is not written as text. */
  const hostile = fc
    .string({ minLength: 1, maxLength: 30 })
    .map((text) => `<b id=gone>"'&${text}\u202e\u0007</script>`);

  it('stand in the report as texts, wherever a record holds one', () => {
    fc.assert(
      fc.property(hostile, (text) => {
        const renamed: RunHeader = {
          ...header,
          modules: header.modules.map((module) => ({
            ...module,
            name: text,
            description: text,
            changes: [{ date: text, what: text }],
          })),
          bench: { ...header.bench, name: text },
          procedure: { name: text, title: text, cautions: [text] },
          steps: [{ kind: text, summary: text, settings: {} }],
          instruments: header.instruments.map((each) => ({
            ...each,
            driver: text,
            identity: text,
            address: text,
          })),
          files: [{ kind: text, path: text, sha256: text, text }],
        };
        const events: readonly TimedEvent[] = [
          ...eventsOf(steps).slice(0, -1),
          { t: 70, event: 'notice', text },
          { t: 71, event: 'prompt', step: 3, text },
          { t: 72, event: 'answer', step: 3, name: text, answer: text },
          { t: 73, event: 'ended', how: 'failed', reason: text, status: 69 },
        ];
        const html = page({ ...resultOf(events, renamed), run: text });
        expect(html).not.toContain('<b id=gone');
        expect(html).not.toContain('</script');
        expect(html).not.toContain('\u202e');
        expect(html).not.toContain('\u0007');
        expect(html.split('&lt;b id=gone&gt;').length).toBeGreaterThan(12);
      }),
      { numRuns: 20 },
    );
  });
});
