import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { onTestFinished } from 'vitest';
import type { ViewedEnd, ViewState } from '../../src/view/view-state.js';
import { root } from '../whole/railproof.js';

export interface BusyRunner {
  readonly address: string;
  /** Tells how the bench was left, then hears and says nothing for so many seconds, tells the end, and is gone. */
  workOut(seconds: number, end: ViewedEnd): void;
  readonly pid: number;
}

/** The view of a run in a process of its own, as only there a busy runner keeps nobody else waiting. */
export async function aBusyRunner(state: ViewState): Promise<BusyRunner> {
  const child = spawn(process.execPath, ['--input-type=module', '-e', runner, JSON.stringify(state)], {
    cwd: root,
    stdio: ['pipe', 'pipe', 'inherit'],
  });
  onTestFinished(() => void child.kill('SIGKILL'));
  const [address] = (await once(child.stdout.setEncoding('utf8'), 'data')) as [string];
  return {
    address,
    pid: child.pid ?? 0,
    workOut: (seconds, end) => child.stdin.write(`${JSON.stringify({ seconds, end })}\n`),
  };
}

const runner = `
import { randomBytes } from 'node:crypto';
import { createRequire } from 'node:module';
import { dirname } from 'node:path';
import { createInterface } from 'node:readline';
import { realClock } from './dist/clock/real-clock.js';
import { readPageFiles } from './dist/view/page-files.js';
import { openLiveView } from './dist/view/server.js';
const uplot = dirname(createRequire(process.cwd() + '/').resolve('uplot'));
const nothing = () => undefined;
const view = await openLiveView({
  state: JSON.parse(process.argv[1]),
  files: readPageFiles('./dist/', uplot),
  ...{ clock: realClock, random: randomBytes, stop: nothing, addressed: nothing },
});
process.stdout.write(view.address);
createInterface(process.stdin).once('line', async (line) => {
  const { seconds, end: { answer, outcome, report, ...left } } = JSON.parse(line);
  view.show({ kind: 'working-out', left });
  await view.flushed();
  Atomics.wait(new Int32Array(new SharedArrayBuffer(4)), 0, 0, seconds * 1000);
  view.show({ kind: 'ended', ended: { ...left, answer, outcome, report } });
  await view.close();
  process.exit();
});
`;
