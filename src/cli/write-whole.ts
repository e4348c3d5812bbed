import { rename, rm, writeFile } from 'node:fs/promises';

/** Writes a file whole or not at all, over an older one. @throws what the file system says */
export async function writeWhole(path: string, text: string): Promise<void> {
  const beside = `${path}.${process.pid}.part`;
  try {
    await writeFile(beside, text, { flag: 'wx' });
    await rename(beside, path);
  } catch (error) {
    // Where it can't be taken away it was not written either.
    await rm(beside, { force: true }).catch(() => undefined);
    throw error;
  }
}
