import { describe, expect, it } from 'vitest';
import { plainStyle, terminalStyle } from '../../src/report/style.js';
import { resultAsText } from '../../src/report/text.js';
import type { Result } from '../../src/report/result.js';
import { eventsOf } from '../analysis/evidence-of.js';
import { header, resultOf, steps } from './fixed-record.js';

const snapshot = (name: string): string => `./snapshots/${name}.txt`;
const events = eventsOf(steps);

function plain(result: Result): string {
  return resultAsText(result, plainStyle);
}

describe('the report for a terminal', () => {
  it('gives the answer first, then what it rests on', async () => {
    await expect(plain(resultOf())).toMatchFileSnapshot(snapshot('whole'));
  });

  it('says that a record was cut off, and shows what is whole', async () => {
    const cut = events.slice(0, Math.floor(events.length * 0.4));
    await expect(plain(resultOf(cut))).toMatchFileSnapshot(snapshot('cut-off'));
  });

  it('says why a run was stopped', async () => {
    const stopped = [
      ...events.slice(0, Math.floor(events.length * 0.4)),
      {
        t: 20,
        event: 'ended',
        how: 'stopped',
        reason: 'the load reads 61 V and the bench allows 60 V',
        status: 3,
      } as const,
    ];
    await expect(plain(resultOf(stopped))).toMatchFileSnapshot(snapshot('stopped'));
  });

  it('warns where a run ended and nobody could read back that the load went off', () => {
    const lost = { event: 'ended', how: 'failed', reason: 'connection lost', status: 69 } as const;
    const input = (state: 'on' | 'off') => ({ event: 'input', state, confirmed: true }) as const;
    const text = (...last: readonly ('on' | 'off')[]): string =>
      plain(resultOf([...events, ...last.map((state) => ({ t: 20, ...input(state) })), { t: 21, ...lost }]));
    expect(text('on')).toContain('THE LOAD MAY BE ON');
    expect(text('on', 'off')).not.toContain('THE LOAD MAY BE ON');
  });

  it('does not stutter where the person stopped it', () => {
    const ended = { event: 'ended', how: 'stopped', reason: 'stopped with Ctrl-C', status: 3 } as const;
    expect(plain(resultOf([...events, { t: 20, ...ended }]))).toContain('STOPPED: with Ctrl-C');
  });

  it('says so when a record holds too little for any finding', async () => {
    await expect(plain(resultOf(eventsOf([]), { ...header, criteria: [] }))).toMatchFileSnapshot(
      snapshot('empty'),
    );
  });

  it('calls a damaged record damaged, and only that', () => {
    const damaged = {
      kind: 'damaged',
      lines: 12,
      bytes: 0,
      line: 14,
      problem: 'the line is no event',
    } as const;
    const text = plain({ ...resultOf(events.slice(0, 12)), integrity: damaged });
    expect(text).toContain('DAMAGED RECORD: line 14 of the journal: the line is no event.');
    expect(text).not.toContain('CUT OFF');
    expect(text).toContain('journal damaged, 12 lines believed');
  });

  it('aligns its tables and leaves no blanks at the ends of lines', () => {
    const lines = plain(resultOf()).split('\n');
    expect(lines.filter((line) => line !== line.trimEnd())).toEqual([]);
    const findings = lines.filter((line) => line.includes('±') && line.startsWith('  '));
    expect(new Set(findings.map((line) => line.indexOf('±'))).size).toBe(1);
    expect(findings.length).toBeGreaterThan(5);
  });

  it('has no colour in the plain style, and the same words in both', () => {
    const text = plain(resultOf());
    expect(text).not.toContain('\u001b');
    const coloured = resultAsText(resultOf(), terminalStyle);
    expect(coloured).toContain('\u001b[1m');
    // eslint-disable-next-line no-control-regex
    expect(coloured.replace(/\u001b\[[\d;]*m/g, '')).toBe(text);
  });

  it.each([
    [4.0564, '4.05 A'],
    [4.06, '4.06 A'],
    [3.3, '3.30 A'],
    [9.999, '9.99 A'],
    [0.87659, '876 mA'],
    [12.39, '12.3 A'],
  ])('never rounds a recommendation of %d A up: %s', (value, written) => {
    const result = resultOf();
    const findings = result.findings.map((one) =>
      one.name === 'recommended-current' ? { ...one, value } : one,
    );
    expect(plain({ ...result, findings })).toContain(`continuously with up to ${written}.`);
  });

  it('says not to load a module that delivers nothing', () => {
    const result = resultOf();
    const findings = result.findings.map((one) =>
      one.name === 'recommended-current' ? { ...one, value: 0 } : one,
    );
    expect(plain({ ...result, findings })).toContain('Do not load it.');
  });

  it.each([
    [0.99999, 'conformance probability above 99.9 %'],
    [0.912, 'conformance probability 91.2 %'],
    [0.0000001, 'conformance probability below 0.1 %'],
  ])('writes a probability of %d as a person may believe it', (probability, words) => {
    const decision = {
      finding: 'usable-current',
      requirement: 'at least 4 A',
      outcome: 'undecided',
      note: '',
    } as const;
    expect(plain({ ...resultOf(), decisions: [{ ...decision, probability }] })).toContain(words);
  });
});

// Source: JCGM 100:2008, 7.2.6: uncertainties to at most two significant digits, the value to the same place.
describe('a value and its uncertainty', () => {
  it('share one unit and one decimal place, the uncertainty having two significant digits', () => {
    const rows = plain(resultOf())
      .split('\n')
      .flatMap((line) => [...line.matchAll(/^ {2}\S+ +([-\d.]+) {2}± +([\d.]+) {2}(\S+)/g)]);
    expect(rows.length).toBeGreaterThan(5);
    for (const [, value = '', uncertainty = ''] of rows) {
      expect(decimals(value), value).toBe(decimals(uncertainty));
      // The noughts that end a whole number hold its place; they are not significant.
      const digits = uncertainty.includes('.') ? uncertainty : uncertainty.replace(/(?<=\d\d)0+$/, '');
      expect(digits.replace('.', '').replace(/^0+/, ''), uncertainty).toHaveLength(2);
    }
  });
});

function decimals(number: string): number {
  return number.includes('.') ? number.length - number.indexOf('.') - 1 : 0;
}

describe('a hostile record', () => {
  const nasty = 'x\u001b[2J\u001b]0;owned\u0007\u009b31m\r\n  conforms\u202e\u200b\u2028y';
  const [module] = header.modules;
  const hostile = (): Result => {
    if (module === undefined) throw new Error('no module');
    const result = resultOf(
      eventsOf([
        ...steps,
        { kind: 'operator', more: [{ event: 'answer', step: 4, name: nasty, answer: nasty }] },
      ]).map((event) => (event.event === 'ended' ? { ...event, how: 'stopped', reason: nasty } : event)),
      {
        ...header,
        began: nasty,
        modules: [{ ...module, name: nasty, description: nasty }],
        bench: { ...header.bench, name: nasty },
        procedure: { name: nasty, title: nasty, cautions: [nasty] },
        instruments: header.instruments.map((instrument) => ({
          ...instrument,
          identity: nasty,
          address: nasty,
          driver: nasty,
        })),
        criteria: [{ finding: 'limit-style', requirement: { kind: 'is', word: nasty } }],
      },
    );
    return { ...result, run: nasty };
  };

  it('does not steer the terminal, hide text or begin lines of its own', () => {
    const text = plain(hostile());
    expect(text).not.toMatch(/[^\P{Cc}\n]|[\p{Cf}\p{Cs}\u2028\u2029]/u);
    expect(text).toContain('x\\u001b[2J');
    expect(text.split('\n').filter((line) => /^ {2}conforms$/.test(line.replace(/\\u.*/, '')))).toEqual([]);
  });

  it('does not do so in colour either: only our own styles are there', () => {
    const coloured = resultAsText(hostile(), terminalStyle);
    // eslint-disable-next-line no-control-regex
    expect(coloured.replace(/\u001b\[(?:0|1|2|22|1;33)m/g, '')).not.toContain('\u001b');
  });
});
