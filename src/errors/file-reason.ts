import { messageOf } from './message-of.js';

const reasons: Readonly<Record<string, string>> = {
  ENOSPC: 'the disk is full',
  EDQUOT: 'the disk quota is used up',
  EACCES: 'permission is missing',
  EPERM: 'permission is missing',
  EROFS: 'the file system is read-only',
  ENOENT: 'there is no such file or folder',
  ENOTDIR: 'a part of the path is not a folder',
  EEXIST: 'something of that name is there already',
  EFBIG: 'it is larger than a file may be here',
  EISDIR: 'it is a folder',
  EIO: 'the disk reports an error',
};

/** What the file system complains of, in words; the code of what has none here. */
export function fileReason(cause: unknown): string {
  const code = (cause as { code?: unknown } | undefined)?.code;
  if (typeof code === 'string') return reasons[code] ?? code;
  return messageOf(cause);
}
