import type { Duplex } from 'node:stream';

/** What is asked, and over which line. */
export interface Ping {
  readonly line: Duplex;
  readonly question: string;
}

/**
 * The floor: each question is written, the next one as soon as a line has come back. Nothing is looked at, nothing
 * kept, and nobody minds a line that does not come.
 */
export function pingPong(pings: readonly Ping[], times: number): Promise<void> {
  const lines = new Set(pings.map(({ line }) => line));
  return new Promise((resolve) => {
    let asked = 0;
    let come = '';
    const ask = (): void => {
      const ping = pings[asked % pings.length];
      asked += 1;
      ping?.line.write(`${ping.question}\n`, 'latin1');
    };
    const hear = (bytes: Buffer): void => {
      come += bytes.toString('latin1');
      if (!come.endsWith('\n')) return;
      come = '';
      if (asked < times) {
        ask();
        return;
      }
      for (const line of lines) line.off('data', hear);
      resolve();
    };
    for (const line of lines) line.on('data', hear);
    ask();
  });
}
