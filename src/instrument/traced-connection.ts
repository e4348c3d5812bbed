import type { EventClock } from '../clock/event-clock.js';
import { formatAddress } from '../files/connection-address.js';
import type { Seconds } from '../quantity/quantity.js';
import type { Connect } from './connect.js';
import { ConnectionLostError, InstrumentUnreachableError, PortBusyError } from './connection-errors.js';
import type { Connection } from './connection.js';
import type { Trace } from './dialogue-record.js';

/** Where what happens at a post is noted; `address` is the one that was asked for. It must not throw. */
export type TraceOf = (role: string, address: string) => Trace;

/**
 * The same ways to connect, and every byte noted with its time. Whoever works over them must go by that clock:
 * then a replay of what was noted is the same work over again, to the last digit.
 */
export function tracedConnect(connect: Connect, clock: EventClock, traceOf: TraceOf): Connect {
  return async (address, driver, role, within) => {
    const trace = traceOf(role, formatAddress(address));
    try {
      return tracedConnection(await connect(address, driver, role, within), clock, trace);
    } catch (error) {
      const t = clock.happens();
      if (error instanceof InstrumentUnreachableError)
        trace({ t, kind: 'unreachable', reason: error.reason });
      if (error instanceof PortBusyError) trace({ t, kind: 'busy', reason: error.message });
      throw error;
    }
  };
}

/** A connection that was opened now, and everything noted that happens on it from now on. */
export function tracedConnection(connection: Connection, clock: EventClock, trace: Trace): Connection {
  trace({ t: clock.happens(), kind: 'opened', address: connection.address });
  return new TracedConnection(connection, clock, trace);
}

/** Notes what goes over a connection, and moves the clock to when it did. */
class TracedConnection implements Connection {
  readonly address: string;
  readonly remark: Connection['remark'];
  readonly #connection: Connection;
  readonly #clock: EventClock;
  readonly #trace: Trace;
  /** How often in a row nothing had come; of interest only if something comes before anything is sent. */
  #silences = 0;
  /** It is told of its end once, and not at all of one that is our own doing. */
  #ended = false;

  constructor(connection: Connection, clock: EventClock, trace: Trace) {
    this.address = connection.address;
    this.remark = connection.remark;
    this.#connection = connection;
    this.#clock = clock;
    this.#trace = trace;
  }

  async write(bytes: Uint8Array): Promise<Seconds> {
    const onTheWay = await this.#connection.write(bytes).catch((error: unknown) => {
      this.#lost(error);
      throw error;
    });
    this.#silences = 0;
    const t = this.#clock.happens();
    this.#trace({ t, kind: 'sent', bytes });
    if (onTheWay > 0) this.#trace({ t, kind: 'out-in', seconds: onTheWay });
    return onTheWay;
  }

  /** What came within the time is noted within it, however late we had a turn to see that it had come. */
  async receive(within: Seconds): Promise<Uint8Array | undefined> {
    const end = this.#clock.now() + Math.max(0, within);
    const bytes = await this.#connection.receive(within).catch((error: unknown) => {
      this.#lost(error, end);
      throw error;
    });
    if (bytes === undefined) {
      this.#clock.reach(end);
      this.#silences += 1;
      return undefined;
    }
    this.#noteSilences();
    this.#trace({ t: this.#clock.happens(end), kind: 'received', bytes });
    return bytes;
  }

  close(): Promise<void> {
    this.#ended = true;
    return this.#connection.close();
  }

  #lost(error: unknown, latest?: Seconds): void {
    if (this.#ended || !(error instanceof ConnectionLostError)) return;
    this.#ended = true;
    this.#noteSilences();
    this.#trace({ t: this.#clock.happens(latest), kind: 'lost', reason: error.reason });
  }

  #noteSilences(): void {
    if (this.#silences > 0) this.#trace({ t: this.#clock.now(), kind: 'silent', times: this.#silences });
    this.#silences = 0;
  }
}
