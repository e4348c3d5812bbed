import { closeSync, openSync, rmSync, statfsSync, writeFileSync, writeSync } from 'node:fs';
import { join } from 'node:path';
import { messageOf } from '../errors/message-of.js';
import { dialogueHeader, dialogueLine } from '../instrument/dialogue-record.js';
import type { TraceOf } from '../instrument/traced-connection.js';
import { answerLine, answersHeader, type RecordedAnswer } from '../run/answers-record.js';

const answersFile = 'operator.jsonl';
/** Until there is a folder: what an instrument says while the bench is opened is a few hundred bytes. */
const mostHeld = 16 * 1024 * 1024;
/** Left free for the journal: on a full disk it is not for the trace to have the last of the room. */
const leftFree = 4 * 1024 * 1024;
/** So much is written before the room is looked at again. */
const lookEvery = 64 * 1024;

/**
 * The trace of one run: `<post>.jsonl` for each instrument and `operator.jsonl` for the person, in a folder of
 * its own. A line is handed to the operating system as soon as it is noted, so that it survives our death; none
 * is flushed to the disk: a trace is a diagnosis, the journal is the evidence. It grows by about 340 bytes a reading,
 * with the settings and error queues in between: about as much as the journal.
 *
 * Whatever goes wrong with it must not disturb the run: then the trace is given up, told once, and removed, so
 * that the record has the room.
 */
export class TraceFiles {
  readonly #tell: (text: string) => void;
  readonly #held: { readonly name: string; readonly line: string }[] = [];
  #heldSize = 0;
  #untilLook = 0;
  #folder: string | undefined;
  readonly #files = new Map<string, number>();
  /** Those that have their first line. */
  readonly #begun = new Set<string>();
  #over = false;

  constructor(tell: (text: string) => void) {
    this.#tell = tell;
  }

  /** Where it is, once it is anywhere. */
  get folder(): string | undefined {
    return this.#folder;
  }

  /** What is noted of the instrument at a post. */
  readonly of: TraceOf = (post, address) => (entry) => {
    this.#note(`${post}.jsonl`, dialogueHeader(address), dialogueLine(entry));
  };

  readonly answer = (answer: RecordedAnswer): void => {
    this.#note(answersFile, answersHeader, answerLine(answer));
  };

  /** Makes the folder, where there is none yet, and puts there what was held, beside those files. Never throws. */
  keepIn(make: () => string, beside: () => Readonly<Record<string, string>>): void {
    if (this.#over || this.#folder !== undefined) return;
    this.#unlessItFails(() => {
      const folder = make();
      this.#folder = folder;
      for (const [name, text] of Object.entries(beside())) writeFileSync(join(folder, name), text);
      this.#append(answersFile, this.#first(answersFile, answersHeader));
      for (const { name, line } of this.#held) this.#append(name, line);
      this.#held.length = 0;
    });
  }

  /** Nothing more is noted. */
  close(): void {
    this.#over = true;
    for (const file of this.#files.values()) closeSync(file);
    this.#files.clear();
  }

  #note(name: string, header: string, line: string): void {
    if (this.#over) return;
    const lines = this.#first(name, header) + line;
    this.#unlessItFails(() => {
      if (this.#folder === undefined) this.#hold(name, lines);
      else this.#append(name, lines);
    });
  }

  /** A file's first line, once. */
  #first(name: string, header: string): string {
    if (this.#begun.has(name)) return '';
    this.#begun.add(name);
    return header;
  }

  #hold(name: string, line: string): void {
    this.#heldSize += line.length;
    if (this.#heldSize > mostHeld) throw new Error(`more than ${mostHeld} bytes before the run began`);
    this.#held.push({ name, line });
  }

  #append(name: string, lines: string): void {
    let file = this.#files.get(name);
    if (file === undefined) {
      file = openSync(join(this.#folder ?? '.', name), 'a');
      this.#files.set(name, file);
    }
    const bytes = Buffer.from(lines);
    this.#untilLook -= bytes.length;
    if (this.#untilLook <= 0) this.#lookAtRoom();
    for (let written = 0; written < bytes.length;) written += writeSync(file, bytes, written);
  }

  #lookAtRoom(): void {
    this.#untilLook = lookEvery;
    const { bavail, bsize } = statfsSync(this.#folder ?? '.');
    if (bavail * bsize < leftFree) throw new Error('less than 4 MiB are free there');
  }

  #unlessItFails(work: () => void): void {
    try {
      work();
    } catch (error) {
      this.#giveUp(messageOf(error));
    }
  }

  #giveUp(why: string): void {
    this.#held.length = 0;
    try {
      this.close();
      if (this.#folder !== undefined) rmSync(this.#folder, { recursive: true, force: true });
    } catch {
      // It only takes space; why it was given up is what matters.
    }
    this.#folder = undefined;
    this.#tell(`the trace is given up and removed, so that the record has the room: ${why}`);
  }
}
