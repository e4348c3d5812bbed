import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import * as railproof from '../src/index.js';
import { keptOf } from './cli/kept-drawer.js';

const {
  buildAsJson,
  buildAsText,
  buildParallel,
  outcomeOf,
  plainStyle,
  profilesOf,
  readRecords,
  requireAll,
} = railproof;

describe('the library', () => {
  it('builds on records as its docstring shows', () => {
    const records = readRecords([...keptOf('K1', 'real-limit'), ...keptOf('K2', 'real-limit')]);
    const modules = requireAll(profilesOf(records, new Date('2026-12-03')));
    const ballast = { kind: 'for-imbalance', most: 0.1 } as const;
    const group = buildParallel(modules, { ballast, tolerance: 0.01, load: 6 });
    expect(outcomeOf(group)).toBe('may-be-built');
    expect(group.recommended.current).toBeGreaterThan(6);
    expect(group.parts.length).toBeGreaterThan(0);
    expect(buildAsText(group, plainStyle)).toContain('May be built: K1 and K2 side by side');
    expect(buildAsJson(group)).toMatchObject({ format: 'railproof/combination 1' });
  });

  it('has every name that its docstring uses', () => {
    const docstring = /\/\*\*[\s\S]*?\*\//.exec(readFileSync('src/index.ts', 'utf8'))?.[0] ?? '';
    const called = [...docstring.matchAll(/(?<![.\w])(?:new |await )?([a-zA-Z]+)\(/g)].map(
      ([, name]) => name,
    );
    const known = new Set(Object.keys(railproof));
    const ours = called.filter((name) => name !== undefined && !['AbortController', 'Date'].includes(name));
    expect(ours.length).toBeGreaterThan(8);
    expect(
      ours.filter(
        (name) => !known.has(name ?? '') && !['stepBegan', 'progress', 'noticed'].includes(name ?? ''),
      ),
    ).toEqual([]);
  });
});
