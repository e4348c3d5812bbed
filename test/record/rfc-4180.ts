/**
 * Reads CSV by the grammar of RFC 4180, section 2, and by nothing else: a line ends in CR LF; fields are parted by
 * commas; one with a quote, a comma or an end of line in it is quoted, and a quote in it stands twice; every line has
 * as many fields as the first. The last line has its end here, which the grammar leaves open. Signs beyond ASCII are
 * taken as they are: RFC 7111 makes the character set UTF-8.
 * @throws where the text is not by that grammar
 */
export function rfc4180(text: string): string[][] {
  const field = /(?:"((?:[^"]|"")*)"|([^",\r\n]*))(,|\r\n)/y;
  const lines: string[][] = [];
  let line: string[] = [];
  while (field.lastIndex < text.length) {
    const at = field.lastIndex;
    const [, quoted, plain, end] = field.exec(text) ?? [];
    if (end === undefined)
      throw new Error(`no field of RFC 4180 at ${at}: ${JSON.stringify(text.slice(at, at + 20))}`);
    line.push(quoted === undefined ? (plain ?? '') : quoted.replaceAll('""', '"'));
    if (end === ',') continue;
    if (line.length !== (lines[0] ?? line).length)
      throw new Error(`line ${lines.length + 1} has another width`);
    lines.push(line);
    line = [];
  }
  if (line.length > 0) throw new Error('the last line has no end');
  return lines;
}
