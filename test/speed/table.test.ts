import { expect, it } from 'vitest';
import type { Figure } from './figure.js';
import { figuresAsTable } from './table.js';

const figures: readonly Figure[] = [
  {
    kind: 'measured',
    name: 'starting',
    what: 'railproof --version',
    ours: { value: 118.94, unit: 'ms' },
    rival: { value: 82.21, unit: 'ms', what: 'node -e 0' },
    ratio: 1.4468,
    bound: { atMost: 1.6 },
  },
  {
    kind: 'measured',
    name: 'solving',
    what: 'group solve',
    ours: { value: 2, unit: 'µs' },
    rival: { value: 1500.4, unit: 'µs', what: 'ngspice' },
    ratio: 750.2,
    bound: { atLeast: 1000 },
  },
  {
    kind: 'measured',
    name: 'sweeping',
    what: 'group sweep',
    ours: { value: 0.01, unit: 'µs' },
    rival: { value: 4, unit: 'µs', what: 'ngspice' },
    ratio: 400,
    bound: 'none',
  },
  { kind: 'skipped', name: 'pty', what: 'over a pty', why: 'socat is not here' },
];

it('shows a row for each figure, in columns, and whether it reached its goal', () => {
  const lines = figuresAsTable(figures).trimEnd().split('\n');
  expect(lines).toHaveLength(5);
  const [heads = '', first = '', second = '', third = '', fourth = ''] = lines;
  expect(first).toMatch(/^railproof --version +119 ms +82\.2 ms: node -e 0 +1\.45 +at most 1\.6 +reached$/);
  expect(second).toMatch(/^group solve +2 µs +1500 µs: ngspice +750 +at least 1000 +NOT REACHED$/);
  expect(third).toMatch(/^group sweep .* 400 +none$/);
  expect(fourth).toMatch(/^over a pty +skipped: socat is not here$/);
  expect(first.indexOf('119 ms')).toBe(heads.indexOf('ours'));
  expect(second.indexOf('750 ')).toBe(heads.indexOf('ratio'));
});

it('shows the heads alone where nothing was measured', () => {
  expect(figuresAsTable([]).split('\n')).toHaveLength(2);
});
