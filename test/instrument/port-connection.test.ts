import { PassThrough } from 'node:stream';
import { describe, expect, it } from 'vitest';
import { PortConnection } from '../../src/instrument/port-connection.js';

/** A port that hears itself; how it is closed is up to the test. */
function looped(hangUp: (done: () => void) => void) {
  const stream = new PassThrough();
  const cuts: string[] = [];
  const connection = new PortConnection({
    ...{ address: 'serial:looped?baud=9600', stream, writing: 0.1, gone: 'the port is gone' },
    hangUp,
    cut: () => cuts.push('cut'),
  });
  return { connection, stream, cuts };
}

describe('a port', () => {
  it('that does not get closed is waited for a moment, not for ever', async () => {
    const { connection, cuts } = looped(() => undefined);
    await connection.close();
    expect(cuts).toEqual(['cut']);
    await expect(connection.receive(1)).rejects.toMatchObject({ reason: 'it was closed here' });
  });

  it('that is closed in good order is closed once, however often it is asked', async () => {
    let closings = 0;
    const { connection, cuts } = looped((done) => {
      closings += 1;
      done();
    });
    await Promise.all([connection.close(), connection.close()]);
    await connection.close();
    expect(closings).toBe(1);
    expect(cuts).toEqual([]);
  });

  it('that closes of itself is lost, with the reason', async () => {
    const { connection, stream } = looped((done) => {
      done();
    });
    stream.destroy();
    await expect(connection.receive(1)).rejects.toMatchObject({
      code: 'CONNECTION_LOST',
      reason: 'the port is gone',
    });
    await expect(connection.write(Buffer.from('INP OFF\n'))).rejects.toMatchObject({
      code: 'CONNECTION_LOST',
    });
  });
});
