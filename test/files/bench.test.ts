import { expect, it } from 'vitest';
import {
  type BenchDrivers,
  driverAt,
  isPost,
  placeOf,
  type Post,
  postsOf,
  roleOf,
} from '../../src/files/bench.js';
import type { Bench, InstrumentPlace } from '../../src/files/bench.js';
import { loadDriver, meterDriver } from '../simulation/bench-parts.js';

const at = (port: number): InstrumentPlace => ({
  driver: 'x',
  connection: { kind: 'tcp', host: '127.0.0.1', port },
});
const source = { ...at(5), voltage: 24, current: 3, offFor: 5 };
const bench: Pick<Bench, 'instruments' | 'group'> = {
  instruments: { load: at(1), source, thermometer: at(4), scanner: at(3) },
  group: { measuredBy: 'meters', places: [{}, { meter: at(12) }, { meter: at(13) }] },
};

it('every instrument of a bench has a post, the load first; a place without a meter has none', () => {
  expect(postsOf(bench)).toEqual([
    ['load', at(1)],
    ['scanner', at(3)],
    ['thermometer', at(4)],
    ['source', source],
    ['meter-2', at(12)],
    ['meter-3', at(13)],
  ]);
  expect(postsOf({ instruments: { load: at(1), meter: at(2) } })).toEqual([
    ['load', at(1)],
    ['meter', at(2)],
  ]);
});

it.each<[Post, string, readonly (string | number)[]]>([
  ['load', 'load', ['instruments', 'load']],
  ['meter', 'meter', ['instruments', 'meter']],
  ['scanner', 'scanner', ['instruments', 'scanner']],
  ['thermometer', 'thermometer', ['instruments', 'thermometer']],
  ['source', 'source', ['instruments', 'source']],
  ['meter-2', 'meter', ['group', 'places', 1, 'meter']],
])('the post %s is for a %s, and stands in the file at %j', (post, role, place) => {
  expect(roleOf(post)).toBe(role);
  expect(placeOf(post)).toEqual(place);
  expect(isPost(post)).toBe(true);
});

it.each(['sources', 'meter-', 'meter-0', 'meter-x', 'meter-100', 'Load', ''])('"%s" is no post', (text) => {
  expect(isPost(text)).toBe(false);
});

it('the driver of a post is found where the places have meters, and gaps between them', () => {
  const drivers: BenchDrivers = { load: loadDriver, places: [undefined, meterDriver] };
  expect(driverAt(drivers, 'load')).toBe(loadDriver);
  expect(driverAt(drivers, 'meter-1')).toBeUndefined();
  expect(driverAt(drivers, 'meter-2')).toBe(meterDriver);
  expect(driverAt(drivers, 'meter-3')).toBeUndefined();
  expect(driverAt(drivers, 'scanner')).toBeUndefined();
});
