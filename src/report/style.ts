/** How words are made to stand out; the words themselves carry the meaning. */
export interface Style {
  strong(text: string): string;
  warn(text: string): string;
  faint(text: string): string;
}

export const plainStyle: Style = { strong: (text) => text, warn: (text) => text, faint: (text) => text };

export const terminalStyle: Style = {
  strong: (text) => `\u001b[1m${text}\u001b[22m`,
  warn: (text) => `\u001b[1;33m${text}\u001b[0m`,
  faint: (text) => `\u001b[2m${text}\u001b[22m`,
};

/** Plain without a terminal, and where NO_COLOR is set to anything (no-color.org). */
export function styleFor(stream: { readonly isTTY?: boolean }, environment: NodeJS.ProcessEnv): Style {
  const refused = environment['NO_COLOR'] !== undefined && environment['NO_COLOR'] !== '';
  return stream.isTTY === true && !refused ? terminalStyle : plainStyle;
}
