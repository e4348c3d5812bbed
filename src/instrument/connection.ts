import type { Seconds } from '../quantity/quantity.js';
import type { Notice } from './notice.js';

/**
 * Bytes to and from one instrument; the seam between the tool and the world. Everything above it is the
 * same for TCP, serial, a replayed dialogue and the simulated bench.
 */
export interface Connection {
  /** As the bench file writes it: `tcp://127.0.0.1:5025`. */
  readonly address: string;
  /** What came out otherwise than was asked for when it was opened; for whoever opened it to tell. */
  readonly remark?: Notice | undefined;
  /**
   * Done once the port has taken them; hands over how long from then on they are on their way out.
   * @throws ConnectionLostError
   */
  write(bytes: Uint8Array): Promise<Seconds>;
  /**
   * The bytes that have arrived since the last call, at least one; undefined when none came in time.
   * With 0 it takes what is there and does not wait.
   * @throws ConnectionLostError once the other side is gone and all that it sent has been received.
   */
  receive(within: Seconds): Promise<Uint8Array | undefined>;
  /** Once all that was written is out. Never rejects; a second call is of no effect. */
  close(): Promise<void>;
}
