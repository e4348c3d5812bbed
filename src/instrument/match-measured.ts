import type { Driver, Role } from '../files/driver.js';
import { harmlessQuestions } from './match-questions.js';

/** What each question was answered; undefined where it was not. */
export type Answers = ReadonlyMap<string, string | undefined>;

/** What may be asked, and a sentence for each lot that may not. */
export interface Measured {
  readonly questions: readonly string[];
  readonly left: readonly string[];
}

/**
 * Which questions that must be measured for may be put to an instrument, after what it has said of its states: a
 * question such as `MEAS:CURR?` makes a meter measure something else.
 *
 * - What says whether its input or output is on is a load or a source, and is asked what those measure.
 * - What says what it measures is a meter. It is asked for a voltage if that is dc voltage, else for nothing.
 * - Anything else is asked for dc voltage or a temperature by questions that name them, and not with `READ?` and
 *   its like, of which nobody knows what they would measure: a resistance would drive a current.
 */
export function measuredQuestions(drivers: readonly Driver[], answers: Answers): Measured {
  if (hasSwitch(drivers, answers)) return { questions: measuredBy(drivers, ['load', 'source']), left: [] };
  const meters = measuredBy(drivers, ['meter']);
  switch (whatItMeasures(drivers, answers)) {
    case 'dc voltage':
      return { questions: meters, left: [] };
    case 'something else':
      return {
        questions: [],
        left: [`${meters.join(', ')}: it measures something else than dc voltage now, and is left so`],
      };
    case 'unknown': {
      const others = meters.filter((text) => !/VOLT/i.test(text));
      const named = meters.filter((text) => /VOLT/i.test(text));
      const unnamed = `${others.join(', ')}: it does not say what it would measure`;
      return {
        questions: [...named, ...measuredBy(drivers, ['thermometer'])],
        left: others.length === 0 ? [] : [unnamed],
      };
    }
  }
}

function measuredBy(drivers: readonly Driver[], roles: readonly Role[]): string[] {
  const questions = drivers
    .filter(({ role }) => roles.includes(role))
    .flatMap((driver) => harmlessQuestions(driver).filter(({ kind }) => kind === 'measured'));
  return [...new Set(questions.map(({ text }) => text))];
}

/** Whether it has said of its input or its output that it is on, or off. */
function hasSwitch(drivers: readonly Driver[], answers: Answers): boolean {
  return drivers.some(({ readings }) =>
    ['input-state', 'output-state'].some((name) => {
      const reading = readings[name];
      const answer = answers.get(reading?.ask.at(-1)?.text ?? '')?.trim();
      return reading?.kind === 'flag' && answer !== undefined && /^(?:[+-]?\d+|ON|OFF)$/i.test(answer);
    }),
  );
}

function whatItMeasures(
  drivers: readonly Driver[],
  answers: Answers,
): 'dc voltage' | 'something else' | 'unknown' {
  for (const { readings } of drivers) {
    const reading = readings['measures-voltage'];
    const answer = answers.get(reading?.ask.at(-1)?.text ?? '')?.trim();
    if (reading?.kind !== 'flag' || answer === undefined) continue;
    if (reading.trueWhen.finds(answer)) return 'dc voltage';
    if (reading.falseWhen?.finds(answer) === true) return 'something else';
  }
  return 'unknown';
}
