import { describe, expect, it } from 'vitest';
import { VirtualClock } from '../../src/clock/virtual-clock.js';
import { connectorFor } from '../../src/instrument/connect.js';
import { toyDriver } from './fixtures/toy-load.js';
import { VirtualLine } from './fixtures/virtual-line.js';

describe('connecting', () => {
  it('goes the way that belongs to the kind of the address, and says for whom', async () => {
    const line = new VirtualLine(new VirtualClock(new Date(0)), () => []);
    const asked: unknown[] = [];
    const connect = connectorFor({
      tcp: (address, driver, role) => {
        asked.push([address.port, driver.name, role]);
        return Promise.resolve(line);
      },
      replay: () => Promise.reject(new Error('not this one')),
    });
    expect(await connect({ kind: 'tcp', host: '127.0.0.1', port: 5025 }, toyDriver, 'load')).toBe(line);
    expect(asked).toEqual([[5025, 'toy-load', 'load']]);
  });

  it('says when there is no way', async () => {
    const connect = connectorFor({ tcp: () => Promise.reject(new Error('not this one')) });
    await expect(connect({ kind: 'simulated' }, toyDriver, 'load')).rejects.toMatchObject({
      code: 'INSTRUMENT_UNREACHABLE',
      message: 'simulated:: there is no way to connect to a simulated address here',
      advice: 'Use one of these: tcp.',
    });
  });
});
