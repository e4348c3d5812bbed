import type { SerialPort } from 'serialport';
import type { ConnectionAddress } from '../files/bench.js';
import type { Seconds } from '../quantity/quantity.js';
import { addressText } from './address-text.js';
import { ConnectionLostError, InstrumentUnreachableError, PortBusyError } from './connection-errors.js';
import type { Connection } from './connection.js';
import { Incoming } from './incoming.js';

export type SerialAddress = Extract<ConnectionAddress, { kind: 'serial' }>;

export interface SerialPatience {
  /** How long a write may take; with a handshake, an instrument that is off lets nothing through. */
  readonly writing: Seconds;
}

/**
 * Opens a serial port, for this program alone. The package that does it is loaded here, on first use.
 * @throws InstrumentUnreachableError when there is no such port or it may not be used.
 * @throws PortBusyError when another program has it open.
 */
export async function openSerial(
  address: SerialAddress,
  patience: SerialPatience = { writing: 5 },
): Promise<Connection> {
  const name = addressText(address);
  const { SerialPort } = await import('serialport').catch((cause: unknown) => {
    throw new InstrumentUnreachableError({
      address: name,
      reason: 'the package that opens serial ports does not load on this machine',
      advice:
        'Install railproof again on this machine; its serial package holds a part made for each kind of machine.',
      cause,
    });
  });
  return new Promise((resolve, reject) => {
    const port = new SerialPort({
      path: address.path,
      baudRate: address.baud,
      dataBits: address.data,
      parity: address.parity,
      stopBits: address.stop,
      rtscts: address.flow === 'hardware',
      xon: address.flow === 'software',
      xoff: address.flow === 'software',
      lock: true,
      autoOpen: false,
    });
    port.open((error) => {
      if (error) reject(whyNot(error, name, address.path));
      else resolve(new SerialConnection(name, port, patience.writing));
    });
  });
}

class SerialConnection implements Connection {
  readonly address: string;
  readonly #port: SerialPort;
  readonly #writing: Seconds;
  readonly #incoming: Incoming;

  constructor(address: string, port: SerialPort, writing: Seconds) {
    this.address = address;
    this.#port = port;
    this.#writing = writing;
    this.#incoming = new Incoming(port);
    port.on('data', (bytes: Uint8Array) => {
      this.#incoming.arrive(bytes);
    });
    port.on('error', (error: Error) => {
      this.#lost(error.message, error);
    });
    port.on('close', (error: Error | null | undefined) => {
      this.#lost('the port is gone', error ?? undefined);
    });
  }

  write(bytes: Uint8Array): Promise<void> {
    if (this.#incoming.ended !== undefined) return Promise.reject(this.#incoming.ended);
    return new Promise((resolve, reject) => {
      const timer = setTimeout(() => {
        reject(this.#lost(`it took nothing of what was sent for ${this.#writing} s`));
      }, this.#writing * 1000);
      this.#port.write(bytes, (error) => {
        clearTimeout(timer);
        if (error) reject(this.#lost(error.message, error));
        else resolve();
      });
    });
  }

  receive(within: Seconds): Promise<Uint8Array | undefined> {
    return this.#incoming.take(within);
  }

  close(): Promise<void> {
    this.#lost('it was closed here');
    if (!this.#port.isOpen) return Promise.resolve();
    return new Promise((resolve) => {
      this.#port.close(() => {
        resolve();
      });
    });
  }

  #lost(reason: string, cause?: unknown): ConnectionLostError {
    const error = new ConnectionLostError({ address: this.address, reason, cause });
    this.#incoming.end(error);
    return error;
  }
}

/** The package gives no codes, only the operating system's words. */
function whyNot(error: Error, address: string, path: string): Error {
  const words = error.message.toLowerCase();
  const says = (...parts: readonly string[]): boolean => parts.some((part) => words.includes(part));
  if (says('cannot lock port', 'busy', 'access denied')) return new PortBusyError({ address, cause: error });
  if (says('no such file', 'file not found', 'no such device')) {
    return new InstrumentUnreachableError({
      address,
      reason: `there is no port ${path}`,
      advice: 'Is the cable in? "railproof ports" lists the serial ports of this machine.',
      cause: error,
    });
  }
  if (says('permission denied')) {
    return new InstrumentUnreachableError({
      address,
      reason: `this user may not open ${path}`,
      advice:
        'On Linux serial ports belong to the group dialout: "sudo usermod -aG dialout $USER", then log out and in again.',
      cause: error,
    });
  }
  if (says('inappropriate ioctl', 'is a directory', 'not a tty')) {
    return new InstrumentUnreachableError({
      address,
      reason: `${path} is not a serial port`,
      advice: '"railproof ports" lists the serial ports of this machine.',
      cause: error,
    });
  }
  return new InstrumentUnreachableError({ address, reason: error.message, cause: error });
}
