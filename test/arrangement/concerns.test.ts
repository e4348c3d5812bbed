import { describe, expect, it } from 'vitest';
import type { Concern } from '../../src/arrangement/build.js';
import { profilesOf } from '../../src/arrangement/profiles.js';
import type { UnderstoodRecord } from '../../src/arrangement/understood-record.js';
import { amperes, limitFindings, lookFindings, madeRecord, word } from './made-record.js';

const today = new Date('2026-12-02T12:00:00Z');
const rise = word('temperature-rise', '35');
const warmed = [...limitFindings(), rise];
const cut = { date: '2026-11-14', what: 'link from output to earth removed' };

function concerns(records: readonly UnderstoodRecord[], on = today): readonly Concern[] {
  const [profile] = profilesOf(records, on).profiles;
  if (profile === undefined) throw new Error('unfit');
  return profile.concerns;
}

function isolation(on: string, relation: string, changes: readonly (typeof cut)[] = []): UnderstoodRecord {
  return madeRecord({
    on,
    procedure: 'isolation',
    modules: [{ name: 'K1', changes: [...changes] }],
    findings: [word('earth-relation', relation)],
    unmet: relation === 'isolated' ? [] : [{ finding: 'earth-relation', requirement: 'is isolated' }],
  });
}

describe('what a builder must know of the records', () => {
  it('is nothing of a fresh and whole one with a known limit and a soak', () => {
    expect(concerns([madeRecord({ findings: warmed })])).toEqual([]);
  });

  it('is what it lacks, and what to do about it', () => {
    const cold = concerns([madeRecord()]);
    expect(cold).toEqual([
      {
        kind: 'not-warmed',
        module: 'K1',
        run: undefined,
        weight: 'weakens',
        text: 'it was measured cold, and limits come down as modules warm: run thermal-soak on it',
      },
    ]);
    const look = concerns([madeRecord({ procedure: 'quick-look', findings: [...lookFindings(), rise] })]);
    expect(look.map(({ kind, text }) => `${kind}: ${text}`)).toEqual([
      'limit-unknown: its quick-look of 2026-11-30 met no limit up to 4.00 A, so where it gives way is not known: run real-limit on it',
      'style-unknown: what it does past its limit is not known: run limit-shape on it',
    ]);
  });

  it('is its age, from a year and a day on', () => {
    const records = [madeRecord({ findings: warmed })];
    expect(concerns(records, new Date('2027-11-30T09:00:00Z'))).toEqual([]);
    expect(concerns(records, new Date('2027-12-01T10:00:00Z'))).toMatchObject([
      {
        kind: 'old',
        weight: 'weakens',
        text: 'its real-limit of 2026-11-30 is more than a year old: run it again',
      },
    ]);
  });

  it.each([
    ['stopped', 'was stopped before its end'],
    ['cut-off', 'breaks off without an end'],
  ] as const)('is that a record that decides was %s', (state, how) => {
    expect(concerns([madeRecord({ findings: warmed, state })])).toMatchObject([
      { kind: 'cut-off', weight: 'hinders', text: expect.stringContaining(how) as string },
    ]);
  });

  it('weighs less where only what it does past its limit comes from such a record', () => {
    const style = madeRecord({
      on: '2026-12-01',
      procedure: 'limit-shape',
      findings: [word('limit-style', 'hiccup')],
      state: 'stopped',
    });
    expect(concerns([madeRecord({ findings: warmed }), style])).toMatchObject([
      { kind: 'cut-off', weight: 'weakens', run: style.run },
    ]);
  });

  it('is a change that a later record tells of: nothing that decides may be from before it', () => {
    const limit = madeRecord({ on: '2026-11-10', findings: warmed });
    expect(concerns([limit, isolation('2026-11-29', 'isolated', [cut])])).toMatchObject([
      {
        kind: 'changed-since',
        run: limit.run,
        weight: 'hinders',
        text: 'it was changed after its real-limit of 2026-11-10 (link from output to earth removed, 2026-11-14): run real-limit again',
      },
    ]);
  });

  it('tells a change of the same day by whether the record knew of it', () => {
    const changes = [{ ...cut, date: '2026-11-30' }];
    const after = isolation('2026-12-01', 'isolated', changes);
    const before = madeRecord({ findings: warmed });
    const knowing = madeRecord({ findings: warmed, modules: [{ name: 'K1', changes }] });
    expect(concerns([before, after]).map(({ kind }) => kind)).toEqual(['changed-since']);
    expect(concerns([knowing, after])).toEqual([]);
  });

  it('is not a change that was made good by measuring again', () => {
    const modules = [{ name: 'K1', changes: [cut] }];
    const records = [
      madeRecord({ on: '2026-11-10', findings: warmed }),
      isolation('2026-11-10', 'bonded'),
      madeRecord({ on: '2026-11-29', findings: warmed, modules }),
      isolation('2026-11-29', 'isolated', [cut]),
    ];
    expect(concerns(records)).toEqual([]);
  });

  it('is what it did not conform to, until it was found again', () => {
    const limit = madeRecord({ findings: warmed });
    expect(concerns([limit, isolation('2026-11-28', 'bonded')])).toMatchObject([
      {
        kind: 'not-accepted',
        weight: 'weakens',
        text: 'it did not conform in its isolation of 2026-11-28 (required: earth-relation is isolated): see that it is good enough for this',
      },
    ]);
    const weak = madeRecord({
      findings: warmed,
      unmet: [{ finding: 'usable-current', requirement: 'at least 6 A' }],
    });
    const accepted = madeRecord({ on: '2026-12-01', procedure: 'acceptance', findings: warmed });
    expect(concerns([weak])).toMatchObject([{ kind: 'not-accepted' }]);
    expect(concerns([weak, accepted])).toEqual([]);
  });

  it('is an earth that is found otherwise than before, with no change in between', () => {
    const limit = madeRecord({ on: '2026-11-29', findings: warmed });
    const [bonded, isolated] = [isolation('2026-11-28', 'bonded'), isolation('2026-12-01', 'isolated')];
    expect(concerns([limit, bonded, isolated])).toMatchObject([
      {
        kind: 'described-otherwise',
        weight: 'hinders',
        run: isolated.run,
        text: expect.stringContaining(
          'its output is isolated by its isolation of 2026-12-01 and bonded by its isolation of 2026-11-28, and no change in between is known',
        ) as string,
      },
    ]);
    // What is refused anyway is not held up by a doubt.
    const then = concerns([limit, isolation('2026-11-28', 'isolated'), isolation('2026-12-01', 'bonded')]);
    expect(then.find(({ kind }) => kind === 'described-otherwise')).toMatchObject({ weight: 'weakens' });
  });

  it('is a newer record that was stopped, or came to nothing, and is not forgotten for an older one', () => {
    const limit = madeRecord({ on: '2026-11-20', findings: warmed });
    const stopped = madeRecord({ on: '2026-12-01', findings: [], state: 'stopped' });
    expect(concerns([limit, stopped])).toMatchObject([
      { kind: 'cut-off', weight: 'hinders', run: stopped.run },
    ]);
    const soak = madeRecord({ on: '2026-12-01', procedure: 'thermal-soak', findings: [], state: 'stopped' });
    expect(concerns([limit, soak])).toMatchObject([{ kind: 'cut-off', weight: 'hinders', run: soak.run }]);
    const nothing = madeRecord({ on: '2026-12-01', findings: [] });
    expect(concerns([limit, nothing])).toMatchObject([
      { kind: 'not-accepted', weight: 'hinders', run: nothing.run },
    ]);
    // Run again, the stopped one is behind it.
    expect(
      concerns([{ ...stopped, header: { ...stopped.header, began: '2026-11-10T09:15:00.000Z' } }, limit]),
    ).toEqual([]);
  });

  it('is a voltage that is far from the label', () => {
    const of = (openCircuit: number) => [madeRecord({ findings: [...limitFindings({ openCircuit }), rise] })];
    expect(concerns(of(13.6))).toEqual([]);
    expect(concerns(of(13.2))).toMatchObject([
      {
        kind: 'not-accepted',
        weight: 'hinders',
        text: 'with no load it gives 13.2 V, and its label says 15 V: it has failed, or it is another module; find out before it is used',
      },
    ]);
    expect(concerns(of(17))).toMatchObject([{ kind: 'not-accepted', weight: 'weakens' }]);
  });

  it('is a limit that is known too coarsely to choose by', () => {
    const wide = { ...amperes('usable-current', 5), interval: [4.7, 5.3] as const };
    const findings = [...warmed.filter(({ name }) => name !== 'usable-current'), wide];
    expect(concerns([madeRecord({ findings })])).toMatchObject([
      {
        kind: 'coarse',
        text: expect.stringContaining('known to ± 300 mA only, more than 5 % of it') as string,
      },
    ]);
    const narrow = { ...wide, interval: [4.8, 5.2] as const };
    expect(concerns([madeRecord({ findings: [...findings.slice(0, -1), narrow] })])).toEqual([]);
  });

  it('is a droop that can not be told from none', () => {
    const findings = [...limitFindings({ droop: 0.0015 }), rise];
    expect(concerns([madeRecord({ findings })])).toMatchObject([
      { kind: 'coarse', text: expect.stringContaining("its droop can't be told from none") as string },
    ]);
  });

  it('is that it was measured on a simulated bench, once however many records say so', () => {
    const simulated = { simulated: true, findings: [...warmed, word('earth-relation', 'isolated')] };
    expect(
      concerns([madeRecord(simulated), madeRecord({ ...simulated, procedure: 'acceptance' })]),
    ).toMatchObject([{ kind: 'simulated', weight: 'weakens' }]);
  });

  it('is that its records describe it in different words', () => {
    const modules = [{ name: 'K1', description: 'the brick from the shed' }];
    expect(
      concerns([
        madeRecord({ findings: warmed }),
        madeRecord({ modules, procedure: 'isolation', findings: [] }),
      ]),
    ).toMatchObject([
      {
        kind: 'described-otherwise',
        text: expect.stringContaining(
          '"15 V brick from a retired label printer" and "the brick from the shed"',
        ) as string,
      },
    ]);
  });

  it('is that its clock was wrong when it was measured, from a day ahead on', () => {
    const ahead = madeRecord({ findings: warmed });
    expect(concerns([ahead], new Date('2026-11-29T12:00:00Z'))).toEqual([]);
    expect(concerns([ahead], new Date('2026-11-28T09:00:00Z'))).toMatchObject([
      {
        kind: 'dated-ahead',
        run: ahead.run,
        weight: 'weakens',
        text: 'its real-limit of 2026-11-30 lies in the future, so a clock was wrong and nobody knows how old it is: set the clocks, and run it again',
      },
    ]);
  });

  it('is that nobody can tell which of two records is the newer one where a clock was wrong', () => {
    const [older, ahead] = ['2026-11-20', '2027-06-01'].map((on) => madeRecord({ on, findings: warmed }));
    if (older === undefined || ahead === undefined) throw new Error('two were made');
    expect(concerns([older, ahead])).toMatchObject([
      { kind: 'dated-ahead', run: ahead.run, weight: 'hinders' },
    ]);
  });

  it.each([
    ['open-circuit-voltage', 'at most 15.75 V'],
    ['temperature-rise', 'at most 30 K'],
    ['answer-of-smell', 'is none'],
  ])('refuses one whose %s is not what its procedure requires', (finding, requirement) => {
    const findings = [...warmed, word('answer-of-smell', 'burnt')];
    expect(concerns([madeRecord({ findings, unmet: [{ finding, requirement }] })])).toMatchObject([
      { kind: 'not-accepted', weight: 'hinders' },
    ]);
  });

  it('refuses an output that leaks to earth and was to be isolated, and leaves one that is bonded to what is built', () => {
    const limit = madeRecord({ findings: warmed });
    expect(concerns([limit, isolation('2026-11-30', 'leaky')])).toMatchObject([
      { kind: 'not-accepted', weight: 'hinders' },
    ]);
    expect(concerns([limit, isolation('2026-11-30', 'bonded')])).toMatchObject([
      { kind: 'not-accepted', weight: 'weakens' },
    ]);
  });

  it('is never longer than a line or two, however much a module file says', () => {
    const modules = [{ name: 'K1', description: 'x'.repeat(1_000_000) }];
    const records = [madeRecord({ modules, findings: warmed })];
    const [profile] = profilesOf(records, today).profiles;
    expect(profile?.description).toMatch(/^x{100,300}… \(shortened; the record has all of it\)$/);
    const both = concerns([...records, madeRecord({ procedure: 'isolation', findings: [] })]);
    expect(both.find(({ kind }) => kind === 'described-otherwise')?.text.length).toBeLessThan(700);
  });
});
