import type { Heard, Interpreter } from './dialect.js';
import { type Outcome, type ScpiCommand, order, question } from './scpi-commands.js';
import { ErrorQueue, ScpiErrorNumber } from './scpi-errors.js';
import { matchesHeader } from './scpi-header.js';
import { type MessageUnit, unitsOf } from './scpi-message.js';

/** What every SCPI instrument understands, and the commands of this one. */
export interface ScpiVocabulary {
  readonly identity: string;
  /** What *RST does beside nothing. */
  readonly reset: () => void;
  /** They come before the common ones, where both have a word. */
  readonly commands: readonly ScpiCommand[];
}

/**
 * An instrument that speaks SCPI: units of a message in order, each header counted from where the one before
 * left off (SCPI-99, volume 1, 6.2.4), replies joined by semicolons, every complaint on the error queue.
 */
export class ScpiInterpreter implements Interpreter {
  readonly #errors = new ErrorQueue();
  readonly #commands: readonly ScpiCommand[];

  constructor({ identity, reset, commands }: ScpiVocabulary) {
    this.#commands = [
      ...commands,
      question('*IDN', () => identity),
      question('*OPC', () => '1'),
      question('*TST', () => '0'),
      order('*RST', reset),
      order('*WAI', () => undefined),
      order('*CLS', () => {
        this.#errors.clear();
      }),
      question('SYSTem:ERRor[:NEXT]', () => this.#errors.next()),
      question('SYSTem:VERSion', () => '1999.0'),
      order('SYSTem:REMote', () => undefined),
      order('SYSTem:LOCal', () => undefined),
    ];
  }

  hear(message: string): Heard {
    const replies: string[] = [];
    let understood = true;
    let path: readonly string[] = [];
    for (const unit of unitsOf(message)) {
      const outcome = unit === undefined ? syntaxError : this.#perform(unit, path);
      if (outcome.kind === 'reply') replies.push(outcome.text);
      if (outcome.kind === 'error') {
        this.#errors.push(outcome.number);
        understood = false;
      }
      if (unit !== undefined) path = pathAfter(unit, path);
    }
    return { reply: replies.length > 0 ? replies.join(';') : undefined, understood };
  }

  overrun(): void {
    this.#errors.push(ScpiErrorNumber.inputOverrun);
  }

  #perform(unit: MessageUnit, path: readonly string[]): Outcome {
    const spoken = startsAtRoot(unit) ? unit.nodes : [...path, ...unit.nodes];
    for (const command of this.#commands) {
      const perform = unit.query ? command.ask : command.tell;
      if (perform !== undefined && matchesHeader(command.header, spoken)) return perform(unit.parameters);
    }
    return { kind: 'error', number: ScpiErrorNumber.undefinedHeader };
  }
}

const syntaxError: Outcome = { kind: 'error', number: ScpiErrorNumber.syntax };

function isCommon({ nodes }: MessageUnit): boolean {
  return nodes[0]?.startsWith('*') === true;
}

function startsAtRoot(unit: MessageUnit): boolean {
  return unit.absolute || isCommon(unit);
}

/** A common command leaves the path where it was. */
function pathAfter(unit: MessageUnit, path: readonly string[]): readonly string[] {
  if (isCommon(unit)) return path;
  return [...(unit.absolute ? [] : path), ...unit.nodes.slice(0, -1)];
}
