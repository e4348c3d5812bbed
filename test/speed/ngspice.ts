import { execFileSync, spawnSync } from 'node:child_process';
import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';

/** V0 − R·I up to the limit, from there on the voltage falls by `beyond` for each ampere; behind a ballast. V, Ω, A. */
export interface Branch {
  readonly voltage: number;
  readonly droop: number;
  readonly limit: number;
  readonly beyond: number;
  readonly ballast: number;
}

/** A load on a group, in A. */
export interface Loaded {
  readonly branches: readonly Branch[];
  readonly load: number;
}

export const isThere = spawnSync('ngspice', ['--version']).error === undefined;

/** As in the circuits of fixtures/reference: what flows back goes through 1 GΩ. */
const options = '.options reltol=1e-9 abstol=1e-11 vntol=1e-10 gmin=1e-15 itl1=2000 itl2=2000 numdgt=12\n';

/** A module whose numbers are voltages of nodes or numbers, and its ballast. */
function moduleLines(name: number, [voltage, droop, limit]: readonly (string | number)[], branch: Branch) {
  const current = `i(Vs${name})`;
  return [
    `B${name} e${name} 0 V = ${voltage} - ${droop}*min(max(${current},0),${limit}) - ${branch.beyond}*max(${current}-${limit},0) - 1e9*min(${current},0)`,
    `Vs${name} e${name} o${name} DC 0`,
    `Rb${name} o${name} bus ${branch.ballast}`,
  ].join('\n');
}

/**
 * One circuit, which is told the numbers of each group and then asked for its operating point. To be run by
 * `currentsPrinted`.
 */
export function oneByOne(folder: string, groups: readonly Loaded[]): string {
  const [first] = groups;
  const circuit = (first?.branches ?? []).map((branch, index) => {
    const sources = ['v', 'r', 'l'].map((of) => `V${of}${index} ${of}${index} 0 DC 1`);
    return [...sources, moduleLines(index, [`v(v${index})`, `v(r${index})`, `v(l${index})`], branch)].join(
      '\n',
    );
  });
  const asked = groups.map(({ branches, load }) => {
    const told = branches.flatMap(({ voltage, droop, limit, ballast }, index) => [
      `alter Vv${index} = ${voltage}`,
      `alter Vr${index} = ${droop}`,
      `alter Vl${index} = ${limit}`,
      `alter Rb${index} = ${ballast}`,
    ]);
    const currents = branches.map((_, index) => `i(Vs${index})`).join(' ');
    return [...told, `alter Iload = ${load}`, 'op', `print ${currents} v(bus)`, 'destroy all'].join('\n');
  });
  const path = join(folder, 'one-by-one.cir');
  writeFileSync(
    path,
    `* groups\n${options}${circuit.join('\n')}\nIload bus 0 DC 0\n.control\nset numdgt=12\n${asked.join('\n')}\nquit\n.endc\n.end\n`,
  );
  return path;
}

/** The branches' currents and the bus, one group after the other. */
export function currentsPrinted(circuit: string): readonly number[] {
  const printed = execFileSync('ngspice', ['-b', circuit], {
    encoding: 'utf8',
    maxBuffer: 2 ** 28,
    stdio: ['ignore', 'pipe', 'ignore'],
  });
  return [...printed.matchAll(/^(?:i\(vs\d+\)|v\(bus\)) = (\S+)$/gm)].map(([, number]) => Number(number));
}

/** One group, whose load climbs from 0 A in even steps. To be run by `sweepRecorded`. */
export function sweep(folder: string, branches: readonly Branch[], steps: number, step: number): string {
  const circuit = branches.map((branch, index) =>
    moduleLines(index, [branch.voltage, branch.droop, branch.limit], branch),
  );
  const currents = branches.map((_, index) => `i(Vs${index})`).join(' ');
  const path = join(folder, 'sweep.cir');
  writeFileSync(
    path,
    `* sweep\n${options}${circuit.join('\n')}\nIload bus 0 DC 0\n.save ${currents} v(bus)\n.dc Iload 0 ${(steps + 0.5) * step} ${step}\n.end\n`,
  );
  return path;
}

/** The load, the branches' currents and the bus at each step, as they stand in the file of numbers it writes. */
export function sweepRecorded(circuit: string): Float64Array {
  const raw = `${circuit}.raw`;
  execFileSync('ngspice', ['-b', '-r', raw, circuit], { stdio: 'ignore' });
  const content = readFileSync(raw);
  const begin = content.indexOf('Binary:\n') + 'Binary:\n'.length;
  return new Float64Array(
    content.buffer.slice(content.byteOffset + begin, content.byteOffset + content.length),
  );
}
