import { describe, expect, it } from 'vitest';
import { realClock } from '../../src/clock/real-clock.js';
import { formatAddress } from '../../src/files/connection-address.js';
import { withoutSocat } from '../instrument/fixtures/serve-pty.js';
import { type Knows, quirkyInstrument, type Quirks } from '../instrument/quirks/quirky-instrument.js';
import { quirkyLoad } from '../instrument/quirks/quirky-load.js';
import { serveQuirkyPty, serveQuirkyTcp } from '../instrument/quirks/serve-quirky.js';
import { loadAtSocket, railproof } from './at-a-socket.js';

/** Many questions in vain, in real time on a busy machine. */
const patience = 120_000;

interface Row {
  readonly name: string;
  readonly speaks: Quirks;
  readonly wire: object;
}

const rows: readonly Row[] = [
  {
    name: 'repeats each message and sends a prompt',
    speaks: { echo: '\r\n', prompt: 'LD> ', replyEnd: '\r\n', greets: true },
    wire: { echo: true, prompt: 'LD> ', replyEnd: '\r\n' },
  },
  {
    name: 'ends its replies with a return',
    speaks: { replyEnd: '\r' },
    wire: { echo: false, replyEnd: '\r' },
  },
];

describe.each([
  ['TCP', false],
  ['a pseudo-terminal', withoutSocat],
] as const)('drivers --match over %s', (over, without) => {
  it.skipIf(without).each(rows)(
    'finds the family of one that $name, and is silent to what it does not know',
    async ({ speaks, wire }) => {
      const { instrument, address } = await served(speaks, loadThatTellsItsSettings(), over);
      const { status, stdout } = await railproof('drivers', '--match', address, '--json');
      const match = JSON.parse(stdout) as { readonly families: readonly { readonly driver: string }[] };
      expect(match).toMatchObject({ format: 'railproof/match 1', answered: true, ...wire });
      expect(match.families[0]?.driver).toBe('load-input-scpi');
      expect(status).toBe(0);
      expect(instrument.heard.filter((message) => !/^$|^[*A-Z:]+\?$/.test(message))).toEqual([]);
    },
    patience,
  );
});

/** As the standard has it, what was set can be asked for; and nothing else is answered. */
function loadThatTellsItsSettings(): Knows {
  const { knows } = quirkyLoad();
  const settings: Readonly<Record<string, string>> = { 'FUNC?': 'CURR', 'CURR?': '0', 'VOLT?': '0' };
  return (message) => settings[message] ?? (message === 'CURR:PROT?' ? '40' : knows(message));
}

async function served(speaks: Quirks, knows: Knows, over: string) {
  const instrument = quirkyInstrument(speaks, knows, realClock);
  const address = await (over === 'TCP' ? serveQuirkyTcp(instrument) : serveQuirkyPty(instrument));
  return { instrument, address: formatAddress(address) };
}

describe('drivers --match', () => {
  it.each([
    ['--match', 'nonsense'],
    ['--try', 'load-input-scpi', '--connection', 'nonsense'],
  ])('says that an address which is none is a wrong word in the command: drivers %s %s', async (...words) => {
    const { status, stdout, stderr } = await railproof('drivers', ...words);
    expect(status).toBe(64);
    expect(stdout).toBe('');
    expect(stderr).toContain('Ways to connect: tcp://127.0.0.1:5025');
  });

  it(
    'needs one connection only, of one that serves no other',
    async () => {
      const instrument = quirkyInstrument({}, loadThatTellsItsSettings(), realClock);
      const address = formatAddress(await serveQuirkyTcp(instrument, { deafToOthers: true }));
      const { status, stdout } = await railproof('drivers', '--match', address);
      expect(stdout).toContain(
        `Try it next: railproof drivers --try load-input-scpi --connection ${address}`,
      );
      expect(status).toBe(0);
    },
    patience,
  );

  it(
    'says of one with words of its own what it answered, and how to go on',
    async () => {
      const answers: Readonly<Record<string, string>> = { '*IDN?': 'NURSERY,LOAD', 'VOLT?': '15.21V' };
      const speaks = { echo: '\r\n', prompt: 'LD> ', replyEnd: '\r\n' } as const;
      const { address } = await served(speaks, (message) => answers[message], 'TCP');
      const { status, stdout } = await railproof('drivers', '--match', address);
      expect(stdout).toContain(
        'its replies end in \\r\\n; it repeats each message: echo: true; it sends a prompt, "LD> ".',
      );
      expect(stdout).toContain('No shipped family fits: of all that was asked only VOLT? was answered.');
      expect(stdout).toContain(`--connection ${address} --write my-load`);
      expect(status).toBe(1);
    },
    patience,
  );

  it(
    'says of a line that only sends back what it is sent that nobody is there',
    async () => {
      const instrument = quirkyInstrument({ echo: '\n' }, () => undefined, realClock);
      const address = formatAddress(await serveQuirkyTcp(instrument));
      const { status, stdout } = await railproof('drivers', '--match', address);
      expect(stdout).toContain('what is sent comes back, and no more. Does the cable join');
      expect(status).toBe(69);
    },
    patience,
  );

  it(
    'says of one that hangs up in the middle that its connection is lost',
    async () => {
      const { address } = await loadAtSocket((message) => (message === 'FUNC?' ? 'hang-up' : undefined));
      const { status, stderr } = await railproof('drivers', '--match', address);
      expect(stderr).toMatch(/connection lost/);
      expect(status).toBe(69);
    },
    patience,
  );
});
