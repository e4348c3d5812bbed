/** What was read, and where: the part of a reading that comes again and again as it is. */
export interface ReadingSource {
  readonly of: string;
  readonly what: string;
  readonly at?: string;
}

interface Known {
  readonly source: ReadingSource;
  /** As it stands in the line, from behind the number of the sample to before the value. */
  readonly bytes: Uint8Array;
  /** The one that stood in the next line, the last time. */
  next: Known | undefined;
}

/** So many are known at most: four readings each of 24 modules, and room to spare. */
const mostKnown = 128;
const longest = 512;
const form = /^,"of":"([ !#-[\]-~]*)","what":"([ !#-[\]-~]*)"(?:,"at":"([ !#-[\]-~]*)")?,"value":$/;
const valueAhead = Buffer.from('"value":');

/**
 * The sources of readings, told by their bytes. Readings go round: the one that came after another the last time is
 * tried first, so that hardly any is looked for, and no text is made twice.
 */
export class ReadingSources {
  readonly #known: Known[] = [];
  #last: Known | undefined;
  #end = 0;

  /** Behind the source that was told last, where the value begins. */
  get end(): number {
    return this.#end;
  }

  /** The source that stands there; undefined where it is none in the plain form, or there are too many. */
  at(bytes: Uint8Array, start: number): ReadingSource | undefined {
    const expected = this.#last?.next;
    const known =
      expected !== undefined && standsAt(bytes, start, expected.bytes)
        ? expected
        : (this.#known.find((one) => standsAt(bytes, start, one.bytes)) ?? this.#newAt(bytes, start));
    if (known === undefined) return undefined;
    if (this.#last !== undefined) this.#last.next = known;
    this.#last = known;
    this.#end = start + known.bytes.length;
    return known.source;
  }

  #newAt(bytes: Uint8Array, start: number): Known | undefined {
    if (this.#known.length === mostKnown) return undefined;
    // Copied: in the place of these bytes there will be others.
    const ahead = Buffer.from(bytes.subarray(start, start + longest));
    const value = ahead.indexOf(valueAhead);
    if (value === -1) return undefined;
    const own = ahead.subarray(0, value + valueAhead.length);
    const [, of, what, at] = form.exec(own.toString('latin1')) ?? [];
    if (of === undefined || what === undefined) return undefined;
    const source = at === undefined ? { of, what } : { of, what, at };
    const known: Known = { source, bytes: Uint8Array.from(own), next: undefined };
    this.#known.push(known);
    return known;
  }
}

function standsAt(bytes: Uint8Array, start: number, own: Uint8Array): boolean {
  // They begin alike and end alike; told apart soonest where they differ.
  for (let index = own.length - 1; index >= 0; index -= 1) {
    if (bytes[start + index] !== own[index]) return false;
  }
  return true;
}
