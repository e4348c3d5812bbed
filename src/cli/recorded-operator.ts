import { type Clock, isSettable } from '../clock/clock.js';
import { BadFileError } from '../files/file-error.js';
import { readAndParse } from '../files/read-text.js';
import { type RecordedAnswer, readAnswers } from '../run/answers-record.js';
import { replayedOperator } from '../run/replayed-operator.js';
import type { Operator } from '../steps/operator.js';

/**
 * The person of a recorded run, from a file of answers.
 * @throws MissingFileError, BadFileError
 */
export async function recordedOperator(file: string, clock: Clock): Promise<Operator> {
  const { value: answers } = await readAndParse(file, parseAnswers);
  return replayedOperator(file, answers, (moment) => {
    // A bench with recorded answers is replayed, and the clock of such a bench can be set.
    if (isSettable(clock)) clock.reach(moment);
  });
}

function parseAnswers(text: string, file: string): readonly RecordedAnswer[] {
  const answers = readAnswers(text);
  if (!('badLine' in answers)) return answers;
  const message = `not a line of recorded answers, as '--trace' writes them`;
  throw new BadFileError([{ file, line: answers.badLine, column: 1, path: '', message }]);
}
