import { existsSync, mkdirSync, readdirSync, readFileSync, symlinkSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { makeRunFolder, replaceFile, runFolderAt, writeHeader } from '../../src/record/run-folder.js';
import { someHeader } from './some-header.js';
import { temporaryFolder } from './some-run.js';

const place = temporaryFolder();
const began = new Date('2026-11-20T09:00:00.250Z');
const make = (runs: string): string => makeRunFolder(runs, began, 'K1', 'real-limit').name;

describe('the folder of a run', () => {
  it('is named by the time in UTC, the module and the procedure, and is made with the folder around it', () => {
    const folder = makeRunFolder(place('new/runs'), began, 'K1', 'real-limit');
    expect(folder).toEqual(runFolderAt(join(place('new/runs'), '20261120T090000Z-K1-real-limit')));
    expect(readdirSync(folder.path)).toEqual([]);
  });

  it('has a name of its own when several runs begin in one second', () => {
    const names = [make(place('busy')), make(place('busy')), make(place('busy'))];
    const first = '20261120T090000Z-K1-real-limit';
    expect(names).toEqual([first, `${first}-2`, `${first}-3`]);
    expect(readdirSync(place('busy')).sort()).toEqual(names);
  });

  it('says which path is in the way when a file has the name of the runs folder', () => {
    writeFileSync(place('file'), '');
    expect(() => make(place('file'))).toThrow(
      expect.objectContaining({
        exitCode: 74,
        message: `${place('file')} can't be written: something of that name is there already`,
      }),
    );
    expect(() => make(place('file/runs'))).toThrow(/can't be written: a part of the path is not a folder$/);
  });
});

describe('run.json', () => {
  it('is written once and never again', () => {
    const folder = makeRunFolder(place('headers'), began, 'K1', 'real-limit');
    writeHeader(folder, someHeader);
    const text = readFileSync(join(folder.path, 'run.json'), 'utf8');
    expect(JSON.parse(text)).toEqual(someHeader);
    expect(() => {
      writeHeader(folder, { ...someHeader, began: 'later' });
    }).toThrow(expect.objectContaining({ code: 'RECORD_WRITE', path: join(folder.path, 'run.json') }));
    expect(readFileSync(join(folder.path, 'run.json'), 'utf8')).toBe(text);
  });
});

describe('a file that can be made again', () => {
  it('takes the place of the one before it', () => {
    replaceFile(place('findings.json'), 'first, and longer');
    replaceFile(place('findings.json'), 'second');
    expect(readFileSync(place('findings.json'), 'utf8')).toBe('second');
    expect(existsSync(`${place('findings.json')}.new`)).toBe(false);
  });

  it.skipIf(!existsSync('/dev/full'))('stays as it was when the disk is full', () => {
    mkdirSync(place('full'));
    const path = place('full/findings.json');
    replaceFile(path, 'good');
    symlinkSync('/dev/full', `${path}.new`);
    expect(() => {
      replaceFile(path, 'better');
    }).toThrow(
      expect.objectContaining({ exitCode: 74, message: `${path} can't be written: the disk is full` }),
    );
    expect(readFileSync(path, 'utf8')).toBe('good');
    expect(readdirSync(place('full'))).toEqual(['findings.json']);
  });
});
