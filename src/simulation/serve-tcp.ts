import { once } from 'node:events';
import { type AddressInfo, type Server, type Socket, createServer } from 'node:net';
import type { Clock } from '../clock/clock.js';
import type { Seconds } from '../quantity/quantity.js';
import { MessageSplitter } from './message-splitter.js';
import { REPLY_LATENCY } from './simulated-connection.js';
import { CannotServeError } from './simulation-errors.js';
import type { VirtualInstrument } from './virtual-instrument.js';

/** Only this machine can reach a simulated instrument. */
export const LOOPBACK = '127.0.0.1';

const lookEvery: Seconds = 0.05;

export interface TcpPlace {
  readonly instrument: VirtualInstrument;
  readonly clock: Clock;
  /** The clock's time at which the bench's time was 0. */
  readonly began: Seconds;
  /** 0 for any that is free. */
  readonly port: number;
}

export interface ServedPort {
  readonly port: number;
  close(): Promise<void>;
}

/**
 * Serves one instrument to any number of clients on a loopback port, in real time. A client's messages are
 * taken one by one and no faster than it reads the replies, so that no client can make memory grow.
 * @throws CannotServeError when the port is taken or not allowed.
 */
export async function serveOnTcp(place: TcpPlace): Promise<ServedPort> {
  const closing = new AbortController();
  const sockets = new Set<Socket>();
  const server = createServer({ allowHalfOpen: true, noDelay: true }, (socket) => {
    sockets.add(socket);
    socket.once('close', () => sockets.delete(socket));
    void converse(socket, place);
  });
  const port = await listening(server, place.port);
  const hangUp = async (): Promise<void> => {
    const closed = server.listening ? once(server, 'close') : undefined;
    server.close();
    for (const socket of sockets) socket.destroy();
    await closed;
  };
  const life = goneNowAndThen(place, { hangUp, back: () => listening(server, port) }, closing.signal);
  return {
    port,
    close: async () => {
      closing.abort();
      await life;
      await hangUp();
    },
  };
}

/** Hangs up when the instrument is gone, and is back on the same port when it is. Never rejects. */
async function goneNowAndThen(
  { instrument, clock, began }: TcpPlace,
  line: { readonly hangUp: () => Promise<void>; readonly back: () => Promise<unknown> },
  closing: AbortSignal,
): Promise<void> {
  const until = (moment: Seconds): Promise<void> => clock.sleep(moment - (clock.now() - began), closing);
  try {
    for (const spell of instrument.gone) {
      if (!Number.isFinite(spell.from)) return;
      await until(spell.from);
      await line.hangUp();
      if (!Number.isFinite(spell.until)) return;
      await until(spell.until);
      // Somebody may have taken the port meanwhile; it is not theirs for long.
      while (
        !(await line.back().then(
          () => true,
          () => false,
        ))
      )
        await clock.sleep(lookEvery, closing);
    }
  } catch {
    // The bench is being closed.
  }
}

async function listening(server: Server, port: number): Promise<number> {
  try {
    server.listen(port, LOOPBACK);
    await once(server, 'listening');
  } catch (cause) {
    const code = (cause as NodeJS.ErrnoException).code ?? String(cause);
    throw new CannotServeError({
      where: `tcp://${LOOPBACK}:${port}`,
      reason: code === 'EADDRINUSE' ? 'the port is in use' : code,
      advice: 'Choose another port, or none to have a free one found.',
      cause,
    });
  }
  return (server.address() as AddressInfo).port;
}

async function converse(socket: Socket, { instrument, clock, began }: TcpPlace): Promise<void> {
  const gone = new AbortController();
  socket.once('close', () => {
    gone.abort();
  });
  const splitter = new MessageSplitter();
  try {
    for await (const chunk of socket.iterator({ destroyOnReturn: false }) as AsyncIterable<Uint8Array>) {
      for (const incoming of splitter.feed(chunk)) {
        const now = clock.now() - began;
        const { reply, readyAt } = instrument.hear(incoming, now);
        if (reply === undefined) continue;
        await clock.sleep(Math.max(0, readyAt + REPLY_LATENCY - now), gone.signal);
        if (!socket.write(reply)) await once(socket, 'drain', { signal: gone.signal });
      }
    }
    socket.end();
  } catch {
    // A client that goes away in the middle of a sentence is no matter for the instrument.
    socket.destroy();
  }
}
