import { mkdir, mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, expect, it } from 'vitest';
import { readAndParse } from '../../src/files/read-text.js';

let folder = '';
beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'railproof-files-'));
});
afterEach(async () => {
  await rm(folder, { recursive: true });
});

const reading = (path: string) => readAndParse(path, (text, name) => ({ text, name }));

it('a file is given with its text, byte for byte, from which the hash in a record is taken', async () => {
  const path = join(folder, 'K1.yaml');
  const bytes = Buffer.from('\ufeffrailproof: module 1\nambient: 40 °C\r\n');
  await writeFile(path, bytes);
  const read = await reading(path);
  expect(read.value).toEqual({ text: bytes.toString(), name: path });
  expect(read.text).toBe(bytes.toString());
  expect(Buffer.from(read.text)).toEqual(bytes);
});

it('a file that is not there is missing', async () => {
  const path = join(folder, 'K9.yaml');
  await expect(reading(path)).rejects.toMatchObject({
    code: 'MISSING_FILE',
    exitCode: 66,
    message: `${path}: there is no such file`,
  });
  await expect(reading(join(path, 'deeper.yaml'))).rejects.toMatchObject({ code: 'MISSING_FILE' });
  await expect(reading('a\0b')).rejects.toMatchObject({ code: 'MISSING_FILE' });
});

it('a folder is not a file', async () => {
  const path = join(folder, 'modules');
  await mkdir(path);
  await expect(reading(path)).rejects.toMatchObject({ message: `${path}: this is a folder, not a file` });
});

it('a file in another encoding is refused where it first shows', async () => {
  const path = join(folder, 'latin.yaml');
  await writeFile(path, Buffer.from('name: K1\nambient: 40 °C\n', 'latin1'));
  await expect(reading(path)).rejects.toMatchObject({
    code: 'BAD_FILE',
    message: `${path}:2:13: not valid UTF-8 text; save the file as UTF-8, if it is the file that was meant`,
  });
});

it('a file that is far too large is refused without being read to its end', async () => {
  const message = '/dev/zero:1:1: larger than 256 KiB; is this the right file?';
  await expect(reading('/dev/zero')).rejects.toMatchObject({ code: 'BAD_FILE', message });
});
