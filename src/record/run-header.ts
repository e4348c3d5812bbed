import { createHash } from 'node:crypto';
import { existsSync } from 'node:fs';
import { join } from 'node:path';
import type * as z from '../libraries/zod.js';
import { OddFileError, readWhole } from './read-whole.js';
import { BadRecordError, NoRecordError } from './record-error.js';
import { headerSchema } from './run-header-schema.js';

export { headerFormat } from './run-header-schema.js';

export type RunHeader = Readonly<z.infer<typeof headerSchema>>;

export interface HeaderRead {
  readonly header: RunHeader;
  /** Of the file as it is now. */
  readonly sha256: string;
}

/** @throws NoRecordError, BadRecordError */
export function readHeader(folder: string): HeaderRead {
  const path = join(folder, 'run.json');
  let text: string;
  try {
    text = readWhole(path);
  } catch (cause) {
    if (cause instanceof OddFileError) throw new NoRecordError(path, cause);
    throw new NoRecordError(folder, existsSync(folder) && !existsSync(path) ? undefined : cause);
  }
  const sha256 = createHash('sha256').update(text).digest('hex');
  return { header: parseHeader(text, path), sha256 };
}

function parseHeader(text: string, path: string): RunHeader {
  let data: unknown;
  try {
    data = JSON.parse(text);
  } catch {
    throw new BadRecordError(path, 'it is not JSON');
  }
  const parsed = headerSchema.safeParse(data);
  if (parsed.success) return parsed.data;
  const [issue] = parsed.error.issues;
  const where = issue === undefined || issue.path.length === 0 ? '' : `${issue.path.join('.')}: `;
  throw new BadRecordError(path, `${where}${issue?.message ?? 'it is unreadable'}`);
}
