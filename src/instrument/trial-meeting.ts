import type { Message, Wire } from '../files/driver.js';
import type { Seconds } from '../quantity/quantity.js';
import { firstWords, type FirstWords } from './first-words.js';
import { fillMessage } from './message.js';
import { cautiousGap, type TrialLine } from './trial-line.js';
import { visible } from './visible.js';

/** How an instrument turned out to be spoken to. */
export interface Meeting {
  readonly kind: 'answered' | 'silent';
  readonly wire: Wire;
  /** What the driver file says otherwise, or does not say, a sentence each. */
  readonly remarks: readonly string[];
}

/** So long nothing comes any more once all has come. */
const quiet: Seconds = 0.25;
const mostHeard = 4096;
const sendEnds = ['\n', '\r\n', '\r'];

/**
 * Tells what makes it safe, as if nothing were known of it, then asks who it is and looks at every byte that
 * comes back. Where nothing comes, the same goes out with the other ends of line. Nothing is taken from the
 * driver's word for echo, prompt and ends of reply.
 * @throws ConnectionLostError
 */
export async function meet(line: TrialLine, tellFirst: readonly Message[]): Promise<Meeting> {
  const { wire, identify } = line.driver;
  const ends = [wire.sendEnd, ...sendEnds.filter((end) => end !== wire.sendEnd)];
  for (const sendEnd of ends) {
    for (const message of [{ text: '' }, ...tellFirst]) {
      await say(line, message.text, sendEnd);
      await line.clock.sleep(Math.max(cautiousGap, wire.gap, message.rest ?? 0));
    }
    await hear(line, 0, quiet);
    await say(line, identify, sendEnd);
    const words = firstWords(await hear(line, wire.timeout, quiet), identify);
    if (words.reply === undefined) continue;
    return { kind: 'answered', wire: wireAs(wire, sendEnd, words), remarks: remarksOn(wire, sendEnd, words) };
  }
  return { kind: 'silent', wire, remarks: [] };
}

/** Done once it is out. */
async function say({ connection, clock }: TrialLine, message: string, sendEnd: string): Promise<void> {
  await clock.sleep(await connection.write(Buffer.from(message + sendEnd, 'latin1')));
}

/** All that comes until nothing does any more; `within` is how long the first of it may take. */
async function hear({ connection }: TrialLine, within: Seconds, then: Seconds): Promise<string> {
  let text = '';
  for (let wait = within; text.length < mostHeard; wait = then) {
    const bytes = await connection.receive(wait);
    if (bytes === undefined) return text;
    text += Buffer.from(bytes).toString('latin1');
  }
  return text;
}

function wireAs(wire: Wire, sendEnd: string, { prompt, echo, replyEnd }: FirstWords): Wire {
  const { gap, timeout, serial } = wire;
  return {
    ...{ sendEnd, gap, timeout, echo },
    replyEnd: replyEnd === undefined || suits(wire.replyEnd, replyEnd) ? wire.replyEnd : replyEnd,
    ...(prompt === undefined ? {} : { prompt }),
    ...(serial === undefined ? {} : { serial }),
  };
}

/** With a line feed as its end, a carriage return before it is dropped; behind a carriage return, a line feed. */
export function suits(expected: string, seen: string): boolean {
  return expected === seen || (seen === '\r\n' && (expected === '\n' || expected === '\r'));
}

function remarksOn(wire: Wire, sendEnd: string, words: FirstWords): string[] {
  const { prompt, echo, replyEnd } = words;
  const remarks: string[] = [];
  if (sendEnd !== wire.sendEnd) {
    remarks.push(`it hears messages that end in ${visible(sendEnd)}, and not in ${visible(wire.sendEnd)}`);
  }
  if (replyEnd === undefined) remarks.push('its replies have no end of line');
  else if (!suits(wire.replyEnd, replyEnd)) remarks.push(`its replies end in ${visible(replyEnd)}`);
  else if (replyEnd !== wire.replyEnd) remarks.push(`its replies end in ${visible(replyEnd)}, which will do`);
  if (echo !== (wire.echo === true)) {
    remarks.push(
      echo ? 'it repeats each message before it answers' : 'it repeats nothing of what it is sent',
    );
  }
  if (prompt !== wire.prompt) {
    remarks.push(prompt === undefined ? 'it sends no prompt' : `it sends a prompt, "${visible(prompt)}"`);
  }
  return remarks;
}

/** What is told before anything is asked: remote, then what makes it safe. */
export function toldFirst({ driver }: TrialLine): readonly Message[] {
  return [...driver.remote, ...(driver.operations['make-safe'] ?? [])].map((message) => ({
    ...message,
    text: fillMessage(message.text, {}),
  }));
}
