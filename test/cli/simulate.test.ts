import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { connect } from 'node:net';
import { createInterface } from 'node:readline';
import { fileURLToPath } from 'node:url';
import { describe, expect, it, onTestFinished } from 'vitest';
import { root } from '../whole/railproof.js';

const program = fileURLToPath(new URL('../../dist/cli/main.js', import.meta.url));

describe('a bench that is served with hands at it', () => {
  it('does what is typed, so that a run in another window finds it done', async () => {
    const child = spawn(process.execPath, [program, 'simulate', 'fixtures/benches/nursery.yaml', '--acts'], {
      cwd: root,
      stdio: ['pipe', 'pipe', 'pipe'],
    });
    onTestFinished(() => {
      child.kill();
    });
    let said = '';
    child.stderr.on('data', (chunk: Buffer) => {
      said += chunk.toString();
    });
    child.stdout.resume();
    await expect.poll(() => said, { timeout: 10_000 }).toContain('by hand');
    const port = Number(/meter: tcp:\/\/127\.0\.0\.1:(\d+)/.exec(said)?.[1]);
    expect(await voltageAt(port)).toBeGreaterThan(15);

    child.stdin.write('juggle\nunplug\n');
    await expect.poll(() => said, { timeout: 10_000 }).toContain('done: unplug');
    expect(said).toContain('does not know how to "juggle"');
    expect(Math.abs(await voltageAt(port))).toBeLessThan(0.1);

    child.kill('SIGINT');
    const [status] = (await once(child, 'close')) as [number | null];
    expect(status).toBe(0);
  });
});

async function voltageAt(port: number): Promise<number> {
  const socket = connect(port, '127.0.0.1');
  socket.write('CONF:VOLT:DC\nREAD?\n');
  const [line] = (await once(createInterface({ input: socket }), 'line')) as [string];
  socket.destroy();
  return Number(line);
}
