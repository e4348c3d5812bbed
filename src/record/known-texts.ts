interface Known {
  readonly text: string;
  readonly bytes: Uint8Array;
}

/** So many are known at most: a text that falls on the place of another takes it. */
const places = 256;

/** Texts that come again and again, made once: the same bytes give the same string, without a new one each time. */
export class KnownTexts {
  readonly #known: (Known | undefined)[] = new Array<Known | undefined>(places).fill(undefined);

  /** The text of these bytes, of which each is a character of ASCII. */
  from(bytes: Uint8Array, start: number, end: number): string {
    let hash = 0;
    for (let at = start; at < end; at += 1) hash = (Math.imul(hash, 31) + (bytes[at] ?? 0)) | 0;
    const place = hash & (places - 1);
    const there = this.#known[place];
    if (there !== undefined && isSame(there.bytes, bytes, start, end)) return there.text;
    // The bytes are of a block, in whose place the next one comes.
    const own = Uint8Array.from(bytes.subarray(start, end));
    const text = Buffer.from(own).toString('latin1');
    this.#known[place] = { text, bytes: own };
    return text;
  }
}

function isSame(own: Uint8Array, bytes: Uint8Array, start: number, end: number): boolean {
  if (own.length !== end - start) return false;
  for (let index = 0; index < own.length; index += 1) {
    if (own[index] !== bytes[start + index]) return false;
  }
  return true;
}
