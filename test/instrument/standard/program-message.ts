import { StandardError } from './errors.js';
import { type Element, elementAt } from './program-data.js';
import { Text } from './text.js';

/** One unit of a program message (IEEE 488.2, 7.3): a header, and the data behind it. */
export interface Unit {
  readonly kind: 'common' | 'compound';
  /** Began with a colon: counted from the root. */
  readonly fromRoot: boolean;
  /** Of a common header the one word with its asterisk. */
  readonly words: readonly string[];
  readonly isQuery: boolean;
  readonly data: readonly Element[];
}

const longestWord = 12;

/**
 * The units of a message, one after the other: what comes before a mistake is whole. A message may be empty, a
 * unit of several may not.
 * @throws StandardError
 */
export function* programMessage(message: string): Generator<Unit> {
  const text = new Text(message);
  text.skipWhite();
  if (text.isAtEnd()) return;
  for (;;) {
    yield unitAt(text);
    if (text.isAtEnd()) return;
    text.expect(';');
  }
}

function unitAt(text: Text): Unit {
  text.skipWhite();
  const header = headerAt(text);
  const white = text.skipWhite();
  const data: Element[] = [];
  if (!text.isAtEnd() && text.next() !== ';') {
    if (!white) throw new StandardError(text.isAt(/["'(#+\-.,]/) ? -111 : -101);
    do {
      text.skipWhite();
      data.push(elementAt(text));
      text.skipWhite();
    } while (text.takeIf(','));
    if (!text.isAtEnd() && text.next() !== ';') throw new StandardError(-103);
  }
  return { ...header, data };
}

function headerAt(text: Text): Omit<Unit, 'data'> {
  if (text.takeIf('*')) {
    const word = text.take(/[A-Za-z]+/);
    if (word === '') throw new StandardError(-102);
    return { kind: 'common', fromRoot: true, words: [`*${word}`], isQuery: text.takeIf('?') };
  }
  const fromRoot = text.takeIf(':');
  const words: string[] = [];
  do {
    const word = text.take(/[A-Za-z][A-Za-z0-9_]*/);
    if (word === '') throw new StandardError(text.isAtEnd() || text.isAt(/[\w;:?]/) ? -102 : -101);
    if (word.length > longestWord) throw new StandardError(-112);
    words.push(word);
  } while (text.takeIf(':'));
  return { kind: 'compound', fromRoot, words, isQuery: text.takeIf('?') };
}
