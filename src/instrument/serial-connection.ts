import type { SerialPort } from 'serialport';
import type { ConnectionAddress, SerialSettings } from '../files/bench.js';
import { formatAddress, serialDefaults } from '../files/connection-address.js';
import type { Seconds } from '../quantity/quantity.js';
import { InstrumentUnreachableError, PortBusyError } from './connection-errors.js';
import type { Connection } from './connection.js';
import type { Notice } from './notice.js';
import { type OpenPort, PortConnection } from './port-connection.js';

export type SerialAddress = Extract<ConnectionAddress, { kind: 'serial' }>;

export interface SerialPatience {
  /** How long a write may take; with a handshake, an instrument that is off lets nothing through. */
  readonly writing: Seconds;
}

/**
 * The package that opens serial ports; for whoever wants it loaded before there is need of it.
 * @throws InstrumentUnreachableError, which names the address, when it does not load
 */
export async function loadSerialPackage(
  address: string,
): Promise<{ readonly SerialPort: typeof SerialPort }> {
  return await import('serialport').catch((cause: unknown) => {
    throw new InstrumentUnreachableError({
      address,
      reason: 'the package that opens serial ports does not load on this machine',
      advice:
        'Install railproof again on this machine; its serial package holds a part made for each kind of machine.',
      cause,
    });
  });
}

/**
 * Opens a serial port, for this program alone, set to what the address says, else to what the driver says, else
 * to 9600 baud, 8 data bits, no parity, 1 stop bit and no handshake. The control lines are set after that. The
 * package that does it all is loaded here, on first use.
 *
 * Where a port has no control lines, as pseudo-terminals and adapters with three wires have none, the connection
 * is open all the same and says so in its `remark`: many instruments do without them, those that do not stay
 * silent, and nothing may keep a load from being made safe that may not even matter to it.
 * @throws InstrumentUnreachableError when there is no such port or it may not be used.
 * @throws PortBusyError when another program has it open.
 */
export async function openSerial(
  address: SerialAddress,
  ofDriver: Partial<SerialSettings> = {},
  patience: SerialPatience = { writing: 5 },
): Promise<Connection> {
  const name = formatAddress(address);
  const { SerialPort } = await loadSerialPackage(name);
  const line = { ...serialDefaults, ...ofDriver, ...address };
  const port = new SerialPort({
    path: address.path,
    baudRate: line.baud,
    dataBits: line.data,
    parity: line.parity,
    stopBits: line.stop,
    rtscts: line.flow === 'hardware',
    xon: line.flow === 'software',
    xoff: line.flow === 'software',
    lock: true,
    autoOpen: false,
  });
  await new Promise<void>((resolve, reject) => {
    port.open((error) => {
      if (error) reject(whyNot(error, name, address.path));
      else resolve();
    });
  });
  const remark = await setControlLines(port, line);
  const perByte = (1 + line.data + (line.parity === 'none' ? 0 : 1) + line.stop) / line.baud;
  return new PortConnection({ address: name, writing: patience.writing, perByte, remark, ...portOf(port) });
}

/** The part of a port that moves its control lines. */
export type ControlLines = Pick<SerialPort, 'set'>;

/**
 * Sets the control lines that are to be set. One that nothing is said of is left on, as systems leave it when
 * they open a port. Gives what to tell where that can't be done.
 */
export async function setControlLines(
  port: ControlLines,
  { dtr, rts }: Pick<SerialSettings, 'dtr' | 'rts'>,
): Promise<Notice | undefined> {
  if (dtr === undefined && rts === undefined) return undefined;
  const error = await new Promise<Error | null>((resolve) => {
    port.set({ dtr: dtr !== 'off', rts: rts !== 'off' }, resolve);
  });
  if (error === null) return undefined;
  const asked = Object.entries({ dtr, rts }).flatMap(([line, to]) =>
    to === undefined ? [] : [`${line}=${to}`],
  );
  return { kind: 'no-control-lines', asked: asked.join(', '), reason: error.message.replace(/^Error: /, '') };
}

/** What is under way is still sent by the system, so there is nothing to cut when closing takes its time. */
function portOf(port: SerialPort): Pick<OpenPort, 'stream' | 'gone' | 'hangUp' | 'cut'> {
  return {
    stream: port,
    gone: 'the port is gone',
    hangUp: (done) => {
      if (!port.isOpen) {
        done();
        return;
      }
      port.close(done);
    },
    cut: () => undefined,
  };
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
