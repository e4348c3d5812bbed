import { expect, it } from 'vitest';
import { asReplayed, withAddresses } from '../../src/files/live-bench.js';
import { parseBench } from '../../src/files/read-bench.js';

const text = `railproof: bench 1
name: nursery group   # what stays stays
instruments:
  load: { driver: load-input-scpi, connection: 'simulated:' }
  meter: { driver: meter-read-scpi, connection: 'simulated:' }
voltage-from: meter-at-module
limits: { voltage: 60 V, current: 8 A, power: 120 W }
group:
  measured-by: meters
  places:
    - meter: { driver: meter-query-scpi, connection: 'simulated:' }
    - meter: { driver: meter-query-scpi, connection: 'simulated:' }
simulation:
  circuit: series
  modules:
    - { name: K1, open-circuit-voltage: 15 V, droop-resistance: 18 mΩ, limit: { style: hiccup, current: 5 A } }
    - { name: K2, open-circuit-voltage: 15 V, droop-resistance: 18 mΩ, limit: { style: hiccup, current: 5 A } }
`;

it('a served bench is real to whoever uses it: every address of it, those at the places among them', () => {
  const live = withAddresses(text, {
    load: 'tcp://127.0.0.1:1',
    meter: 'tcp://127.0.0.1:2',
    'meter-1': 'tcp://127.0.0.1:11',
    'meter-2': 'serial:/dev/pts/7?baud=115200',
  });
  expect(live).toContain('# what stays stays');
  const { instruments, group, simulation } = parseBench(live, 'live.yaml');
  expect(simulation).toBeUndefined();
  expect(instruments.load.connection).toEqual({ kind: 'tcp', host: '127.0.0.1', port: 1 });
  expect(instruments.meter?.connection).toMatchObject({ port: 2 });
  expect(group?.places.map(({ meter }) => meter?.connection)).toMatchObject([
    { kind: 'tcp', port: 11 },
    { kind: 'serial', path: '/dev/pts/7' },
  ]);
});

it('a replayed bench has a recording and a driver for each instrument, and the answers of the person', () => {
  const replayed = asReplayed(text, ['load', 'meter', 'meter-1', 'meter-2'], true);
  expect(replayed).toContain('# what stays stays');
  const { instruments, group, simulation, operator } = parseBench(replayed, 'replay.yaml');
  expect(simulation).toBeDefined();
  expect(operator).toEqual({ kind: 'replay', file: 'operator.jsonl' });
  const at = (post: string): object => ({
    driver: `driver-${post}.yaml`,
    connection: { kind: 'replay', file: `${post}.jsonl` },
  });
  expect(instruments).toEqual({ load: at('load'), meter: at('meter') });
  expect(group?.places.map(({ meter }) => meter)).toEqual([at('meter-1'), at('meter-2')]);
  const kept = parseBench(asReplayed(text, ['load', 'meter', 'meter-1', 'meter-2'], false), 'replay.yaml');
  expect(kept.instruments.load).toEqual({ ...at('load'), driver: 'load-input-scpi' });
});

it('an instrument that is written as another one again has an address of its own', () => {
  const place = "{ driver: meter-query-scpi, connection: 'simulated:' }";
  const twice = text
    .replace(`meter: ${place}`, `meter: &own ${place}`)
    .replace(`meter: ${place}`, 'meter: *own');
  expect(twice).toContain('meter: *own');
  const live = withAddresses(twice, {
    load: 'tcp://127.0.0.1:1',
    meter: 'tcp://127.0.0.1:2',
    'meter-1': 'tcp://127.0.0.1:11',
    'meter-2': 'tcp://127.0.0.1:12',
  });
  const { group } = parseBench(live, 'live.yaml');
  expect(group?.places.map(({ meter }) => meter?.connection)).toMatchObject([{ port: 11 }, { port: 12 }]);
});
