/** A text as one word of bash and zsh, in which nothing is expanded. */
export function shellQuoted(text: string): string {
  return `'${text.replaceAll("'", `'\\''`)}'`;
}

/** The same for fish, where a backslash in such quotes means something too. */
export function fishQuoted(text: string): string {
  return `'${text.replace(/[\\']/g, '\\$&')}'`;
}

export function onceEach(words: readonly string[]): readonly string[] {
  return [...new Set(words)];
}
