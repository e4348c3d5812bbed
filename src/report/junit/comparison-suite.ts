import {
  allowedInWords,
  changeInWords,
  requirementInWords,
  valueInWords,
} from '../../judgement/change-in-words.js';
import { changesMissed, type Compared } from '../../judgement/compare.js';
import { type ComparedRecords, outcomeOf } from '../comparison.js';
import { normalizedErrorInWords } from '../normalized-error.js';
import { modulesInWords } from '../record-heading.js';
import { probabilityInWords } from '../record-words.js';
import type { Result } from '../result.js';
import { propertiesOf, troubles } from './run-suite.js';
import type { Came, Case, Suite } from './suite.js';

/**
 * Two records compared as a suite: a case for each finding of which the tolerance asks something. What changed and
 * must not is a failure of the type `does-not-conform`, what can't be told one of the type `undecided`; what is in
 * neither record is skipped, unless it was to become something. A record of the two that is not whole is an error.
 */
export function comparisonSuite(records: ComparedRecords): Suite {
  const { before, after, tolerance, comparison } = records;
  const group = `${modulesInWords(after.header)}.${tolerance.name}`;
  const judged = comparison.findings.flatMap((compared): Case[] => {
    const { finding, expected, outcome } = compared;
    if (outcome === 'not-judged' || expected === undefined) return [];
    const name = `${finding} ${requirementInWords(expected, compared)}`;
    return [{ name, group, came: cameOf(compared, outcome) }];
  });
  const missed = changesMissed(comparison.inNeither);
  const absent = comparison.inNeither.map(({ finding }): Case => {
    const change = missed.find((one) => one.finding === finding);
    return change === undefined
      ? { name: finding, group, came: { kind: 'skipped', text: inNeither } }
      : {
          name: `${finding} becomes ${change.word}`,
          group,
          came: { kind: 'failure', type: 'undecided', message: inNeither },
        };
  });
  return {
    name: `${before.run} and ${after.run}`,
    began: after.header.began,
    lasted: after.evidence.lasted,
    properties: [
      ['tolerance', tolerance.name],
      ['same-modules', String(comparison.sameModules)],
      ['outcome', outcomeOf(records)],
      ...sideOf('before', before),
      ...sideOf('after', after),
    ],
    cases: [
      ...broken('earlier record', before, group),
      ...broken('later record', after, group),
      ...judged,
      ...absent,
      ...(judged.length + missed.length === 0 ? [nothingAsked(group)] : []),
    ],
  };
}

const inNeither = 'it is in neither record';

function sideOf(when: string, result: Result): Suite['properties'] {
  return propertiesOf(result).map(([name, value]) => [`${when}.${name}`, value]);
}

function broken(which: string, result: Result, group: string): readonly Case[] {
  return troubles(result).map((trouble) => ({ ...trouble, name: `${which}: ${trouble.name}`, group }));
}

function nothingAsked(group: string): Case {
  const text = 'Nothing that the tolerance asks for is in these records.';
  return { name: 'nothing is asked', group, came: { kind: 'failure', type: 'undecided', message: text } };
}

function cameOf(compared: Compared, outcome: Exclude<Compared['outcome'], 'not-judged'>): Came {
  const text = reasons(compared);
  return outcome === 'conforms'
    ? { kind: 'passed', text }
    : { kind: 'failure', type: outcome, message: text };
}

function reasons(compared: Compared): string {
  const { before, after, difference, expected, probability, note } = compared;
  const change = changeInWords(compared);
  const normalized = difference?.normalizedError ?? null;
  return [
    `before ${before === undefined ? 'nothing' : valueInWords(before)}, after ${after === undefined ? 'nothing' : valueInWords(after)}`,
    ...(change === '' ? [] : [`change ${change}`]),
    ...(normalized === null ? [] : [`normalized error ${normalizedErrorInWords(normalized)}`]),
    ...(expected === undefined ? [] : [`allowed: ${allowedInWords(expected, compared)}`]),
    ...(probability === null ? [] : [`conformance probability ${probabilityInWords(probability)}`]),
    ...(note === '' ? [] : [note]),
  ].join('; ');
}
