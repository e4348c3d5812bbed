import { spawnSync } from 'node:child_process';
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { describe, expect, it, onTestFinished } from 'vitest';
import { Guards } from '../../src/bench/guards.js';
import { openBench } from '../../src/bench/open-bench.js';
import { realClock } from '../../src/clock/real-clock.js';
import type { ConnectionAddress } from '../../src/files/bench.js';
import { readBench } from '../../src/files/read-bench.js';
import { readDriver } from '../../src/files/read-driver.js';
import { connectorFor } from '../../src/instrument/connect.js';
import { openSerial } from '../../src/instrument/serial-connection.js';
import { openTcp } from '../../src/instrument/tcp-connection.js';
import type { JournalEvent } from '../../src/record/journal-event.js';
import { serveOnPty } from '../../src/simulation/serve-pty.js';
import { serveBench } from '../../src/simulation/serve.js';
import { stepKinds } from '../../src/steps/index.js';
import { cuttable } from './cuttable.js';
import { k1, nobody } from './one-step.js';

const withoutSocat = spawnSync('socat', ['-V']).error !== undefined && process.env['CI'] === undefined;
const fromHere = (path: string): string => fileURLToPath(new URL(path, import.meta.url));
const shelves = { relativeTo: fromHere('../../fixtures'), shipped: fromHere('../../drivers') };
const meterPlug = { kind: 'tcp', host: '127.0.0.1' } as const;

/** A load ramp over real lines in real time; the load's line is cut in the middle of its second point. */
async function cutInMidRamp(lines: 'tcp' | 'pty') {
  const { value: described } = await readBench(fromHere('../../fixtures/benches/nursery.yaml'));
  const drivers = {
    load: (await readDriver('load-input-scpi', shelves)).value,
    meter: (await readDriver('meter-read-scpi', shelves)).value,
  };
  const served = await serveBench({ bench: described, drivers, clock: realClock });
  onTestFinished(() => served.close());
  const portOf = (post: 'load' | 'meter'): number => Number(/\d+$/.exec(served.addresses[post] ?? '')?.[0]);
  const line = await cuttable(portOf('load'));
  const load: ConnectionAddress =
    lines === 'tcp' ? { kind: 'tcp', host: '127.0.0.1', port: line.port } : await onPty(line.port);
  const events: JournalEvent[] = [];
  const append = (event: JournalEvent): void => {
    events.push(event);
    if (event.event === 'reading' && event.point === 2 && event.sample === 2 && event.of === 'meter') {
      line.cutFor(0.4);
    }
  };
  const description = {
    ...described,
    instruments: {
      load: { driver: 'load-input-scpi', connection: load },
      meter: {
        driver: 'meter-read-scpi',
        connection: { ...meterPlug, port: portOf('meter') },
      },
    },
  };
  const bench = await openBench({
    bench: description,
    drivers,
    clock: realClock,
    connect: connectorFor({ tcp: (address) => openTcp(address), serial: (address) => openSerial(address) }),
    onInput: (state, confirmed) => {
      append({ event: 'input', state, confirmed });
    },
    onNotice: (text) => {
      append({ event: 'notice', text });
    },
  });
  onTestFinished(() => bench.close());
  await bench.load.prepare();
  const limits = { ...bench.ceilings, ratedVoltage: 15 };
  const kind = stepKinds.find((one) => one.kind === 'load-ramp');
  const parameters = { from: '0 A', to: '3 A', points: 4, dwell: '20 ms', readings: 3 };
  await kind?.perform(kind.parameters.parse(parameters), {
    step: 1,
    bench,
    limits,
    guards: new Guards(limits, description, drivers),
    underTest: { circuit: 'single', modules: [k1], name: 'K1', rated: k1.rated },
    journal: { append },
    clock: realClock,
    signal: new AbortController().signal,
    operator: nobody,
    known: { 'rated-voltage': 15, 'rated-current': 4 },
    tried: {},
    earths: new Map(),
    latches: { cleared: 0 },
    show: () => undefined,
  });
  return { events, world: served.world, load: bench.load.address };
}

async function onPty(port: number): Promise<ConnectionAddress> {
  const folder = await mkdtemp(join(tmpdir(), 'railproof-gap-'));
  const path = join(folder, 'load');
  const pty = await serveOnPty({ port, link: path, clock: realClock });
  onTestFinished(async () => {
    await pty.close();
    await rm(folder, { recursive: true, force: true });
  });
  return { kind: 'serial', path, baud: 115200, data: 8, parity: 'none', stop: 1, flow: 'none' };
}

describe('a line that drops in the middle of a ramp and comes back', () => {
  it.each(['tcp', ...(withoutSocat ? [] : ['pty' as const])] as const)(
    'is opened again, and its point taken again: %s',
    async (lines) => {
      const { events, world, load } = await cutInMidRamp(lines);
      const outcomes = events.flatMap((event) => (event.event === 'point-ended' ? [event.outcome] : []));
      expect(outcomes).toEqual(['held', 'interrupted', 'held', 'held', 'held']);
      const sets = events.flatMap((event) => (event.event === 'point-began' ? [event.set.current] : []));
      expect(sets).toEqual([0, 1, 1, 2, 3]);
      const inputs = events.flatMap((event) => (event.event === 'input' ? [event.state] : []));
      expect(inputs).toEqual(['on', 'on', 'on', 'off']);
      const notices = events.flatMap((event) => (event.event === 'notice' ? [event.text] : []));
      expect(notices.some((text) => text.startsWith(load) && text.endsWith('its input is still on'))).toBe(
        true,
      );
      for (const event of events) {
        if (event.event === 'reading' && event.of === 'load' && event.what === 'current') {
          const set = events.find((one) => one.event === 'point-began' && one.point === event.point);
          const told = set?.event === 'point-began' ? (set.set.current ?? 0) : 0;
          expect(Math.abs((event.value ?? 99) - told)).toBeLessThan(0.1);
        }
      }
      expect(world.load).toMatchObject({ input: 'off', setCurrent: 0 });
    },
    60_000,
  );
});
