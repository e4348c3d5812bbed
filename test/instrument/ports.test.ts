import { mkdir, mkdtemp, rm, symlink, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it, onTestFinished, vi } from 'vitest';
import { listPorts } from '../../src/instrument/ports.js';

async function folder(): Promise<string> {
  const path = await mkdtemp(join(tmpdir(), 'railproof-ports-'));
  onTestFinished(() => rm(path, { recursive: true, force: true }));
  return path;
}

describe.skipIf(process.platform !== 'linux')('the list of serial ports where udevadm is missing', () => {
  it('is read from the device folder, with the names that the cables go by', async () => {
    vi.stubEnv('PATH', '');
    const devices = await folder();
    for (const name of ['ttyUSB0', 'ttyUSB10', 'ttyUSB2', 'ttyACM0', 'ttyS0', 'null', 'ttyUSBx']) {
      await writeFile(join(devices, name), '');
    }
    await mkdir(join(devices, 'serial', 'by-id'), { recursive: true });
    await symlink('../../ttyUSB2', join(devices, 'serial', 'by-id', 'usb-green_cable-if00'));
    await symlink('../../ttyUSB9', join(devices, 'serial', 'by-id', 'usb-pulled_out-if00'));
    const ports = await listPorts(devices);
    expect(ports).toEqual([
      { path: join(devices, 'ttyACM0'), description: '' },
      { path: join(devices, 'ttyUSB0'), description: '' },
      { path: join(devices, 'ttyUSB2'), description: 'usb-green_cable-if00' },
      { path: join(devices, 'ttyUSB10'), description: '' },
    ]);
  });

  it('is empty where there are none, or no such folder', async () => {
    vi.stubEnv('PATH', '');
    expect(await listPorts(await folder())).toEqual([]);
    expect(await listPorts('/no/such/folder')).toEqual([]);
  });
});

describe('the list of serial ports of this machine', () => {
  it('comes without an error, whatever there is', async () => {
    for (const port of await listPorts()) {
      expect(port).toEqual({ path: expect.any(String) as string, description: expect.any(String) as string });
    }
    expect(Array.isArray(await listPorts())).toBe(true);
  });
});
