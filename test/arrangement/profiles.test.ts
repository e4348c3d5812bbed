import { describe, expect, it } from 'vitest';
import { UnfitRecordsError, UnfitWishError } from '../../src/arrangement/arrangement-error.js';
import type { ModuleProfile } from '../../src/arrangement/module-profile.js';
import { alikeOnly, profilesOf, requireAll } from '../../src/arrangement/profiles.js';
import type { UnderstoodRecord } from '../../src/arrangement/understood-record.js';
import { amperes, limitFindings, lookFindings, madeRecord, recommendedOf, word } from './made-record.js';

const today = new Date('2026-12-02T12:00:00Z');
const K2 = [{ name: 'K2' }];

function profileOf(...records: readonly UnderstoodRecord[]): ModuleProfile {
  const { profiles, unfit } = profilesOf(records, today);
  const [only] = profiles;
  if (only === undefined || profiles.length > 1) {
    throw new Error(`${profiles.length} profiles; ${unfit.map(({ why }) => why).join()}`);
  }
  return only;
}

function whyNot(...records: readonly UnderstoodRecord[]): string {
  const { profiles, unfit } = profilesOf(records, today);
  expect(profiles).toEqual([]);
  return unfit.map(({ module, why, advice }) => `${module}: ${why}. ${advice}`).join('\n');
}

describe('what the records of a module come to', () => {
  it('takes each number, with its interval, its budget and where it came from', () => {
    const record = madeRecord();
    const profile = profileOf(record);
    expect(profile).toMatchObject({
      name: 'K1',
      label: { voltage: 15, current: 4 },
      protectionClass: 'I',
      outputIsolation: 'unknown',
      openCircuit: { value: 15.21, from: { run: record.run, procedure: 'real-limit', state: 'whole' } },
      droop: { value: 0.018 },
      usable: { value: 5.1 },
      dropout: { value: 5.1 },
      limitStyle: { word: 'hiccup' },
      recommended: { current: 4, why: 'the nameplate sets it; measured cold' },
    });
    expect(profile.earth).toBeUndefined();
    expect(profile.shortCircuit).toBeUndefined();
    const [low, high] = profile.openCircuit.interval;
    expect(low).toBeLessThan(15.2);
    expect(high).toBeGreaterThan(15.22);
    expect(profile.openCircuit.budget.map(({ name }) => name)).toEqual([
      'scatter',
      'meter voltage, gain',
      'meter voltage, offset',
      'meter voltage, resolution',
    ]);
  });

  it('keeps the order in which the modules were named, whenever they were measured', () => {
    const records = [
      madeRecord({ modules: K2, on: '2026-12-01' }),
      madeRecord({ on: '2026-11-20' }),
      madeRecord({ modules: K2, on: '2026-11-10', procedure: 'isolation', findings: [] }),
    ];
    expect(profilesOf(records, today).profiles.map(({ name }) => name)).toEqual(['K2', 'K1']);
  });

  it('takes the newest of a procedure, in whatever order they were given', () => {
    const records = [
      madeRecord({ on: '2026-11-30', findings: limitFindings({ openCircuit: 15.3, usable: 5 }) }),
      madeRecord({ on: '2026-11-10' }),
    ];
    for (const given of [records, records.toReversed()]) {
      expect(profileOf(...given)).toMatchObject({ openCircuit: { value: 15.3 }, usable: { value: 5 } });
    }
  });

  it('is not made to forget a limit by a later look that tried no further than the label', () => {
    const profile = profileOf(
      madeRecord({ on: '2026-11-20' }),
      madeRecord({ on: '2026-11-30', procedure: 'quick-look', findings: lookFindings() }),
    );
    expect(profile.usable).toMatchObject({ value: 5.1, from: { procedure: 'real-limit' } });
    expect(profile.usable.bound).toBeUndefined();
    expect(profile.recommended.current).toBe(4);
  });

  it('uses no more of it than it holds when warm, where a soak found less than the cold limit', () => {
    const soak = madeRecord({
      on: '2026-11-10',
      procedure: 'thermal-soak',
      findings: [amperes('usable-current', 4.4), recommendedOf(3.5, 'the measured limit sets it'), rise],
    });
    const profile = profileOf(soak, madeRecord());
    expect(profile.droop.from.procedure).toBe('real-limit');
    expect(profile.usable).toMatchObject({ value: 4.4, from: { procedure: 'thermal-soak' } });
    expect(profile.recommended).toMatchObject({ current: 3.5, why: 'the measured limit sets it' });
    expect(kinds(profile)).not.toContain('not-warmed');
  });

  it('recommends no more of it than it is known to hold, whatever an older record recommended', () => {
    const soak = madeRecord({
      on: '2026-12-01',
      procedure: 'thermal-soak',
      findings: [amperes('usable-current', 3.5)],
    });
    const { usable, recommended } = profileOf(madeRecord(), soak);
    expect(recommended).toEqual({
      current: usable.interval[0],
      why: 'no more is known to be usable',
      from: usable.from,
    });
    expect(recommended.current).toBeLessThan(3.5);
  });

  it('takes a droop that came out below nothing as nothing', () => {
    const { droop } = profileOf(madeRecord({ findings: limitFindings({ droop: -0.0005 }) }));
    expect(droop.value).toBe(0);
    expect(droop.interval[0]).toBe(0);
    expect(droop.interval[1]).toBeGreaterThan(0);
  });

  it('knows no limit style where none could be told, and one of another procedure that could', () => {
    const untold = madeRecord({
      findings: [
        ...limitFindings().filter(({ name }) => name !== 'limit-style'),
        word('limit-style', 'undetermined'),
      ],
    });
    expect(profileOf(untold).limitStyle).toBeUndefined();
    expect(kinds(profileOf(untold))).toContain('style-unknown');
    const shape = madeRecord({
      on: '2026-11-10',
      procedure: 'limit-shape',
      findings: [word('limit-style', 'foldback')],
    });
    expect(profileOf(shape, untold).limitStyle).toMatchObject({ word: 'foldback' });
  });

  it('believes the newest of how an output stands to earth, also where that could not tell', () => {
    const isolation = (on: string, relation: string): UnderstoodRecord =>
      madeRecord({ on, procedure: 'isolation', findings: [word('earth-relation', relation)] });
    const limit = madeRecord();
    expect(
      profileOf(limit, isolation('2026-11-29', 'isolated'), isolation('2026-11-10', 'bonded')).earth,
    ).toMatchObject({
      relation: 'isolated',
    });
    expect(
      profileOf(limit, isolation('2026-11-10', 'isolated'), isolation('2026-11-29', 'undetermined')).earth,
    ).toMatchObject({
      relation: 'undetermined',
    });
  });

  it('takes from the record of a stack how each module stands to earth, and nothing else', () => {
    const stack = madeRecord({
      on: '2026-12-01',
      circuit: 'series',
      procedure: 'stacking',
      modules: [{ name: 'K1' }, { name: 'K2' }, { name: 'K3' }],
      findings: [
        word('earth-relation-of-K1', 'isolated'),
        word('earth-relation-of-K2', 'bonded'),
        word('earth-relation-of-K3', 'isolated'),
        amperes('usable-current', 2),
        amperes('dropout-current', 2),
      ],
    });
    const { profiles, unfit } = profilesOf([stack, madeRecord(), madeRecord({ modules: K2 })], today);
    expect(
      profiles.map(({ name, earth, usable, dropout }) => [
        name,
        earth?.relation,
        usable.value,
        dropout?.value,
      ]),
    ).toEqual([
      ['K1', 'isolated', 5.1, 5.1],
      ['K2', 'bonded', 5.1, 5.1],
    ]);
    expect(unfit).toEqual([]);
  });

  it('counts a record that was given twice once', () => {
    expect(profileOf(madeRecord(), madeRecord())).toEqual(profileOf(madeRecord()));
  });
});

describe('modules that nothing can be built on', () => {
  it('are those whose records lack what is needed, with the procedure that finds it', () => {
    const isolation = madeRecord({ procedure: 'isolation', findings: [word('earth-relation', 'isolated')] });
    expect(whyNot(isolation)).toBe(
      'K1: its records (isolation) hold no open-circuit-voltage, droop-resistance and usable-current. run real-limit on it',
    );
  });

  it('are those that give nothing, have their poles the wrong way round, or failed', () => {
    expect(whyNot(madeRecord({ findings: limitFindings({ usable: 0 }) }))).toContain(
      'no current of it is usable',
    );
    expect(whyNot(madeRecord({ findings: limitFindings({ openCircuit: -15.2 }) }))).toContain(
      '-15.2 V with no load',
    );
    const failed = [
      ...limitFindings().slice(2),
      amperes('usable-current', 5),
      recommendedOf(0, 'its failure sets it'),
    ];
    expect(whyNot(madeRecord({ findings: failed }))).toMatch(
      /K1-real-limit recommends no current at all: its failure sets it.*find out why before it is used/,
    );
  });

  it.each([
    ['a recommendation in words', 'recommended-current', { value: 'none' }],
    ['a recommendation that is no number', 'recommended-current', { value: Number.NaN }],
    ['a voltage that is no number', 'open-circuit-voltage', { value: Number.NaN }],
    ['a voltage between no numbers', 'open-circuit-voltage', { interval: [Number.NaN, Number.NaN] }],
    ['an endless droop', 'droop-resistance', { value: Number.POSITIVE_INFINITY }],
    ['limits the wrong way round', 'usable-current', { interval: [6, 5] }],
  ] as const)('are those with %s', (_, name, changed) => {
    const findings = limitFindings().map((one) => (one.name === name ? { ...one, ...changed } : one));
    expect(whyNot(madeRecord({ findings }))).toMatch(/^K1: /);
  });

  it('are those of a damaged record, also beside a good one', () => {
    const why = whyNot(madeRecord({ on: '2026-11-10', state: 'damaged' }), madeRecord());
    expect(why).toContain('20261110T091500Z-K1-real-limit is damaged');
    expect(why).toContain('leave it out');
  });

  it('are two that go by one name', () => {
    const other = [{ name: 'K1', rated: { voltage: 12, current: 2.5 } }];
    const why = whyNot(madeRecord(), madeRecord({ modules: other, procedure: 'isolation', findings: [] }));
    expect(why).toContain('15 V 4 A, class I, input mains; 12 V 2.5 A, class I, input mains');
    expect(why).toContain('a name of its own');
  });

  it('are groups that were measured together', () => {
    const group = madeRecord({
      circuit: 'parallel',
      procedure: 'sharing',
      modules: [{ name: 'K1' }, { name: 'K2' }],
    });
    expect(whyNot(group)).toBe(
      `K1+K2: ${group.run} is of the group K1+K2; records of one module each are needed. ` +
        'run real-limit on each module alone, and give those records',
    );
    // Beside others too: whoever gave it expects something of it.
    expect(() => requireAll(profilesOf([madeRecord(), group], today))).toThrow(/is of the group K1\+K2/);
  });
});

describe('modules for one build', () => {
  it('are all of them where all are fit and alike', () => {
    const found = profilesOf([madeRecord(), madeRecord({ modules: K2 })], today);
    expect(requireAll(found)).toBe(found.profiles);
    expect(alikeOnly(found)).toEqual(found);
  });

  it('are refused where there are no records', () => {
    expect(() => requireAll(profilesOf([], today))).toThrow(UnfitWishError);
  });

  it('are refused with every module that is in the way, and each advice once', () => {
    const bare = (name: string): UnderstoodRecord =>
      madeRecord({ modules: [{ name }], procedure: 'isolation', findings: [] });
    const refused = (): unknown =>
      requireAll(profilesOf([bare('K1'), madeRecord({ modules: K2 }), bare('K3')], today));
    expect(refused).toThrow(UnfitRecordsError);
    expect(refused).toThrow(/^K1: its records .*\nK3: its records /);
    try {
      refused();
    } catch (error) {
      expect((error as UnfitRecordsError).advice).toBe('run real-limit on it');
    }
  });

  const look = { procedure: 'quick-look', findings: lookFindings() } as const;

  it('are refused, or left out, where they were measured by different procedures', () => {
    const found = profilesOf(
      [madeRecord({ ...look }), madeRecord({ modules: K2 }), madeRecord({ modules: [{ name: 'K3' }] })],
      today,
    );
    const why = "it was measured by quick-look, K2 and K3 by real-limit: their numbers don't compare";
    expect(() => requireAll(found)).toThrow(`K1: ${why}`);
    const alike = alikeOnly(found);
    expect(alike.profiles.map(({ name }) => name)).toEqual(['K2', 'K3']);
    expect(alike.unfit).toEqual([
      { module: 'K1', why, advice: 'run the same procedure on all of them: real-limit on K1, for one' },
    ]);
  });

  it('of one by each, the one whose limit is known stands', () => {
    const found = profilesOf([madeRecord({ ...look }), madeRecord({ modules: K2 })], today);
    expect(alikeOnly(found).profiles.map(({ name }) => name)).toEqual(['K2']);
  });

  it('are taken by the procedure that they have in common, where they have one', () => {
    const acceptance = madeRecord({ on: '2026-12-01', procedure: 'acceptance' });
    const found = profilesOf([madeRecord(), acceptance, madeRecord({ modules: K2 })], today);
    expect(requireAll(found).map(({ droop }) => droop.from.procedure)).toEqual(['real-limit', 'real-limit']);
  });
});

const rise = word('temperature-rise', '35');

function kinds({ concerns }: ModuleProfile): readonly string[] {
  return concerns.map(({ kind }) => kind);
}
