import type { ConnectionAddress } from '../files/bench.js';

/** An address as the bench file writes it, for messages; serial settings beyond the baud rate only where unusual. */
export function addressText(address: ConnectionAddress): string {
  switch (address.kind) {
    case 'tcp':
      return `tcp://${address.host.includes(':') ? `[${address.host}]` : address.host}:${address.port}`;
    case 'serial': {
      const unusual = [
        address.data === 8 ? '' : `&data=${address.data}`,
        address.parity === 'none' ? '' : `&parity=${address.parity}`,
        address.stop === 1 ? '' : `&stop=${address.stop}`,
        address.flow === 'none' ? '' : `&flow=${address.flow}`,
      ];
      return `serial:${address.path}?baud=${address.baud}${unusual.join('')}`;
    }
    case 'replay':
      return `replay:${address.file}`;
    case 'simulated':
      return `simulated:${address.dialect ?? ''}`;
  }
}
