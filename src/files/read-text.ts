import { open } from 'node:fs/promises';
import { BadFileError, MissingFileError } from './file-error.js';
import { largestFile, tooLarge } from './file-size.js';

/** What was read from a user's file: its meaning, and the text, byte for byte, that goes into the record. */
export interface FileRead<T> {
  readonly value: T;
  readonly text: string;
  readonly path: string;
}

/**
 * Reads a file whole and gives it to `parse` with its path, by which messages will call it.
 * @throws MissingFileError, BadFileError
 */
export async function readAndParse<T>(
  path: string,
  parse: (text: string, fileName: string) => T | Promise<T>,
): Promise<FileRead<T>> {
  const text = decode(await readBounded(path), path);
  return { value: await parse(text, path), text, path };
}

async function readBounded(path: string): Promise<Uint8Array> {
  const chunks: Uint8Array[] = [];
  let size = 0;
  try {
    const file = await open(path);
    try {
      // By hand, not with readFile: a device or a pipe has no size to ask for and may never end.
      for (;;) {
        const { bytesRead, buffer } = await file.read(new Uint8Array(64 * 1024));
        if (bytesRead === 0) break;
        size += bytesRead;
        if (size > largestFile) {
          throw new BadFileError([{ file: path, line: 1, column: 1, path: '', message: tooLarge }]);
        }
        chunks.push(buffer.subarray(0, bytesRead));
      }
    } finally {
      await file.close();
    }
  } catch (error) {
    throw asMissing(error, path);
  }
  return Buffer.concat(chunks, size);
}

function decode(bytes: Uint8Array, path: string): string {
  try {
    return new TextDecoder('utf-8', { fatal: true, ignoreBOM: true }).decode(bytes);
  } catch (error) {
    const lenient = new TextDecoder().decode(bytes);
    const before = lenient.slice(0, Math.max(0, lenient.indexOf('\ufffd'))).split('\n');
    const column = (before.at(-1)?.length ?? 0) + 1;
    const message = 'not valid UTF-8 text; save the file as UTF-8, if it is the file that was meant';
    throw new BadFileError([{ file: path, line: before.length, column, path: '', message }], {
      cause: error,
    });
  }
}

function asMissing(error: unknown, path: string): unknown {
  const code = error instanceof Error && 'code' in error ? error.code : undefined;
  const reasons: Record<string, string> = {
    ENOENT: 'there is no such file',
    ENOTDIR: 'there is no such file',
    EISDIR: 'this is a folder, not a file',
    EACCES: 'this file may not be read by you',
    EPERM: 'this file may not be read by you',
    ENAMETOOLONG: 'the name is too long',
    ELOOP: 'its links go round in a circle',
    ERR_INVALID_ARG_VALUE: 'there is no such file',
  };
  const reason = typeof code === 'string' ? reasons[code] : undefined;
  return reason === undefined ? error : new MissingFileError(path, reason, { cause: error });
}
