import { describe, expect, it } from 'vitest';
import { analyse } from '../../src/analysis/analyse.js';
import type { JournalEvent } from '../../src/record/journal-event.js';
import { evidenceOf } from './evidence-of.js';

const temperature: JournalEvent = {
  event: 'answer',
  step: 1,
  name: 'case-temperature',
  answer: '48 °C',
  value: 48,
  dimension: 'temperature',
};
const words: JournalEvent = { event: 'answer', step: 1, name: 'fan', answer: 'turns' };

describe('what the operator answered', () => {
  it('is a finding under the name the procedure gave it, with its unit where it has one', () => {
    const findings = analyse(evidenceOf([{ kind: 'operator', more: [temperature] }]));
    expect(findings).toMatchObject([
      {
        name: 'answer-of-case-temperature',
        value: 48,
        dimension: 'temperature',
        note: 'as the operator read it',
        interval: null,
      },
    ]);
  });

  it('is a word where a word was asked for', () => {
    const findings = analyse(evidenceOf([{ kind: 'operator', more: [words] }]));
    expect(findings).toMatchObject([{ name: 'answer-of-fan', value: 'turns', dimension: null, step: 1 }]);
  });

  it('never passes for a measurement, whatever it is called', () => {
    const claim: JournalEvent = { ...temperature, name: 'usable-current', value: 9, dimension: 'current' };
    const findings = analyse(evidenceOf([{ kind: 'operator', more: [claim] }]));
    expect(findings.map(({ name }) => name)).toEqual(['answer-of-usable-current']);
  });

  it('is none where another step asked for an act', () => {
    const cycled: JournalEvent = { event: 'answer', step: 1, name: 'cycle-input', answer: 'done' };
    expect(analyse(evidenceOf([{ kind: 'dropout-search', more: [cycled] }]))).toEqual([]);
  });
});
