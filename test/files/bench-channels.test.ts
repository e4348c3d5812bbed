import { describe, expect, it } from 'vitest';
import { driversOfChannels } from '../../src/files/bench-channels.js';
import { type Bench, type Post, postsOf } from '../../src/files/bench.js';
import type { Driver } from '../../src/files/driver.js';
import { parseBench } from '../../src/files/read-bench.js';
import type { FileRead } from '../../src/files/read-text.js';
import { toyDriver } from '../instrument/fixtures/toy-load.js';

function bench(load: string, meter = 'connection: tcp://127.0.0.1:5026'): FileRead<Bench> {
  const text = `railproof: bench 1
name: Nursery workshop
instruments:
  load:
    driver: ./toy.yaml
    ${load}
  meter:
    driver: ./toy.yaml
    ${meter}
limits: { voltage: 40 V, current: 8 A, power: 120 W }
voltage-from: meter-at-module
`;
  return { value: parseBench(text, 'nursery.yaml'), text, path: 'nursery.yaml' };
}

const single: Driver = { ...toyDriver, name: 'toy' };
const several: Driver = {
  ...single,
  name: 'toy-of-four',
  channels: { select: [{ text: 'INST:NSEL {channel}' }], first: 1, last: 4 },
};
const named: Driver = { ...several, channels: { select: [], first: 1, last: 4 } };

function drivers(of: FileRead<Bench>, load: Driver, meter: Driver) {
  const read = (value: Driver): FileRead<Driver> => ({ value, text: '', path: 'toy.yaml' });
  return driversOfChannels(
    of,
    postsOf(of.value).map(([post]) => ({ post, file: read(post === 'load' ? load : meter) })),
  );
}
const of = (all: ReturnType<typeof drivers>, post: Post) => all.find((one) => one.post === post)?.file.value;

describe('the drivers of a bench', () => {
  it('are each of the channel that it names', () => {
    const made = drivers(bench('connection: tcp://127.0.0.1:5025\n    channel: 2'), several, single);
    expect(of(made, 'load')?.operations['input-on']?.map(({ text }) => text)).toEqual([
      'INST:NSEL 2',
      'INP ON',
    ]);
    expect(of(made, 'load')?.channels).toBeUndefined();
    expect(of(made, 'meter')).toBe(single);
  });

  it.each([
    [
      'a channel where there is none',
      bench('connection: tcp://127.0.0.1:5025\n    channel: 2'),
      single,
      'nursery.yaml:7:14: instruments.load.channel: the driver toy knows of no channels; leave this out',
    ],
    [
      'no channel where there are several',
      bench('connection: tcp://127.0.0.1:5025'),
      several,
      "nursery.yaml:5:5: instruments.load: the driver toy-of-four is for instruments with several channels; say which with 'channel', from 1 to 4",
    ],
    [
      'a channel that there is not',
      bench('channel: 5\n    connection: tcp://127.0.0.1:5025'),
      several,
      'nursery.yaml:6:14: instruments.load.channel: found 5; the channels of the driver toy-of-four go from 1 to 4',
    ],
  ])('are refused with the line that names %s', (_, file, driver, message) => {
    expect(() => drivers(file, driver, single)).toThrow(
      expect.objectContaining({ code: 'BAD_FILE', exitCode: 65, message }) as Error,
    );
  });

  it('at one address are refused where what one chooses would be chosen for the other', () => {
    const file = bench(
      'connection: tcp://127.0.0.1:5025\n    channel: 1',
      'connection: tcp://127.0.0.1:5025\n    channel: 2',
    );
    expect(() => drivers(file, several, several)).toThrow(
      expect.objectContaining({
        code: 'BAD_FILE',
        message: expect.stringMatching(
          /^nursery\.yaml:10:17: instruments\.meter\.connection: the load is at tcp:\/\/127\.0\.0\.1:5025 too, /,
        ) as string,
      }) as Error,
    );
    expect(of(drivers(file, named, named), 'meter')).toBeDefined();
  });
});
