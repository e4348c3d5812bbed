import { RailproofError } from '../errors/railproof-error.js';

/**
 * An error as it is shown: what happened, then what to do next. One line, unless there are several
 * problems, which are a line each. Control characters never reach the terminal.
 */
export function errorText(error: unknown): string {
  if (!(error instanceof RailproofError)) {
    const text = error instanceof Error ? (error.stack ?? error.message) : String(error);
    return `railproof: a fault of ours, please report it: ${printable(text)}`;
  }
  const message = printable(error.message);
  if (error.advice === undefined) return message;
  const advice = printable(sentence(error.advice));
  if (message.includes('\n')) return `${message}\n${advice}`;
  return /[.!?]$/.test(message) ? `${message} ${advice}` : `${message}. ${advice}`;
}

function sentence(text: string): string {
  const capital = text.replace(/^./u, (first) => first.toUpperCase());
  return /[.!?]$/.test(capital) ? capital : `${capital}.`;
}

function printable(text: string): string {
  // eslint-disable-next-line no-control-regex -- they are what is looked for
  return text.replace(/[\u0000-\u0009\u000b-\u001f\u007f-\u009f]/g, (character) => {
    return `\\x${character.charCodeAt(0).toString(16).padStart(2, '0')}`;
  });
}
