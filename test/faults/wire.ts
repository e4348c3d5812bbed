import { readlinkSync, rmSync, symlinkSync } from 'node:fs';
import { SerialPort } from 'serialport';
import { realClock } from '../../src/clock/real-clock.js';
import { type ServedPty, serveOnPty } from '../../src/simulation/serve-pty.js';
import { LOOPBACK } from '../../src/simulation/serve-tcp.js';
import type { FaultLine } from './fault-line.js';

/** How the program reaches a line, and what may happen to that way. */
export interface Wire {
  /** As a bench file writes it. */
  readonly address: string;
  readonly line: FaultLine;
  /** Cut off; the way is there again, at once or after a moment. */
  drop(): void;
  /** Cut off, for good. */
  vanish(): void;
  /** Cut off, and somebody else has it from then on. */
  steal(): void;
  close(): Promise<void>;
}

/** How long a pulled adapter stays out: in milliseconds. */
const pulledFor = 300;

export function overTcp(line: FaultLine): Wire {
  return {
    address: `tcp://${LOOPBACK}:${line.port}`,
    line,
    drop: () => {
      line.hangUp();
    },
    vanish: () => {
      line.leave();
    },
    steal: () => {
      line.serveAnother();
    },
    close: () => line.close(),
  };
}

/** A pty in front of the line, which goes and comes as the port of an adapter does. */
export async function overPty(line: FaultLine, link: string): Promise<Wire> {
  const plugIn = (at = link): Promise<ServedPty> =>
    serveOnPty({ port: line.port, link: at, clock: realClock });
  let pty: ServedPty | undefined = await plugIn();
  let thief: SerialPort | undefined;
  // One after the other: closing must not overtake what a fault has begun.
  let acts = Promise.resolve();
  const then = (act: () => Promise<void>): void => {
    acts = acts.then(act);
  };
  const pullOut = (): void => {
    line.hangUp();
    then(async () => {
      await pty?.close();
      pty = undefined;
      rmSync(link, { force: true });
    });
  };
  return {
    address: `serial:${link}?baud=115200`,
    line,
    drop: () => {
      pullOut();
      then(async () => {
        await realClock.sleep(pulledFor / 1000);
        pty = await plugIn();
      });
    },
    vanish: pullOut,
    steal: () => {
      pullOut();
      then(async () => {
        // The thief is there first: nobody else finds the port before it has its name.
        const unnamed = `${link}-unnamed`;
        pty = await plugIn(unnamed);
        thief = await openAlone(unnamed);
        symlinkSync(readlinkSync(unnamed), link);
      });
    },
    close: async () => {
      await acts;
      if (thief?.isOpen === true) await new Promise((resolve) => thief?.close(resolve));
      await pty?.close();
      await line.close();
    },
  };
}

function openAlone(path: string): Promise<SerialPort> {
  return new Promise((resolve, reject) => {
    const port = new SerialPort({ path, baudRate: 115200, lock: true }, (error) => {
      if (error) reject(error);
      else resolve(port);
    });
  });
}
