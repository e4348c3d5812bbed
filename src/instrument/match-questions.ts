import type { Driver, DriverReading } from '../files/driver.js';
import { judgedAnswer } from './error-report.js';
import { meaningOf } from './reading-meaning.js';
import type { About } from './reading.js';
import { ReplyNotUnderstoodError } from './reply-errors.js';
import { parseScpiNumber } from './scpi-number.js';

/** Something that may be asked of an instrument of which nothing is known. */
export interface MatchQuestion {
  readonly text: string;
  /** What it would be asked for: a state or a setting, or something that must be measured first. */
  readonly kind: 'state' | 'measured';
  /** Whether an answer is one that the driver reads. */
  readonly understands: (answer: string) => boolean;
}

/** What an operation of a load or a source sets; in the standard's grammar what is set can be asked for. */
const settings = /^(?:set|protect)-|-mode$/;

/**
 * What a driver asks that does no harm, whatever instrument hears it: its questions for errors, for states, for
 * what a load, a source or a thermometer measures, and for what it sets (`CURR {amps}` is asked for as `CURR?`:
 * IEEE 488.2 has no question that sets anything). Nothing that must be told something first; no resistance, for
 * which a meter drives a current; of a meter nothing but dc voltage, since its questions may choose what it
 * measures.
 */
export function harmlessQuestions(driver: Driver): readonly MatchQuestion[] {
  const questions: MatchQuestion[] = [];
  const add = (
    text: string,
    kind: MatchQuestion['kind'],
    understands: MatchQuestion['understands'],
  ): void => {
    if (text.includes('{') || questions.some((each) => each.text === text)) return;
    questions.push({ text, kind, understands });
  };
  const addSetting = (message: string, understands: MatchQuestion['understands']): void => {
    const [, header] = /^([A-Za-z:]+) \S/.exec(message) ?? [];
    if (header !== undefined) add(`${header}?`, 'state', understands);
  };
  const { errors } = driver;
  if (errors !== 'none')
    add(
      errors.ask,
      'state',
      reads((answer) => judgedAnswer(answer, errors, aboutNobody)),
    );
  for (const [name, reading] of Object.entries(driver.readings)) {
    const [question, ...more] = reading.ask.filter(({ selectsChannel }) => selectsChannel !== true);
    if (question === undefined || more.length > 0 || !mayBeAsked(driver, name, reading)) continue;
    const kind = reading.kind === 'number' ? 'measured' : 'state';
    add(
      question.text,
      kind,
      reads((answer) => meaningOf(answer, reading, aboutNobody)),
    );
  }
  for (const { text } of driver.channels?.select ?? []) addSetting(text, isNumber);
  for (const [operation, messages] of Object.entries(driver.operations)) {
    if (!settings.test(operation)) continue;
    addSetting(messages.at(-1)?.text ?? '', operation.endsWith('-mode') ? isWord : isNumber);
  }
  return questions;
}

function mayBeAsked({ role }: Driver, name: string, reading: DriverReading): boolean {
  if (reading.kind !== 'number') return true;
  return name !== 'resistance' && (role !== 'meter' || name === 'voltage');
}

const aboutNobody: About = { address: '', question: '' };

function reads(read: (answer: string) => unknown): (answer: string) => boolean {
  return (answer) => {
    try {
      read(answer);
      return true;
    } catch (error) {
      if (error instanceof ReplyNotUnderstoodError) return false;
      throw error;
    }
  };
}

const isNumber = reads((answer) => parseScpiNumber(answer));

/** `CURR`, `"CURR"`, `CC`: what a mode is called, and no number. */
function isWord(answer: string): boolean {
  return /^"?[A-Z][A-Z: ]*"?$/i.test(answer.trim());
}
