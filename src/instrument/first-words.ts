/** What the bytes that came for one question say of how an instrument speaks; undefined where they do not. */
export interface FirstWords {
  /** It repeats what it is sent before it answers. */
  readonly echo: boolean;
  /** What stands behind the reply and its end: it will take the next message. */
  readonly prompt: string | undefined;
  /** The first line that is no echo; undefined where there is none. */
  readonly reply: string | undefined;
  readonly replyEnd: '\r\n' | '\n' | '\r' | undefined;
}

const lineEnd = /\r\n|\n|\r/;

/**
 * Looks at all that came after one question that is answered by one line: `text`, a character a byte.
 * @example firstWords('*IDN?\r\nNURSERY,LOAD\r\n> ', '*IDN?'); // an echo, `\r\n` ends, a prompt "> "
 */
export function firstWords(text: string, question: string): FirstWords {
  const echo = text.replace(/^[\r\n]+/, '').startsWith(question);
  const rest = echo ? text.slice(text.indexOf(question) + question.length) : text;
  const { line: reply, end: replyEnd, after } = nextLine(rest.replace(/^[\r\n]+/, ''));
  return {
    echo,
    prompt: isPrompt(after) ? after : undefined,
    reply: reply.trim() === '' ? undefined : reply,
    replyEnd,
  };
}

function nextLine(text: string): {
  readonly line: string;
  readonly end: FirstWords['replyEnd'];
  readonly after: string;
} {
  const found = lineEnd.exec(text);
  if (found === null) return { line: text, end: undefined, after: '' };
  const end = found[0] as Exclude<FirstWords['replyEnd'], undefined>;
  return { line: text.slice(0, found.index), end, after: text.slice(found.index + end.length) };
}

/** As a driver file may write it: short, and it ends in something that is seen and has no end of line. */
function isPrompt(text: string): boolean {
  return /^[\x20-\x7e\r\n]{0,19}[\x21-\x7e] {0,4}$/.test(text);
}
