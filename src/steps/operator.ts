import type { Dimension } from '../quantity/quantity.js';
import type { Acknowledgement } from '../record/journal-event.js';

/** Something that the person at the bench is asked to do or to read. */
export interface OperatorRequest {
  /** The step's name for the answer. */
  readonly name: string;
  readonly text: string;
  /** The act that is asked for, so that a simulated operator can do it: `cycle input`. */
  readonly act?: string;
  readonly answer: 'done' | 'text' | Dimension;
}

/** The person at the bench, or the one simulated with it. */
export interface Operator {
  /** Whether there is anyone who can be asked to do things. */
  readonly present: boolean;
  /** Shows a caution and waits for it to be acknowledged. @throws the signal's reason when the run is stopped. */
  acknowledge(caution: string, text: string, signal: AbortSignal): Promise<Acknowledgement | 'refused'>;
  /** The answer as text; quantities with their unit. @throws the signal's reason when the run is stopped. */
  ask(request: OperatorRequest, signal: AbortSignal): Promise<string>;
}
