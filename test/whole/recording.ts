import { appendFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import type { Clock } from '../../src/clock/clock.js';
import type { Connect } from '../../src/instrument/connect.js';
import { dialogueHeader, dialogueLine } from '../../src/instrument/dialogue-record.js';

/** The same ways to connect, with every byte written to `<folder>/<role>.jsonl` as a dialogue to replay. */
export function recording(connect: Connect, clock: Clock, folder: string): Connect {
  return async (address, driver, role) => {
    const connection = await connect(address, driver, role);
    const file = join(folder, `${role}.jsonl`);
    writeFileSync(file, dialogueHeader(connection.address));
    const note = (kind: 'sent' | 'received', bytes: Uint8Array): void => {
      appendFileSync(file, dialogueLine({ t: clock.now(), kind, bytes }));
    };
    return {
      address: connection.address,
      async write(bytes) {
        note('sent', bytes);
        await connection.write(bytes);
      },
      async receive(within) {
        const bytes = await connection.receive(within);
        if (bytes !== undefined) note('received', bytes);
        return bytes;
      },
      close: () => connection.close(),
    };
  };
}
