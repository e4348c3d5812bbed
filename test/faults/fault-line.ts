import { once } from 'node:events';
import { setImmediate as turn, setTimeout as sleep } from 'node:timers/promises';
import { type AddressInfo, connect, createServer, type Server, type Socket } from 'node:net';
import { LOOPBACK } from '../../src/simulation/serve-tcp.js';

/** What becomes of a reply on its way to the program. */
export interface Delivery {
  /** Sent one after the other, each after a wait in milliseconds. Nothing at all: the reply is swallowed. */
  readonly pieces: readonly { readonly after: number; readonly text: string }[];
  /** What the program must take for the answer: undefined where nothing that it got is one. */
  readonly answer: string | undefined;
}

/** Told of each message before the instrument hears it; whatever it does to the line comes first. */
export type Hearing = (message: string) => void;

/** Told of the answers that the program was given. */
export interface Answers {
  readonly given: (question: string, answer: string) => void;
  /** The one given last was not taken: the program gave it up before it came. */
  readonly notTaken: (question: string) => void;
}

/** With it a program begins, and gets back in step after an answer that did not come in time. */
const identify = '*IDN?';

/** A question that was passed on. */
interface Asked {
  readonly question: string;
  /** The reply has come, and may be on its way. */
  replied: boolean;
  /** The program does not wait for the answer any more. */
  givenUp: boolean;
}

interface Pair {
  readonly client: Socket;
  readonly instrument: Socket;
  /** What was asked and has not been answered to the program yet, in order. */
  readonly open: Asked[];
  /** The question answered last, until the next message. */
  latest: string | undefined;
}

/**
 * A line between the program and one served instrument, on a loopback port, on which things go wrong: it
 * takes messages and replies one by one, knows which reply belongs to which question, and can hang up, refuse,
 * or do something to the replies.
 */
export class FaultLine {
  readonly port: number;
  /** How each reply goes on from here; as it came when left alone. */
  shape: (reply: string, question: string) => Delivery = asItCame;
  /** What the instrument answered last, by question. */
  readonly latest = new Map<string, string>();
  readonly #server: Server;
  readonly #upstream: number;
  readonly #hear: Hearing;
  readonly #answers: Answers;
  readonly #pairs = new Set<Pair>();
  #servesAnother = false;

  /** `upstream` is the port of the served instrument. */
  static async open(facts: { upstream: number; hear: Hearing; answers: Answers }): Promise<FaultLine> {
    const server = createServer({ allowHalfOpen: true, noDelay: true });
    server.listen(0, LOOPBACK);
    await once(server, 'listening');
    return new FaultLine(server, facts);
  }

  private constructor(server: Server, facts: Parameters<typeof FaultLine.open>[0]) {
    this.#server = server;
    this.#upstream = facts.upstream;
    this.#hear = facts.hear;
    this.#answers = facts.answers;
    this.port = (server.address() as AddressInfo).port;
    server.on('connection', (client: Socket) => {
      if (this.#servesAnother) client.destroy();
      else this.#join(client);
    });
  }

  /** How many are connected. */
  get clients(): number {
    return this.#pairs.size;
  }

  /** Says something to the instrument that the program did not say. */
  interject(message: string): void {
    for (const { instrument } of this.#pairs) instrument.write(`${message}\n`);
  }

  /** Whoever is connected is cut off; they may come again. */
  hangUp(): void {
    for (const { client, instrument } of this.#pairs) {
      client.destroy();
      instrument.destroy();
    }
    this.#pairs.clear();
  }

  /** Another program has it: whoever comes is hung up on at once. */
  serveAnother(): void {
    this.#servesAnother = true;
    this.hangUp();
  }

  /** Nothing listens here any more. */
  leave(): void {
    this.#server.close();
    this.hangUp();
  }

  async close(): Promise<void> {
    if (!this.#server.listening) return;
    const closed = once(this.#server, 'close');
    this.leave();
    await closed;
  }

  #join(client: Socket): void {
    const instrument = connect({
      port: this.#upstream,
      host: LOOPBACK,
      noDelay: true,
      allowHalfOpen: true,
    });
    const pair: Pair = { client, instrument, open: [], latest: undefined };
    this.#pairs.add(pair);
    let delivered = Promise.resolve();
    eachLine(client, (message) => {
      if (!this.#pairs.has(pair)) return;
      if (message === identify) {
        if (pair.latest !== undefined) this.#answers.notTaken(pair.latest);
        for (const asked of pair.open) asked.givenUp = true;
      }
      pair.latest = undefined;
      this.#hear(message);
      if (!this.#pairs.has(pair)) return;
      if (message.includes('?')) pair.open.push({ question: message, replied: false, givenUp: false });
      instrument.write(`${message}\n`);
    });
    eachLine(instrument, (reply) => {
      const asked = pair.open.find(({ replied }) => !replied);
      if (asked === undefined) return;
      asked.replied = true;
      const delivery = this.shape(reply, asked.question);
      this.latest.set(asked.question, reply);
      delivered = delivered.then(() => this.#deliver(pair, asked, delivery));
    });
    client.on('end', () => instrument.end());
    instrument.on('end', () => {
      void delivered.then(() => client.end());
    });
    for (const socket of [client, instrument]) {
      // A side that goes away in the middle of a sentence: the other one hears of it by `close`.
      socket.on('error', () => undefined);
      socket.on('close', () => {
        this.#pairs.delete(pair);
        client.destroy();
        instrument.destroy();
      });
    }
  }

  async #deliver(pair: Pair, asked: Asked, { pieces, answer }: Delivery): Promise<void> {
    for (const { after, text } of pieces) {
      await (after > 0 ? sleep(after) : turn());
      if (pair.client.destroyed) return;
      pair.client.write(text);
    }
    pair.open.splice(pair.open.indexOf(asked), 1);
    if (answer === undefined || asked.givenUp) return;
    pair.latest = asked.question;
    this.#answers.given(asked.question, answer);
  }
}

export function asItCame(reply: string): Delivery {
  return { pieces: [{ after: 0, text: `${reply}\n` }], answer: reply };
}

function eachLine(socket: Socket, take: (line: string) => void): void {
  let rest = '';
  socket.setEncoding('latin1').on('data', (more: string) => {
    const lines = (rest + more).split('\n');
    rest = lines.pop() ?? '';
    for (const line of lines) take(line);
  });
}
