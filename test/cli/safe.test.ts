import { once } from 'node:events';
import { readFileSync, rmSync, writeFileSync } from 'node:fs';
import { createServer, type AddressInfo } from 'node:net';
import { dirname } from 'node:path';
import { describe, expect, it } from 'vitest';
import { serveTcp } from '../instrument/fixtures/serve-tcp.js';
import { benchFile, lastLine, loadAtSocket, railproof } from './at-a-socket.js';

const mayBeOn =
  'THE LOAD MAY STILL BE ON. Switch its input off at its front panel, or unplug the module, before you touch the leads.';

describe('safe', () => {
  it('tells the load to be off before it asks anything, and reads back that it is', async () => {
    const load = await loadAtSocket();
    const { status, stdout, stderr } = await railproof('safe', '--bench', load.bench);
    expect(stdout).toBe(`The load at ${load.address} is off; it was read back.\n`);
    expect(stderr).toBe('');
    expect(status).toBe(0);
    expect(load.heard.slice(0, 2)).toEqual(['', 'INP OFF']);
    expect(load.state.input).toBe('0');
  });

  it('does so though the queue of errors never clears', async () => {
    const load = await loadAtSocket((message) =>
      message === 'SYST:ERR?' ? { answer: '-350,"Queue overflow"' } : undefined,
    );
    const { status, stdout } = await railproof('safe', '--bench', load.bench);
    expect(load.heard.slice(0, 2)).toEqual(['', 'INP OFF']);
    expect(load.state.input).toBe('0');
    expect(stdout).toMatch(/is off; it was read back/);
    expect(status).toBe(0);
  });

  it('does so though what prepares the load is refused', async () => {
    const load = await loadAtSocket(undefined, (driver) => driver.replace('["*CLS"]', '["LAMP ON"]'));
    const { status } = await railproof('safe', '--bench', load.bench);
    expect(load.state.input).toBe('0');
    expect(status).toBe(0);
  });

  it('leaves the other instruments alone: a scanner that is gone, and one that stays as it is', async () => {
    const load = await loadAtSocket();
    const heard: string[] = [];
    const { port } = await serveTcp((message) => {
      heard.push(message);
    });
    const text = readFileSync(load.bench, 'utf8')
      .replace(
        'instruments:\n',
        `instruments:\n  scanner: { driver: scanner-route-scpi, connection: "tcp://127.0.0.1:${port}" }\n` +
          '  meter: { driver: meter-read-scpi, connection: "tcp://127.0.0.1:1" }\n',
      )
      .concat('group: { measured-by: scanner, places: [{ channel: 101 }, { channel: 102 }] }\n');
    writeFileSync(load.bench, text);
    const { status, stdout, stderr } = await railproof('safe', '--bench', load.bench);
    expect(stderr).toBe('');
    expect(stdout).toBe(`The load at ${load.address} is off; it was read back.\n`);
    expect(status).toBe(0);
    expect(heard).toEqual([]);
  });

  it('needs no driver but that of the load', async () => {
    const load = await loadAtSocket();
    const meter = '  meter: { driver: not-there.yaml, connection: "tcp://127.0.0.1:1" }\n';
    writeFileSync(
      load.bench,
      readFileSync(load.bench, 'utf8').replace('instruments:\n', `instruments:\n${meter}`),
    );
    const { status, stdout } = await railproof('safe', '--bench', load.bench);
    expect(stdout).toBe(`The load at ${load.address} is off; it was read back.\n`);
    expect(load.state.input).toBe('0');
    expect(status).toBe(0);
  });

  it('comes back when the first connection is lost', async () => {
    let calls = 0;
    const load = await loadAtSocket((message) => {
      calls += message === '*IDN?' ? 1 : 0;
      return message === '*IDN?' && calls === 1 ? 'hang-up' : undefined;
    });
    const { status } = await railproof('safe', '--bench', load.bench);
    expect(load.heard.slice(0, 6)).toEqual(['', 'INP OFF', '*IDN?', '', 'INP OFF', '*IDN?']);
    expect(status).toBe(0);
  });
});

describe('safe that cannot be confirmed says as its last words what to do by hand, and ends with 69', () => {
  it('of a load that is silent, which was told on each connection', async () => {
    const load = await loadAtSocket((message) => (message.endsWith('?') ? 'ignore' : undefined));
    const { status, stdout, stderr } = await railproof('safe', '--bench', load.bench);
    expect(load.heard).toEqual(['', 'INP OFF', '*IDN?', '', 'INP OFF', '*IDN?']);
    expect(load.state.input).toBe('0');
    expect(stderr).toMatch(/^It could not be confirmed that the load is off: .*did not answer/);
    expect(lastLine(stderr)).toBe(mayBeOn);
    expect(stdout).toBe('');
    expect(status).toBe(69);
  });

  it('of a load that refuses', async () => {
    const load = await loadAtSocket((message, { queue }) => {
      if (message !== 'INP OFF') return undefined;
      queue.push('-221,"Settings conflict"');
      return 'ignore';
    });
    const { status, stderr } = await railproof('safe', '--bench', load.bench);
    expect(load.state.input).toBe('1');
    expect(load.heard.filter((message) => message === 'INP OFF')).toHaveLength(4);
    expect(stderr).toMatch(/was made safe and says that its input is on; see .*driver\.yaml:\d+\n/);
    expect(lastLine(stderr)).toBe(mayBeOn);
    expect(status).toBe(69);
  });

  it('of a load that vanishes', async () => {
    const load = await loadAtSocket((message) => (message.endsWith('?') ? 'hang-up' : undefined));
    const { status, stderr } = await railproof('safe', '--bench', load.bench);
    expect(load.heard.filter((message) => message === 'INP OFF')).toHaveLength(2);
    expect(stderr).toContain('connection lost');
    expect(lastLine(stderr)).toBe(mayBeOn);
    expect(status).toBe(69);
  });

  it('of something else that answers, which was told all the same', async () => {
    const load = await loadAtSocket(undefined, (driver) =>
      driver.replace('errors:', 'identity: "^PUMP"\nerrors:'),
    );
    const { status, stderr } = await railproof('safe', '--bench', load.bench);
    expect(load.heard.slice(0, 2)).toEqual(['', 'INP OFF']);
    expect(lastLine(stderr)).toBe(mayBeOn);
    expect(status).toBe(69);
  });

  it('of a load that cannot be reached', async () => {
    const load = await loadAtSocket();
    const { status, stderr } = await railproof(
      'safe',
      '--bench',
      benchFile(dirname(load.bench), `tcp://127.0.0.1:${await freePort()}`),
    );
    expect(stderr).toContain('nothing listens on this port');
    expect(lastLine(stderr)).toBe(mayBeOn);
    expect(status).toBe(69);
  });

  it('and with the status of the file where that is what is wrong', async () => {
    const load = await loadAtSocket();
    rmSync(load.driver);
    const { status, stderr } = await railproof('safe', '--bench', load.bench);
    expect(lastLine(stderr)).toBe(mayBeOn);
    expect(status).toBe(66);
  });
});

describe('safe, on a bench with a source,', () => {
  /** The same bench, and a source at that address. */
  function withSource(bench: string, address: string): void {
    const source = `  source: { driver: source-output-scpi, connection: '${address}', voltage: 24 V, current: 4 A }\n`;
    writeFileSync(bench, readFileSync(bench, 'utf8').replace('instruments:\n', `instruments:\n${source}`));
  }

  /** A source on a socket of its own, which is on. */
  async function sourceAtSocket(heard: string[]): Promise<{ address: string; state: { output: string } }> {
    const state = { output: '1' };
    const { port } = await serveTcp((message, line) => {
      heard.push(message);
      if (message === 'OUTP OFF') state.output = '0';
      const answers: Readonly<Record<string, string>> = {
        '*IDN?': 'NURSERY,SOURCE,K1,1.0',
        'SYST:ERR?': '0,"No error"',
        'OUTP?': state.output,
      };
      const answer = answers[message];
      if (answer !== undefined) line.say(`${answer}\n`);
    });
    return { address: `tcp://127.0.0.1:${port}`, state };
  }

  it('switches the load off and then the source, and reads both back', async () => {
    const order: string[] = [];
    const load = await loadAtSocket((message) => {
      order.push(message);
      return undefined;
    });
    const source = await sourceAtSocket(order);
    withSource(load.bench, source.address);
    const { status, stdout, stderr } = await railproof('safe', '--bench', load.bench);
    expect(stdout).toBe(
      `The load at ${load.address} is off; it was read back.\nThe source at ${source.address} is off; it was read back.\n`,
    );
    expect(stderr).toBe('');
    expect(status).toBe(0);
    expect(source.state.output).toBe('0');
    expect(order.indexOf('INP?')).toBeLessThan(order.indexOf('OUTP OFF'));
  });

  it('says of a source that cannot be reached what to do by hand, and that the load is off', async () => {
    const load = await loadAtSocket();
    withSource(load.bench, `tcp://127.0.0.1:${await freePort()}`);
    const { status, stdout, stderr } = await railproof('safe', '--bench', load.bench);
    expect(stdout).toBe(`The load at ${load.address} is off; it was read back.\n`);
    expect(stderr).toMatch(
      /^It could not be confirmed that the source is off: .*nothing listens on this port/,
    );
    expect(lastLine(stderr)).toMatch(/^THE SOURCE MAY STILL BE ON\. /);
    expect(status).toBe(69);
  });

  it('switches the load off though the driver of the source cannot be read', async () => {
    const load = await loadAtSocket();
    withSource(load.bench, `tcp://127.0.0.1:${await freePort()}`);
    writeFileSync(
      load.bench,
      readFileSync(load.bench, 'utf8').replace('source-output-scpi', 'not-there.yaml'),
    );
    const { status, stdout, stderr } = await railproof('safe', '--bench', load.bench);
    expect(stdout).toBe(`The load at ${load.address} is off; it was read back.\n`);
    expect(load.state.input).toBe('0');
    expect(stderr).toContain('not-there.yaml');
    expect(stderr).not.toContain('THE LOAD');
    expect(lastLine(stderr)).toMatch(/^THE SOURCE MAY STILL BE ON\. /);
    expect(status).toBe(66);
  });

  it('switches the source off though the load does not answer, and the last words are of the load', async () => {
    const load = await loadAtSocket((message) => (message.endsWith('?') ? 'ignore' : undefined));
    const source = await sourceAtSocket([]);
    withSource(load.bench, source.address);
    const { status, stdout, stderr } = await railproof('safe', '--bench', load.bench);
    expect(stdout).toBe(`The source at ${source.address} is off; it was read back.\n`);
    expect(source.state.output).toBe('0');
    expect(lastLine(stderr)).toBe(mayBeOn);
    expect(status).toBe(69);
  });
});

async function freePort(): Promise<number> {
  const server = createServer().listen(0, '127.0.0.1');
  await once(server, 'listening');
  const { port } = server.address() as AddressInfo;
  server.close();
  await once(server, 'close');
  return port;
}
