import { describe, expect, it } from 'vitest';
import { measured, inWords } from '../../src/analysis/finding.js';
import type { Finding } from '../../src/analysis/finding.js';
import { promised } from '../../src/analysis/promised-errors.js';
import { answer } from '../../src/report/answer.js';
import { aBaseline, droopOf, relationOf } from '../judgement/a-baseline.js';
import { resultOf } from './fixed-record.js';

const amps = (name: string, value: number): Finding =>
  measured(name, 'current', value, [promised('the load', 0.01)], { step: 3 });
const recommended = (value: number): Finding => ({ ...amps('recommended-current', value), interval: null });
const usable: Finding = { ...amps('usable-current', 5.5), note: 'above that it drops out' };

function answerTo(...findings: readonly Finding[]): readonly string[] {
  return answer({ ...resultOf(), findings, decisions: [], outcome: 'not-judged' });
}

describe('the answer', () => {
  it('says where the module leaves regulation before it drops out', () => {
    expect(
      answerTo(
        recommended(4),
        usable,
        amps('limit-onset-current', 5.285),
        amps('dropout-current', 5.526),
        inWords('limit-style', 'constant-power', { step: 3 }),
      ),
    ).toEqual([
      'Load it continuously with up to 4.00 A.',
      'It delivers 5.500 ± 0.020 A; above that it drops out.',
      'It leaves regulation at 5.285 ± 0.020 A and drops out at 5.526 ± 0.020 A (constant-power).',
    ]);
  });

  it('tells nobody to load what a damaged record shows, though its run came to its end', () => {
    const damaged = {
      ...resultOf(),
      findings: [recommended(4), usable],
      decisions: [],
      outcome: 'undecided',
      integrity: { kind: 'damaged', lines: 9, bytes: 99, line: 10, problem: 'there is more after the end' },
    } as const;
    expect(answer(damaged)[0]).toBe(
      'As far as the record can be believed, it could be loaded continuously with up to 4.00 A.',
    );
  });

  it('tells nobody to load what nobody can tell to conform', () => {
    const undecided = {
      ...resultOf(),
      findings: [recommended(4), usable],
      decisions: [],
      outcome: 'undecided',
    } as const;
    expect(answer(undecided)[0]).toBe(
      'If it conforms, which is undecided, it may be loaded continuously with up to 4.00 A.',
    );
  });

  it('keeps quiet about a limit that was not met, and about a style that could not be told', () => {
    expect(answerTo(recommended(4), usable)).toHaveLength(2);
    expect(
      answerTo(
        recommended(4),
        usable,
        amps('dropout-current', 5.5),
        inWords('limit-style', 'undetermined', { step: 3 }),
      )[2],
    ).toBe('It regulates until it drops out at 5.500 ± 0.020 A.');
  });

  it('never rounds a recommendation up, and says so where there is nothing to recommend', () => {
    expect(answerTo(recommended(3.9999), usable)[0]).toBe('Load it continuously with up to 3.99 A.');
    expect(answerTo(recommended(0), usable)[0]).toBe('Do not load it.');
    expect(answerTo(usable)).toEqual([]);
    const warm = measured('usable-current', 'current', 2, [promised('between', 1.2)], {
      step: 2,
      note: 'warm it drops out at 4.00 A, after 19 min; no soak has shown what it holds when warm: soak it at less',
    });
    // Two amperes ± more than two are no delivery.
    expect(answerTo(recommended(0), warm)).toEqual([
      'Do not load it.',
      'Warm it drops out at 4.00 A, after 19 min; no soak has shown what it holds when warm: soak it at less.',
    ]);
  });

  it('begins with what does not conform, so that nobody reads on and misses it', () => {
    const decision = { requirement: '', probability: null, note: '' } as const;
    const decisions = [
      { ...decision, finding: 'droop-resistance', outcome: 'does-not-conform' },
      { ...decision, finding: 'usable-current', outcome: 'conforms' },
      { ...decision, finding: 'droop-resistance', outcome: 'does-not-conform' },
    ] as const;
    const findings = [recommended(4), usable];
    expect(answer({ ...resultOf(), findings, decisions, outcome: 'does-not-conform' }).slice(0, 2)).toEqual([
      'It does not conform: droop-resistance.',
      'By its limits alone it could be loaded continuously with up to 4.00 A.',
    ]);
  });

  it.each([
    ['failed', 2, 1, 'The run failed in step 2 of 3 (load-ramp); what it was still to show is missing.'],
    [
      'stopped',
      2,
      2,
      'The run was stopped after step 2 of 3 (load-ramp); what it was still to show is missing.',
    ],
    ['stopped', 3, 3, 'The run was stopped after step 3 of 3 (load-ramp).'],
    ['stopped', 4, 4, 'The run was stopped after step 4 (load-ramp).'],
  ] as const)('of a run that %s says so before what it came to, and does not tell to load it', (...told) => {
    const [how, step, stepsDone, sentence] = told;
    const result = resultOf();
    const [first] = result.evidence.steps;
    if (first === undefined) throw new Error('no step');
    const steps = [1, 2, 3].map(() => ({ kind: 'load-ramp', summary: '', settings: {} }));
    const evidence = {
      ...result.evidence,
      ended: { event: 'ended', how, reason: 'the meter is silent', status: 69 } as const,
      steps: [{ ...first, step, kind: 'load-ramp' }],
      stepsDone,
    };
    const header = { ...result.header, steps };
    const findings = [recommended(4), usable];
    const broken = { ...result, header, evidence, findings, decisions: [], outcome: 'not-judged' } as const;
    expect(answer(broken).slice(0, 2)).toEqual([
      sentence,
      'As far as the run went, it could be loaded continuously with up to 4.00 A.',
    ]);
    expect(answer({ ...broken, findings: [recommended(0), usable] })[1]).toBe(
      'As far as the run went, do not load it.',
    );
    expect(answer({ ...broken, findings: [] })).toEqual([]);
  });

  it('says how an output stands to earth, of each module where there are several', () => {
    const open: Finding = {
      ...measured('earth-resistance', 'resistance', 1e7, [promised('the meter', 0)], { step: 1 }),
      interval: null,
      bound: 'least',
    };
    expect(answerTo(inWords('earth-relation', 'isolated', { step: 1, note: 'above 1 MΩ' }), open)).toEqual([
      'Its output is isolated from earth (at least 10 MΩ): above 1 MΩ.',
    ]);
    expect(
      answerTo(
        inWords('earth-relation-of-K1', 'bonded', { step: 1 }),
        inWords('earth-relation-of-K2', 'undetermined', { step: 1, note: 'the leads were not proved' }),
      ),
    ).toEqual([
      'The output of K1 is tied to earth.',
      'The output of K2 may or may not be tied to earth, which could not be told: the leads were not proved.',
    ]);
    const alike = ['K1', 'K2', 'K3'].map((name) =>
      inWords(`earth-relation-of-${name}`, 'isolated', { step: 1 }),
    );
    expect(answerTo(...alike)).toEqual(['Each output of K1, K2 and K3 is isolated from earth.']);
  });

  it('leaves it to those who may decide whether a module without its earth link is used', () => {
    const result = resultOf();
    const procedure = { ...result.header.procedure, cautions: ['earth-link-removed'] };
    const findings = [inWords('earth-relation', 'isolated', { step: 1 })];
    const sentences = answer({ ...result, header: { ...result.header, procedure }, findings, decisions: [] });
    expect(sentences.at(-1)).toBe(
      'Its earth was worked on: whether it may be used so is for local codes and a licensed person to decide.',
    );
  });

  it.each([
    [['K2'], 'The earth of K2 was worked on: whether it may be used so is for'],
    [['K1', 'K2'], 'The earths of K1 and K2 were worked on: whether they may be used so is for'],
  ])('says of a group on whose earth something was done: %s', (worked, sentence) => {
    const { header, ...result } = resultOf();
    const changed = (name: string, what: string) => ({
      ...(header.modules[0] as (typeof header.modules)[number]),
      name,
      changes: [{ date: '2026-11-14', what }],
    });
    const modules = ['K1', 'K2', 'K3'].map((name) =>
      changed(name, worked.includes(name) ? 'link from output to earth removed' : 'fan replaced'),
    );
    const procedure = { ...header.procedure, cautions: ['earth-link-removed'] };
    const findings = [inWords('hogging-module', 'none', { step: 1 })];
    const group = { ...header, modules, procedure, circuit: 'parallel' as const };
    expect(answer({ ...result, header: group, findings, decisions: [] }).join(' ')).toContain(sentence);
  });

  it('says what flows into a short circuit and how warm the module gets', () => {
    expect(
      answerTo(
        amps('short-circuit-current', 1.2),
        inWords('limit-style', 'foldback', { step: 3 }),
        measured('temperature-rise', 'temperature-difference', 35, [promised('the thermometer', 0.5)], {
          step: 2,
          note: 'it settles at 58 °C in air of 23 °C, at 4.00 A',
        }),
      ),
    ).toEqual([
      'Into a short circuit it gives 1.200 ± 0.020 A (foldback).',
      'It warms by 35.00 ± 0.98 K: it settles at 58 °C in air of 23 °C, at 4.00 A.',
    ]);
  });

  it('says that warmth was not measured where a soak had no thermometer', () => {
    const drift = measured('thermal-drift', 'voltage-rate', -0.001, [promised('the meter', 0.001)], {
      step: 2,
    });
    expect(answerTo(drift)).toEqual(['How warm it got was not measured: only its voltage was watched.']);
  });

  it('says what moved since the baseline, also where nothing is recommended', () => {
    const result = { ...resultOf(), decisions: [], outcome: 'not-judged' } as const;
    const baseline = aBaseline();
    const findings = [relationOf('isolated'), droopOf(0.036)];
    expect(answer({ ...result, header: { ...result.header, baseline }, findings })).toEqual([
      'Its output is isolated from earth.',
      'Compared with 20261101T080000Z-K1-acceptance: droop-resistance moved from 18.00 mΩ to 36.00 mΩ, by +18.00 ± 0.28 mΩ (+100 %); allowed is 20 %.',
      'earth-relation became isolated, as it must.',
    ]);
  });
});
