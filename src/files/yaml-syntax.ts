import type { Document } from '../libraries/yaml.js';

/** Something wrong with the text itself, at an offset in it. */
export interface TextProblem {
  readonly offset: number;
  readonly message: string;
}

/**
 * What the parser has to say, in our words where the matter is common. A syntax error tends to draw
 * others after it, so the first one is told alone.
 */
export function syntaxProblem(document: Document): TextProblem | undefined {
  const [error] = [...document.errors, ...document.warnings];
  if (error !== undefined) return { offset: error.pos[0], message: plainWords(error.code, error.message) };
  const version = document.directives?.yaml.explicit === true ? document.directives.yaml.version : '1.2';
  if (version !== '1.2') return { offset: 0, message: `YAML ${version} is not read, only YAML 1.2` };
  return undefined;
}

function plainWords(code: string, message: string): string {
  if (message.includes('call stack')) return 'nested too deeply';
  return inOurWords[code] ?? `not valid YAML: ${message.split('\n', 1)[0] ?? ''}`;
}

const inOurWords: Readonly<Record<string, string>> = {
  MULTIPLE_DOCS: "a second document begins here ('---'); a file holds one",
  NON_STRING_KEY: 'a key must be a plain text',
  TAB_AS_INDENT: 'a tab stands here as indentation; YAML wants spaces',
  BLOCK_AS_IMPLICIT_KEY: "not valid YAML: a second ': ' on one line; put a text that holds one in quotes",
  TAG_RESOLVE_FAILED: "tags such as '!name' are not read here",
  UNEXPECTED_TOKEN: 'not valid YAML: something stands here that does not belong',
  MISSING_CHAR: 'not valid YAML: a quote, bracket, comma or colon is missing about here',
  BAD_INDENT: 'not valid YAML: wrong indentation, or a bracket that is not closed before here',
};
