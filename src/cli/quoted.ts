/** As a shell takes it for one word. */
export function quoted(path: string): string {
  return /^[\w./:@+-]+$/.test(path) ? path : `'${path.replaceAll("'", String.raw`'\''`)}'`;
}
