import { describe, expect, it } from 'vitest';
import type { ConnectionAddress } from '../../src/files/bench.js';
import {
  AddressError,
  addressForms,
  formatAddress,
  parseAddress,
} from '../../src/files/connection-address.js';
import fc from '../property.js';

describe('an address is read', () => {
  it.each<[string, ConnectionAddress]>([
    ['tcp://127.0.0.1:5025', { kind: 'tcp', host: '127.0.0.1', port: 5025 }],
    ['tcp://bench_load.lan:1', { kind: 'tcp', host: 'bench_load.lan', port: 1 }],
    ['tcp://[::1]:65535', { kind: 'tcp', host: '::1', port: 65535 }],
    ['tcp://[fe80::1%eth0]:5025', { kind: 'tcp', host: 'fe80::1%eth0', port: 5025 }],
    ['serial:/dev/ttyUSB0', { kind: 'serial', path: '/dev/ttyUSB0' }],
    ['serial:COM3', { kind: 'serial', path: 'COM3' }],
    ['serial:/dev/ttyUSB0?', { kind: 'serial', path: '/dev/ttyUSB0' }],
    ['serial:/dev/ttyUSB0?baud=115200', { kind: 'serial', path: '/dev/ttyUSB0', baud: 115200 }],
    [
      'serial:/dev/ttyS1?flow=hardware&stop=2&parity=even&data=7&baud=1200',
      { kind: 'serial', path: '/dev/ttyS1', baud: 1200, data: 7, parity: 'even', stop: 2, flow: 'hardware' },
    ],
    ['serial:/dev/ttyACM0?rts=off&dtr=on', { kind: 'serial', path: '/dev/ttyACM0', dtr: 'on', rts: 'off' }],
    ['replay:runs/a b.jsonl', { kind: 'replay', file: 'runs/a b.jsonl' }],
    ['simulated:', { kind: 'simulated' }],
    ['simulated:load-short', { kind: 'simulated', dialect: 'load-short' }],
  ])('%s', (text, address) => {
    expect(parseAddress(text)).toEqual(address);
  });
});

describe('what is no address says why', () => {
  it.each<[string, string]>([
    ['tcp://127.0.0.1', "'tcp://127.0.0.1' lacks its port: tcp://127.0.0.1:5025"],
    ['tcp://127.0.0.1:0', 'port 0 is not within 1 to 65535'],
    ['tcp://127.0.0.1:65536', 'port 65536 is not within 1 to 65535'],
    ['tcp:127.0.0.1:5025', "found 'tcp:127.0.0.1:5025'; needed: tcp://host:port"],
    ['tcp://:5025', "found 'tcp://:5025'; needed: tcp://host:port"],
    ['tcp://me@host:5025', "found 'tcp://me@host:5025'; needed: tcp://host:port"],
    ['tcp://host:5025/x', "found 'tcp://host:5025/x'; needed: tcp://host:port"],
    ['serial:', 'serial: needs a port: serial:/dev/ttyUSB0?baud=9600'],
    ['serial:?baud=9600', 'serial: needs a port: serial:/dev/ttyUSB0?baud=9600'],
    ['serial:/dev/ttyUSB0?baut=9600', "a serial line has no option 'baut'; did you mean 'baud'?"],
    [
      'serial:/dev/ttyUSB0?x=1',
      "a serial line has no option 'x'; known are baud, data, parity, stop, flow, dtr, rts",
    ],
    ['serial:/dev/ttyUSB0?dtr=1', 'dtr=1 is not known; on or off is needed'],
    ['serial:/dev/ttyUSB0?parity=evn', "parity=evn is not known; did you mean 'even'?"],
    ['serial:/dev/ttyUSB0?data=', 'data= is not known; 7 or 8 is needed'],
    ['serial:/dev/ttyUSB0?baud=fast', 'baud=fast will not do; a speed from 50 to 4000000 is needed'],
    ['serial:/dev/ttyUSB0?baud=1e4', 'baud=1e4 will not do; a speed from 50 to 4000000 is needed'],
    ['serial:/dev/ttyUSB0?baud=9600&baud=1200', "the option 'baud' is given twice"],
    ['replay:', 'replay: needs a file: replay:dialogue.jsonl'],
    ['simulated:../x', "'../x' is no name of a dialect"],
    ['simulatd:', "no way to connect is called 'simulatd'; did you mean 'simulated'?"],
    ['http://host:80', "no way to connect is called 'http'; one of tcp, serial, replay, simulated is needed"],
    ['/dev/ttyUSB0', "found '/dev/ttyUSB0'; an address is needed: tcp://127.0.0.1:5025, simulated:"],
    ['', "found ''; an address is needed: tcp://127.0.0.1:5025, simulated:"],
    ['replay:a\nb', "found 'replay:a\\u000ab', which is no address"],
  ])('%j', (text, message) => {
    expect(() => parseAddress(text)).toThrow(expect.objectContaining({ message, code: 'ADDRESS' }));
  });
});

it('the forms we advise are all good addresses', () => {
  for (const form of addressForms) expect(formatAddress(parseAddress(form))).toBeTypeOf('string');
  expect(new AddressError('no', 'x').advice).toBe(
    'Ways to connect: tcp://127.0.0.1:5025, serial:/dev/ttyUSB0?baud=9600&data=8&parity=none&stop=1&flow=none, replay:dialogue.jsonl, simulated:.',
  );
});

it.each<[string, string]>([
  ['serial:/dev/ttyUSB0', 'serial:/dev/ttyUSB0'],
  ['serial:/dev/ttyUSB0?stop=2&parity=odd', 'serial:/dev/ttyUSB0?parity=odd&stop=2'],
  [
    'serial:/dev/ttyUSB0?dtr=on&flow=hardware&stop=2&parity=even&baud=9600',
    'serial:/dev/ttyUSB0?baud=9600&parity=even&stop=2&flow=hardware&dtr=on',
  ],
  ['tcp://[::1]:5025', 'tcp://[::1]:5025'],
  ['simulated:', 'simulated:'],
])('%s is written with what it says, in one order', (text, written) => {
  expect(formatAddress(parseAddress(text))).toBe(written);
});

it('reading what was written gives the same address', () => {
  const path = fc.stringMatching(/^[A-Za-z0-9/._ -]{1,40}$/);
  const address: fc.Arbitrary<ConnectionAddress> = fc.oneof(
    fc.record({
      kind: fc.constant('tcp' as const),
      host: fc.oneof(fc.ipV4(), fc.ipV6(), fc.domain()),
      port: fc.integer({ min: 1, max: 65535 }),
    }),
    fc.record(
      {
        kind: fc.constant('serial' as const),
        path,
        baud: fc.integer({ min: 50, max: 4_000_000 }),
        data: fc.constantFrom(7, 8),
        parity: fc.constantFrom('none', 'even', 'odd'),
        stop: fc.constantFrom(1, 2),
        flow: fc.constantFrom('none', 'hardware', 'software'),
        dtr: fc.constantFrom('on', 'off'),
        rts: fc.constantFrom('on', 'off'),
      },
      { requiredKeys: ['kind', 'path'] },
    ),
    fc.record({ kind: fc.constant('replay' as const), file: path }),
    fc.record(
      { kind: fc.constant('simulated' as const), dialect: fc.stringMatching(/^[a-z][a-z0-9-]{0,20}$/) },
      { requiredKeys: ['kind'] },
    ),
  );
  fc.assert(
    fc.property(address, (each) => {
      expect(parseAddress(formatAddress(each))).toEqual(each);
    }),
  );
});
