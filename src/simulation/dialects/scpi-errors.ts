/** The numbers used here of the list in SCPI-99, volume 2, 21.8. */
export const ScpiErrorNumber = {
  none: 0,
  syntax: -102,
  dataType: -104,
  parameterNotAllowed: -108,
  missingParameter: -109,
  undefinedHeader: -113,
  invalidSuffix: -131,
  outOfRange: -222,
  illegalValue: -224,
  queueOverflow: -350,
  inputOverrun: -363,
} as const;

const texts = new Map<number, string>([
  [ScpiErrorNumber.none, 'No error'],
  [ScpiErrorNumber.syntax, 'Syntax error'],
  [ScpiErrorNumber.dataType, 'Data type error'],
  [ScpiErrorNumber.parameterNotAllowed, 'Parameter not allowed'],
  [ScpiErrorNumber.missingParameter, 'Missing parameter'],
  [ScpiErrorNumber.undefinedHeader, 'Undefined header'],
  [ScpiErrorNumber.invalidSuffix, 'Invalid suffix'],
  [ScpiErrorNumber.outOfRange, 'Data out of range'],
  [ScpiErrorNumber.illegalValue, 'Illegal parameter value'],
  [ScpiErrorNumber.queueOverflow, 'Queue overflow'],
  [ScpiErrorNumber.inputOverrun, 'Input buffer overrun'],
]);

/** The standard asks for two at least; what comes when it is full is lost, and the last entry says so. */
const QUEUE_LENGTH = 16;

/** The error queue: first in, first out. */
export class ErrorQueue {
  #entries: number[] = [];

  push(number: number): void {
    if (this.#entries.length < QUEUE_LENGTH) this.#entries.push(number);
    else this.#entries[QUEUE_LENGTH - 1] = ScpiErrorNumber.queueOverflow;
  }

  /** Takes the oldest, as the reply to SYSTem:ERRor? writes it. */
  next(): string {
    const number = this.#entries.shift() ?? ScpiErrorNumber.none;
    return `${number},"${texts.get(number) ?? 'Device-specific error'}"`;
  }

  clear(): void {
    this.#entries = [];
  }
}
