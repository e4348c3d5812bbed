import { readdir, realpath } from 'node:fs/promises';
import { join } from 'node:path';

export interface PortListing {
  readonly path: string;
  /** What the system knows of what is plugged in there; empty when it knows nothing. */
  readonly description: string;
}

/**
 * The serial ports of this machine. Where the system cannot be asked (on Linux that takes `udevadm`, which
 * small installations lack) the device folder is read instead. Never rejects.
 * @param devices the device folder, for tests
 */
export async function listPorts(devices = '/dev'): Promise<readonly PortListing[]> {
  const asked = await askSystem();
  return asked.length > 0 ? asked : await readFolder(devices);
}

async function askSystem(): Promise<readonly PortListing[]> {
  try {
    const { SerialPort } = await import('serialport');
    const ports = await SerialPort.list();
    return ports.map(({ path, manufacturer, serialNumber, pnpId }) => ({
      path,
      description: [manufacturer, serialNumber ?? pnpId].filter((part) => part !== undefined).join(' '),
    }));
  } catch {
    return [];
  }
}

async function readFolder(devices: string): Promise<readonly PortListing[]> {
  const descriptions = new Map<string, string>();
  const byId = join(devices, 'serial', 'by-id');
  for (const name of await namesIn(byId)) {
    const path = await realpath(join(byId, name)).catch(() => undefined);
    if (path !== undefined) descriptions.set(path, name);
  }
  for (const name of await namesIn(devices)) {
    const path = await realpath(join(devices, name)).catch(() => undefined);
    if (/^tty(?:USB|ACM)\d+$/.test(name) && path !== undefined && !descriptions.has(path))
      descriptions.set(path, '');
  }
  return [...descriptions]
    .map(([path, description]) => ({ path, description }))
    .sort((one, other) => one.path.localeCompare(other.path, 'en', { numeric: true }));
}

async function namesIn(folder: string): Promise<readonly string[]> {
  return readdir(folder).catch(() => []);
}
