import { once } from 'node:events';
import { writeFileSync } from 'node:fs';
import { start } from './railproof.js';

export interface Served {
  /** A bench file for what is served. */
  readonly bench: string;
  close(): Promise<void>;
}

/** `railproof simulate` in a process of its own, and the bench file that it prints. */
export async function serve(bench: string, into: string, lines: 'tcp' | 'pty'): Promise<Served> {
  const child = start(['simulate', bench, ...(lines === 'pty' ? ['--pty'] : [])]);
  let text = '';
  let talk = '';
  child.stdout?.setEncoding('utf8').on('data', (more: string) => {
    text += more;
  });
  await new Promise<void>((resolve, reject) => {
    child.stderr?.setEncoding('utf8').on('data', (more: string) => {
      talk += more;
      if (talk.includes('Serving until')) resolve();
    });
    child.once('close', () => {
      reject(new Error(`simulate ended: ${talk}`));
    });
  });
  writeFileSync(into, text);
  return {
    bench: into,
    async close() {
      child.kill('SIGTERM');
      if (child.exitCode === null) await once(child, 'close');
    },
  };
}
