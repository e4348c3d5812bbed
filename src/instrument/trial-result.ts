import type { Exchange } from '../files/driver-dialogue.js';
import type { Seconds } from '../quantity/quantity.js';
import type { DriverPart } from './driver-part.js';
import type { Received, Sent } from './dialogue-record.js';

/** What an instrument made of one message of a driver on trial. */
export interface TrialResult {
  readonly part:
    | 'identity'
    | 'error-queue'
    | 'remote'
    | 'prepare'
    | 'operation'
    | 'reading'
    | 'release'
    | 'proof'
    | 'local';
  /** Of the operation or the reading; of the part otherwise. */
  readonly name: string;
  readonly sent: string;
  /** What of the driver file says so; undefined where nothing of it does. */
  readonly at?: DriverPart;
  /** Escaped and cut; undefined when nothing came. */
  readonly received: string | undefined;
  /** `unclear` where a reply makes no sense, and where there is no error queue that could tell. */
  readonly verdict: 'understood' | 'refused' | 'silent' | 'unclear' | 'not-sent';
  readonly detail: string;
  /** That the last answer took, or that was waited for one; 0 where none was due. */
  readonly seconds: Seconds;
  /** All that went over the line for it, questions about errors included, in its order. */
  readonly bytes: readonly (Sent | Received)[];
  /** What of it the `dialogue` of a driver file may hold. */
  readonly exchanges: readonly Exchange[];
}

/** Whether there was nothing to prove, or it is off beyond doubt. */
export function isProven(proof: TrialResult | undefined): boolean {
  return proof === undefined || proof.verdict === 'understood';
}
