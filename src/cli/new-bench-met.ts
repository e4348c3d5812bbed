import type { ConnectionAddress } from '../files/bench.js';
import { formatAddress } from '../files/connection-address.js';
import type { Driver, Role } from '../files/driver.js';
import type { FamilyMatch } from '../instrument/match.js';
import { suits } from '../instrument/trial-meeting.js';
import { visible } from '../instrument/visible.js';
import type { Met } from './meet-instrument.js';
import { troubleshootingPage } from './package-facts.js';
import type { Questions } from './questions.js';
import { quoted } from './quoted.js';

type Answered = Extract<Met, { readonly kind: 'answered' }>;

const again =
  'Leave it out and give its address again to ask once more; or say what it is, and pick a driver by hand.';

/** Says who answered and which driver fits; or why nobody did, and what to do about it. */
export function sayMet(questions: Questions, met: Met): void {
  switch (met.kind) {
    case 'answered':
      sayAnswered(questions, met);
      return;
    case 'silent':
      questions.say(
        met.repeats
          ? 'Nothing answers: what is sent comes back, and no more. Does its cable join what is sent to what is ' +
              `received, or is its interface the wrong one? ${again}`
          : 'Nothing answers. Is it switched on, is remote control enabled, and, at a serial port, is the baud rate right ' +
              `(?baud=115200)? ${again} ${troubleshootingPage()} has more under "It does not answer".`,
      );
      return;
    case 'unreachable':
      questions.say(met.reason);
      questions.say(again);
  }
}

function sayAnswered(questions: Questions, met: Answered): void {
  const { identity, families } = met;
  const [best] = families;
  if (makesNoSense(met)) {
    questions.say(
      `What comes back makes no sense: ${visible(identity)}. At a serial port that is mostly the baud rate or the ` +
        "parity, which the instrument's own menu shows. Leave it out and give its address again, with another " +
        '?baud=115200, to ask once more.',
    );
    return;
  }
  questions.say(`It says that it is ${visible(identity)}.`);
  if (best === undefined) {
    questions.say(
      'No shipped driver fits: of what they ask nothing was answered as one of them reads it. Is it the instrument ' +
        'that you mean? Then take the driver whose words are nearest (drivers/README.md), and mend a copy of it ' +
        'afterwards.',
    );
    return;
  }
  questions.say(
    `${best.driver} fits best: ${best.understood.length} of ${best.asked.length} of its questions were understood.`,
  );
  const second = families.find((family) => family !== best && isAsGood(family, best));
  if (second !== undefined)
    questions.say(
      `${second.driver} would do as well: all ${second.asked.length} of its questions were understood too. ` +
        `Proposed is the one that asks more.`,
    );
  if (best.role === 'scanner')
    questions.say(
      'A scanner goes with a group section, which is written by hand: procedures/README.md has one. Leave it out here.',
    );
}

function isAsGood(family: FamilyMatch, best: FamilyMatch): boolean {
  return family.role === best.role && !family.isAnother && family.understood.length === family.asked.length;
}

/** Where the baud rate is wrong bytes come that no instrument would send as its name. */
export function makesNoSense({ identity, families }: Answered): boolean {
  return families.length === 0 && /[^\x20-\x7e\t]/.test(identity.trim());
}

/** What whoever reads the bench file may want to know of how an instrument was met. */
export function remarkOn(met: Met): string {
  const byHand = 'the driver was picked by hand.';
  switch (met.kind) {
    case 'answered':
      return makesNoSense(met)
        ? `What it answered when this file was made made no sense; ${byHand}`
        : `It said that it is ${visible(met.identity)}.`;
    case 'silent':
    case 'unreachable':
      return `It did not answer when this file was made; ${byHand}`;
  }
}

/** How it speaks otherwise than a driver has it, in the words of a driver file; undefined where it does not. */
export function wireLacking(met: Met, { wire }: Driver): string | undefined {
  if (met.kind !== 'answered' || makesNoSense(met)) return undefined;
  const { words, sendEnd } = met;
  const lacks = [
    ...(words.echo && wire.echo !== true ? ['echo: true'] : []),
    ...(words.prompt !== undefined && wire.prompt === undefined
      ? [`prompt: ${JSON.stringify(words.prompt)}`]
      : []),
    // The plain end of line is tried first, and many who hear it hear the others as well.
    ...(sendEnd !== '\n' && wire.sendEnd !== sendEnd ? [`send-end: ${JSON.stringify(sendEnd)}`] : []),
    ...(words.replyEnd !== undefined && !suits(wire.replyEnd, words.replyEnd)
      ? [`reply-end: ${JSON.stringify(words.replyEnd)}`]
      : []),
  ];
  return lacks.length === 0 ? undefined : `wire: { ${lacks.join(', ')} }`;
}

/** Says what a driver lacks for an instrument that was met, and how to come by one that has it. */
export function sayLacking(
  questions: Questions,
  lacking: string,
  {
    name,
    role,
    connection,
  }: { readonly name: string; readonly role: Role; readonly connection: ConnectionAddress },
): void {
  questions.say(
    `\nIt speaks otherwise than ${name} has it: ${lacking}. Before the first run have that driver fitted to ` +
      'it, and name the new one in the bench file, ' +
      `driver: ./my-${role}.yaml:`,
  );
  questions.say(
    `railproof drivers --try ${quoted(name)} --connection ${quoted(formatAddress(connection))} --write my-${role}`,
    '  ',
  );
}
