import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { expect, it, onTestFinished } from 'vitest';
import { benchFile, railproof } from './at-a-socket.js';

function withDialogue(exchange: string): {
  readonly driver: string;
  readonly bench: string;
  readonly line: number;
} {
  const folder = mkdtempSync(join(tmpdir(), 'railproof-check-'));
  onTestFinished(() => {
    rmSync(folder, { recursive: true, force: true });
  });
  const driver = join(folder, 'driver.yaml');
  const shipped = readFileSync(new URL('../../drivers/load-input-scpi.yaml', import.meta.url), 'utf8');
  const text = shipped.replace(/^dialogue:\n[^]*/m, `dialogue:\n  - ${exchange}\n`);
  writeFileSync(driver, text);
  const line = text.split('\n').findIndex((each) => each.includes(exchange)) + 1;
  return { driver, bench: benchFile(folder, 'tcp://127.0.0.1:5025'), line };
}

it('a driver is checked by its dialogue, and so is that of a bench', async () => {
  const { driver, bench } = withDialogue('{ reading: voltage, answer: "15.21", is: 15.21 V }');
  const { status, stdout } = await railproof('check', driver, bench);
  expect(stdout).toContain('driver.yaml: a driver file, and right; the one exchange of its dialogue too\n');
  expect(stdout).toContain('bench.yaml: a bench file, and right\n');
  expect(status).toBe(0);
});

it('an answer that does not come out is named with its line, and what it came out as', async () => {
  const { driver, bench, line } = withDialogue('{ reading: voltage, answer: "12.031V", is: 12.031 V }');
  for (const file of [driver, bench]) {
    const { status, stderr } = await railproof('check', file);
    expect(stderr).toContain(
      `driver.yaml:${line}:48: dialogue.0.is: "12.031V" was not understood, a bare number was due; expected 12.031 V`,
    );
    expect(status).toBe(65);
  }
});

it.each([1, 2, 4])(
  'a bench is right with channel %i of a driver whose dialogue speaks of several channels',
  async (channel) => {
    const { bench } = withDialogue('{ reading: voltage, answer: "15.21", is: 15.21 V }');
    const text = readFileSync(bench, 'utf8');
    writeFileSync(
      bench,
      text.replace('driver: ./driver.yaml', `driver: load-channel-scpi, channel: ${channel}`),
    );
    const { status, stdout, stderr } = await railproof('check', bench);
    expect(stderr).toBe('');
    expect(stdout).toContain('bench.yaml: a bench file, and right\n');
    expect(status).toBe(0);
  },
);
