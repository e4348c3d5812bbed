import { spawnSync } from 'node:child_process';
import { program, root } from '../../whole/railproof.js';
import type { Benchmark, Figure } from '../figure.js';
import { timedSideBySide } from '../side-by-side.js';

export default (async () => [
  await against('starting-for-the-version', ['--version'], 1.6),
  await against('starting-for-a-check', ['check', 'fixtures/modules/K1.yaml'], 3),
]) satisfies Benchmark;

async function against(name: string, args: readonly string[], atMost: number): Promise<Figure> {
  const { ours, rival, ratio } = await timedSideBySide({
    ours: () => {
      node(program, ...args);
    },
    rival: () => {
      node('-e', '0');
    },
    rounds: 25,
    unmeasured: 2,
  });
  return {
    kind: 'measured',
    name,
    what: `railproof ${args.join(' ')}`,
    ours: { value: ours * 1000, unit: 'ms' },
    rival: { value: rival * 1000, unit: 'ms', what: 'node -e 0' },
    ratio,
    bound: { atMost },
  };
}

function node(...args: readonly string[]): void {
  const { status, stderr } = spawnSync(process.execPath, args, { cwd: root, encoding: 'utf8' });
  if (status !== 0) throw new Error(`${args.join(' ')} ended with ${status}: ${stderr}`);
}
