import type { Clock } from '../clock/clock.js';
import type { Driver, Role, Wire } from '../files/driver.js';
import type { Seconds } from '../quantity/quantity.js';
import type { Connection } from './connection.js';
import { Dialogue } from './dialogue.js';
import { firstWords, type FirstWords } from './first-words.js';
import { isUnheard } from './gap.js';
import { isIdentityFor } from './identity.js';
import { type Answers, measuredQuestions } from './match-measured.js';
import { harmlessQuestions } from './match-questions.js';

export interface MatchParts {
  readonly drivers: readonly Driver[];
  readonly connection: Connection;
  readonly clock: Clock;
  readonly signal?: AbortSignal;
  /** Told of each question and its answer; undefined where none came. */
  readonly onAnswer?: (question: string, answer: string | undefined) => void;
}

/** What an instrument makes of what one family asks. */
export interface FamilyMatch {
  readonly driver: string;
  readonly role: Role;
  readonly asked: readonly string[];
  readonly understood: readonly string[];
  /** Answered, and not as the family would read it. */
  readonly otherwise: readonly string[];
  /** The name that it gives itself is none that the driver is for. */
  readonly isAnother: boolean;
  /** Understood of one more than were asked: two of two prove less than seven of eight. */
  readonly score: number;
}

export type Match =
  | {
      readonly kind: 'silent';
      /** What it was sent came back, and nothing else. */
      readonly repeats: boolean;
    }
  | {
      readonly kind: 'answered';
      readonly identity: string;
      readonly words: FirstWords;
      readonly sendEnd: string;
      /** The best first. */
      readonly families: readonly FamilyMatch[];
      /** What was not asked, and why, a sentence each. */
      readonly left: readonly string[];
    };

const sendEnds = ['\n', '\r\n', '\r'];
const firstPatience: Seconds = 1;
const quiet: Seconds = 0.25;
const mostHeard = 4096;
/** A question that is not understood is not answered, and costs no more than this. */
const patience: Readonly<Record<'state' | 'measured', Seconds>> = { state: 0.5, measured: 3 };

/**
 * Asks an instrument of which nothing is known who it is, with each end of line until it answers, and then what
 * each family would ask, but nothing that changes anything (see `harmlessQuestions`). Over one connection: some
 * accept one client only. Nothing but questions goes out, and what each costs is bounded. It counts how much of
 * each family was understood.
 *
 * Errors that it had from before are taken from its queue, and so are those of questions that it did not know;
 * what must be measured is asked for only where that changes nothing (see `measuredQuestions`).
 * @throws ConnectionLostError
 */
export async function matchDrivers(parts: MatchParts): Promise<Match> {
  const met = await meet(parts);
  if ('repeats' in met) return { kind: 'silent', ...met };
  const asked = await askAll(parts, met);
  const families = parts.drivers
    .map((driver) => familyMatch(driver, met.identity, asked.answers))
    .filter(({ understood }) => understood.some((question) => !isForErrors(question, parts.drivers)))
    .sort((one, other) => Number(one.isAnother) - Number(other.isAnother) || other.score - one.score);
  return { kind: 'answered', ...met, families, left: asked.left };
}

/** All families have it in common, and so it tells nothing of any. */
function isForErrors(question: string, drivers: readonly Driver[]): boolean {
  return drivers.some(({ errors }) => errors !== 'none' && errors.ask === question);
}

interface Met {
  readonly identity: string;
  readonly words: FirstWords;
  readonly sendEnd: string;
  readonly identify: string;
}

/** Every question for the identity that a family has, with every end of line. */
async function meet({
  drivers,
  connection,
  clock,
}: MatchParts): Promise<Met | { readonly repeats: boolean }> {
  let repeats = false;
  const questions = [...new Set(drivers.map(({ identify }) => identify))];
  for (const sendEnd of sendEnds) {
    for (const identify of questions) {
      // Whoever spoke before may have died in the middle of a message.
      await clock.sleep(0.1 + (await connection.write(Buffer.from(sendEnd, 'latin1'))));
      await hear(connection, 0);
      const onTheWay = await connection.write(Buffer.from(identify + sendEnd, 'latin1'));
      const words = firstWords(await hear(connection, onTheWay + firstPatience), identify);
      if (words.reply !== undefined) return { identity: words.reply.trim(), words, sendEnd, identify };
      repeats ||= words.echo;
    }
  }
  return { repeats };
}

async function hear(connection: Connection, within: Seconds): Promise<string> {
  let text = '';
  for (let wait = within; text.length < mostHeard; wait = quiet) {
    const bytes = await connection.receive(wait);
    if (bytes === undefined) return text;
    text += Buffer.from(bytes).toString('latin1');
  }
  return text;
}

/** Every question once, states before what must be measured. */
async function askAll(
  parts: MatchParts,
  met: Met,
): Promise<{ readonly answers: Answers; readonly left: readonly string[] }> {
  const { drivers, signal } = parts;
  const answers = new Map<string, string | undefined>();
  const dialogue = dialogueFor(parts, met);
  const put = async (question: string, within: Seconds): Promise<void> => {
    if (answers.has(question) || signal?.aborted === true) return;
    const answer = await dialogue.ask(question, { within }).catch(unheard);
    answers.set(question, answer);
    parts.onAnswer?.(question, answer);
  };
  for (const driver of drivers) {
    for (const { kind, text } of harmlessQuestions(driver)) {
      if (kind === 'state') await put(text, patience.state);
    }
  }
  const { questions, left } = measuredQuestions(drivers, answers);
  for (const question of questions) await put(question, patience.measured);
  await emptyErrors(dialogue, drivers, answers);
  return { answers, left };
}

function dialogueFor(
  { connection, clock }: MatchParts,
  { identify, sendEnd, words, identity }: Met,
): Dialogue {
  const { echo, prompt, replyEnd = '\n' } = words;
  const wire: Wire = {
    ...{ sendEnd, replyEnd: replyEnd === '\r\n' ? '\n' : replyEnd, gap: 0.1, timeout: patience.state, echo },
    ...(prompt === undefined ? {} : { prompt }),
  };
  return new Dialogue({
    connection,
    wire,
    clock,
    identify,
    isIdentity: (reply) => reply.trim() === identity,
  });
}

/** Takes from its queue the errors of questions that it did not know, and what it had before. */
async function emptyErrors(dialogue: Dialogue, drivers: readonly Driver[], answers: Answers): Promise<void> {
  const queue = drivers.find(
    ({ errors }) => errors !== 'none' && answers.get(errors.ask) !== undefined,
  )?.errors;
  if (queue === undefined || queue === 'none' || queue.kind !== 'queue') return;
  for (let entries = 0; entries <= answers.size; entries++) {
    const answer = await dialogue.ask(queue.ask).catch(unheard);
    if (answer === undefined || queue.clear.finds(answer.trim())) return;
  }
}

function unheard(error: unknown): undefined {
  if (isUnheard(error)) return undefined;
  throw error;
}

function familyMatch(driver: Driver, identity: string, answers: Answers): FamilyMatch {
  const questions = harmlessQuestions(driver).filter(({ text }) => answers.has(text));
  const answered = questions.filter(({ text }) => answers.get(text) !== undefined);
  const understood = answered.filter(({ text, understands }) => understands(answers.get(text) ?? ''));
  return {
    ...{ driver: driver.name, role: driver.role },
    asked: questions.map(({ text }) => text),
    understood: understood.map(({ text }) => text),
    otherwise: answered.filter((each) => !understood.includes(each)).map(({ text }) => text),
    isAnother: driver.identity !== undefined && !isIdentityFor(driver)(identity),
    score: understood.length / (questions.length + 1),
  };
}
