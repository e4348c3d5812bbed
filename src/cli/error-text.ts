import { RailproofError } from '../errors/railproof-error.js';
import { printableLines } from '../quantity/printable.js';

/**
 * An error as it is shown: what happened, then what to do next. One line, unless there are several
 * problems, which are a line each. Control characters never reach the terminal.
 */
export function errorText(error: unknown): string {
  if (!(error instanceof RailproofError)) {
    const text = error instanceof Error ? (error.stack ?? error.message) : String(error);
    return `railproof: a fault of ours, please report it: ${printableLines(text)}`;
  }
  const message = printableLines(error.message);
  if (error.advice === undefined) return message;
  const advice = printableLines(sentence(error.advice));
  if (message.includes('\n')) return `${message}\n${advice}`;
  return /[.!?]$/.test(message) ? `${message} ${advice}` : `${message}. ${advice}`;
}

function sentence(text: string): string {
  const capital = text.replace(/^./u, (first) => first.toUpperCase());
  return /[.!?]$/.test(capital) ? capital : `${capital}.`;
}
