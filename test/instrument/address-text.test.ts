import { expect, it } from 'vitest';
import { addressText } from '../../src/instrument/address-text.js';

const serial = {
  kind: 'serial',
  path: '/dev/ttyUSB0',
  baud: 9600,
  data: 8,
  parity: 'none',
  stop: 1,
  flow: 'none',
} as const;

it.each([
  [{ kind: 'tcp', host: '127.0.0.1', port: 5025 } as const, 'tcp://127.0.0.1:5025'],
  [{ kind: 'tcp', host: '::1', port: 5025 } as const, 'tcp://[::1]:5025'],
  [serial, 'serial:/dev/ttyUSB0?baud=9600'],
  [
    { ...serial, data: 7, parity: 'even', stop: 2, flow: 'hardware' } as const,
    'serial:/dev/ttyUSB0?baud=9600&data=7&parity=even&stop=2&flow=hardware',
  ],
  [{ kind: 'replay', file: 'a.jsonl' } as const, 'replay:a.jsonl'],
  [{ kind: 'simulated' } as const, 'simulated:'],
  [{ kind: 'simulated', dialect: 'short' } as const, 'simulated:short'],
])('an address is written as the bench file writes it: %o', (address, text) => {
  expect(addressText(address)).toBe(text);
});
