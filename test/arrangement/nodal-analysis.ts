import type { Joint } from '../../src/arrangement/stages-wish.js';
import type { Switching } from '../../src/arrangement/switching.js';

const small = { module: 0.01, joint: 0.001, diode: 0.001, leak: 1e-5 };

/**
 * The largest current through any module with no load, in A, by nodal analysis: modules are voltages behind 10 mΩ,
 * what is joined is 1 mΩ, diodes are tried conducting and blocking until all of them agree with what comes out.
 */
export function largestCurrent(
  { sources, diodes }: Pick<Switching, 'sources' | 'diodes'>,
  joints: readonly Joint[],
): number {
  const passing = [...diodes, { name: 'stage', from: 'in-', to: 'in+', forwardVoltage: 0 }];
  const names = [
    ...new Set([
      'in+',
      'in-',
      ...joints.flat(),
      ...sources.flatMap(({ name }) => [`${name}+`, `${name}-`]),
      ...passing.flatMap(({ from, to }) => [from, to]),
    ]),
  ];
  const at = (node: string) => names.indexOf(node);
  for (let tried = 0; tried < 2 ** passing.length; tried += 1) {
    const conducts = passing.map((_, index) => (tried >> index) % 2 === 1);
    const matrix = names.map((_, row) => names.map((__, column) => (row === column ? small.leak : 0)));
    const injected = names.map(() => 0);
    const conductance = (one: string, other: string, value: number) => {
      const [a, b] = [at(one), at(other)];
      add(matrix[a], a, value);
      add(matrix[b], b, value);
      add(matrix[a], b, -value);
      add(matrix[b], a, -value);
    };
    const drive = (from: string, to: string, volts: number, resistance: number) => {
      conductance(from, to, 1 / resistance);
      add(injected, at(to), volts / resistance);
      add(injected, at(from), -volts / resistance);
    };
    for (const [one, other] of joints) conductance(one, other, 1 / small.joint);
    for (const { name, open } of sources) drive(`${name}-`, `${name}+`, open, small.module);
    passing.forEach(({ from, to, forwardVoltage }, index) => {
      if (conducts[index] === true) drive(from, to, -forwardVoltage, small.diode);
    });
    const volts = solved(matrix, injected);
    const across = (from: string, to: string) =>
      (volts[at(from)] ?? Number.NaN) - (volts[at(to)] ?? Number.NaN);
    const agrees = passing.every(({ from, to, forwardVoltage }, index) => {
      const excess = across(from, to) - forwardVoltage;
      return conducts[index] === true ? excess >= -1e-4 : excess <= 1e-4;
    });
    if (!agrees) continue;
    return Math.max(
      ...sources.map(({ name, open }) => Math.abs(open - across(`${name}+`, `${name}-`)) / small.module),
    );
  }
  throw new Error('no state of the diodes agrees with itself');
}

function add(numbers: number[] | undefined, place: number, value: number): void {
  if (numbers !== undefined) numbers[place] = (numbers[place] ?? 0) + value;
}

/** Gauss and Jordan, with the largest pivot. */
function solved(matrix: readonly (readonly number[])[], right: readonly number[]): readonly number[] {
  const left = matrix.map((row, index) => [...row, right[index] ?? 0]);
  const done: number[][] = [];
  for (const column of matrix.keys()) {
    left.sort((one, other) => Math.abs(other[column] ?? 0) - Math.abs(one[column] ?? 0));
    const pivot = left.shift() ?? [];
    for (const row of [...left, ...done]) {
      const factor = (row[column] ?? 0) / (pivot[column] ?? 0);
      for (const [place, value] of pivot.entries()) add(row, place, -factor * value);
    }
    done.push(pivot);
  }
  return done.map((row, index) => (row.at(-1) ?? 0) / (row[index] ?? 0));
}
