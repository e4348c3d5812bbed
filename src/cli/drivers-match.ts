import { realClock } from '../clock/real-clock.js';
import { VirtualClock } from '../clock/virtual-clock.js';
import { exitCodes, type ExitCode } from '../errors/railproof-error.js';
import { parseAddress } from '../files/connection-address.js';
import type { Driver } from '../files/driver.js';
import { readDriver } from '../files/read-driver.js';
import { shippedNames } from '../files/shipped-file.js';
import { type FamilyMatch, type Match, matchDrivers } from '../instrument/match.js';
import { visible } from '../instrument/visible.js';
import { printable } from '../quantity/printable.js';
import { alignTable } from '../report/align.js';
import { jsonText } from '../report/json-text.js';
import { fitted } from '../quantity/word-wrap.js';
import { connectors } from './connectors.js';
import type { MatchJson } from './schema/match-schema.js';
import { stopOnSignals } from './stop-signals.js';
import type { Streams } from './streams.js';
import { whenAborted } from './when-aborted.js';
import { shelves, shipped } from './shipped.js';

/** `railproof drivers --match`: which of the shipped families an instrument belongs to, by harmless questions. */
export async function matchOut(
  wanted: { readonly address: string; readonly json: boolean },
  streams: Streams,
): Promise<ExitCode> {
  const names = await shippedNames(shipped.drivers);
  const drivers = await Promise.all(names.map(async (name) => (await readDriver(name, shelves)).value));
  const address = parseAddress(wanted.address);
  const clock = address.kind === 'replay' ? new VirtualClock(realClock.wall()) : realClock;
  const connection = await connectors(clock)(address, anyOf(drivers), 'instrument');
  const stop = stopOnSignals(streams);
  whenAborted(stop.hurry, () => void connection.close());
  const answered: string[] = [];
  try {
    streams.stderr.write(`${printable(connection.address)}: asking what does no harm; this takes a while\n`);
    const match = await matchDrivers({
      ...{ drivers, connection, clock, signal: stop.signal },
      onAnswer: (question, answer) => {
        if (answer !== undefined) answered.push(question);
        if (!wanted.json) streams.stdout.write(answerText(question, answer));
      },
    });
    stop.signal.throwIfAborted();
    streams.stdout.write(
      wanted.json
        ? matchAsJson(connection.address, match)
        : matchText(connection.address, match, answered, streams),
    );
    if (match.kind === 'silent') return exitCodes.instrument;
    return match.families.length > 0 ? exitCodes.conforms : exitCodes.doesNotConform;
  } finally {
    await connection.close();
    stop.release();
  }
}

/** A line is opened as its address says: no family's own settings are tried, there is one connection only. */
export function anyOf([first]: readonly Driver[]): Driver {
  if (first === undefined) throw new Error('no driver comes with the program');
  const { sendEnd, replyEnd, gap, timeout } = first.wire;
  return { ...first, wire: { sendEnd, replyEnd, gap, timeout } };
}

function answerText(question: string, answer: string | undefined): string {
  const heard = answer === undefined ? 'not answered' : `→ ${visible(answer)}`;
  return `  ${visible(question).padEnd(18)}  ${heard}\n`;
}

function matchText(address: string, match: Match, answered: readonly string[], { stdout }: Streams): string {
  if (match.kind === 'silent') {
    return fitted(
      match.repeats
        ? 'Nothing answers the question who it is: what is sent comes back, and no more. Does the cable join what ' +
            'is sent to what is received, or is the interface the wrong one?\n'
        : `Nothing answers the question who it is, with any end of line. Is the instrument switched on, is remote ` +
            `control enabled, and is the baud rate right (serial:path?baud=9600)? One that must be put in remote ` +
            `before it answers is not found in this way: try load-remote-scpi.\n`,
      stdout.columns,
    );
  }
  const { identity, words, sendEnd, families, left } = match;
  const ways = [
    sendEnd === '\n' ? [] : [`it hears messages that end in ${visible(sendEnd)}`],
    words.replyEnd === undefined
      ? ['its replies have no end of line']
      : [`its replies end in ${visible(words.replyEnd)}`],
    words.echo ? ['it repeats each message: echo: true'] : [],
    words.prompt === undefined ? [] : [`it sends a prompt, "${visible(words.prompt)}"`],
  ].flat();
  const [best, second] = families;
  const lines = [
    '',
    `It calls itself "${visible(identity)}"; ${ways.join('; ')}.`,
    ...(best === undefined
      ? ['', ...ofNoFamily(address, answered)]
      : [
          '',
          ...alignTable(families.slice(0, 5).map(rowOf), ['left', 'left', 'right', 'left']),
          '',
          ...reasons(best, second),
          `Try it next: railproof drivers --try ${best.driver} --connection ${printable(address)}`,
        ]),
    ...left.map((each) => `Not asked: ${each}.`),
    'Nothing was told and nothing switched; the errors in its queue are gone with ours.',
  ];
  return `${lines.map((line) => (line.startsWith('  ') ? line : fitted(line, stdout.columns))).join('\n')}\n`;
}

/** It speaks, and in words of its own: then the nearest family is what to begin with. */
function ofNoFamily(address: string, answered: readonly string[]): string[] {
  const known =
    answered.length === 0
      ? 'none of it was answered'
      : `only ${answered.join(', ')} ${answered.length === 1 ? 'was' : 'were'} answered`;
  return [
    `No shipped family fits: of all that was asked ${known}.`,
    'Take the one whose words are nearest (drivers/README.md says what each assumes), write its file with --try, ' +
      'mend that, and try it again:',
    `  railproof drivers --try load-short-scpi --connection ${printable(address)} --write my-load`,
  ];
}

function rowOf({ driver, role, understood, asked }: FamilyMatch): string[] {
  return [`  ${driver}`, role, `${understood.length} of ${asked.length}`, 'understood'];
}

/** Why the best, and why not the second. */
function reasons(best: FamilyMatch, second: FamilyMatch | undefined): string[] {
  const missed = (family: FamilyMatch): string[] =>
    family.asked.filter((question) => !family.understood.includes(question));
  const lines: string[] = [];
  const bad = missed(best);
  lines.push(
    bad.length === 0
      ? `${best.driver} fits best: all that it asks was understood.`
      : `${best.driver} fits best, but for ${bad.join(', ')}.`,
  );
  if (second === undefined) return lines;
  const worse = missed(second);
  if (second.isAnother) lines.push(`${second.driver} is for instruments of another name.`);
  else if (second.score === best.score)
    lines.push(`${second.driver} fits as well; what was asked cannot tell the two apart, --try can.`);
  else if (worse.length > 0)
    lines.push(
      `${second.driver} comes second: ${worse.join(', ')} ${worse.length === 1 ? 'was' : 'were'} not understood.`,
    );
  else lines.push(`${second.driver} comes second: it asks less, so that it proves less.`);
  return lines;
}

function matchAsJson(address: string, match: Match): string {
  const format = 'railproof/match 1';
  const json: MatchJson =
    match.kind === 'silent'
      ? { format, address, answered: false }
      : {
          ...{ format, address, answered: true, identity: match.identity, sendEnd: match.sendEnd },
          ...{ replyEnd: match.words.replyEnd, echo: match.words.echo, prompt: match.words.prompt },
          ...{ families: match.families, notAsked: match.left },
        };
  return jsonText(json);
}
