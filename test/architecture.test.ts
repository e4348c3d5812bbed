import { readdirSync, readFileSync } from 'node:fs';
import { dirname, join, relative, sep } from 'node:path';
import { fileURLToPath } from 'node:url';
import ts from 'typescript';
import { describe, expect, it } from 'vitest';

const source = fileURLToPath(new URL('../src', import.meta.url));
const { mayImport, pure } = (await import(new URL('../eslint.config.js', import.meta.url).href)) as {
  mayImport: Record<string, readonly string[]>;
  pure: readonly string[];
};

interface Import {
  readonly file: string;
  readonly room: string;
  readonly specifier: string;
  /** Undefined for a package. */
  readonly to: string | undefined;
}

const imports = readdirSync(source, { recursive: true, encoding: 'utf8' })
  .filter((file) => file.endsWith('.ts') && file.includes(sep))
  .flatMap(importsOf);

function importsOf(file: string): Import[] {
  const text = readFileSync(join(source, file), 'utf8');
  return ts.preProcessFile(text, true, true).importedFiles.map(({ fileName }) => ({
    file,
    room: roomOf(file),
    specifier: fileName,
    to: fileName.startsWith('.')
      ? roomOf(relative(source, join(source, dirname(file), fileName)))
      : undefined,
  }));
}

function roomOf(file: string): string {
  return file.split(sep)[0] ?? '';
}

describe('imports point one way', () => {
  it('every room stands in the table, and the table names no other', () => {
    const rooms = readdirSync(source, { withFileTypes: true })
      .filter((entry) => entry.isDirectory())
      .map((entry) => entry.name);
    expect([...Object.keys(mayImport), 'cli'].sort()).toEqual(rooms.sort());
  });

  it('no room imports a room that it may not know', () => {
    const forbidden = imports.filter(
      ({ room, to }) => to !== undefined && to !== room && room !== 'cli' && !mayImport[room]?.includes(to),
    );
    expect(forbidden).toEqual([]);
  });

  it('the table itself has no circle', () => {
    const reaches = (from: string, to: string, seen = new Set<string>()): boolean =>
      (mayImport[from] ?? []).some((next) => {
        if (next === to) return true;
        if (seen.has(next)) return false;
        seen.add(next);
        return reaches(next, to, seen);
      });
    expect(Object.keys(mayImport).filter((room) => reaches(room, room))).toEqual([]);
  });

  it('only the wiring knows the simulation', () => {
    const outside = imports.filter(({ room, to }) => to === 'simulation' && room !== 'simulation');
    expect(new Set(outside.map(({ room }) => room))).toEqual(new Set(['cli']));
  });

  it('the drive side and the understand side do not know each other', () => {
    const drive = ['instrument', 'bench', 'steps', 'run', 'files', 'simulation'];
    const understand = ['analysis', 'judgement', 'report'];
    const across = imports.filter(
      ({ room, to }) =>
        to !== undefined &&
        ((drive.includes(room) && understand.includes(to)) ||
          (understand.includes(room) && drive.includes(to))),
    );
    expect(across).toEqual([]);
  });

  it('rooms that only compute import nothing of Node', () => {
    expect(
      imports.filter(({ room, specifier }) => pure.includes(room) && specifier.startsWith('node:')),
    ).toEqual([]);
  });

  it.each([
    ['serialport', 'instrument'],
    ['yaml', 'libraries'],
    ['zod', 'libraries'],
    ['csv-stringify', 'record'],
    ['simple-statistics', 'statistics'],
    ['fastest-levenshtein', 'quantity'],
    ['d3-scale', 'report'],
    ['d3-shape', 'report'],
    ['commander', 'cli'],
  ])('%s is known in one room only: %s', (name, room) => {
    const users = imports.filter(({ specifier }) => specifier === name || specifier.startsWith(`${name}/`));
    expect(users.length).toBeGreaterThan(0);
    expect(new Set(users.map((user) => user.room))).toEqual(new Set([room]));
  });
});
