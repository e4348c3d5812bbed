import { expect, it } from 'vitest';
import { OtherBenchError, requireSameBench } from '../../src/cli/resume-bench.js';
import type { Bench, SourcePlace } from '../../src/files/bench.js';
import { nursery } from '../bench/nursery-bench.js';

const { description: recorded } = await nursery({ file: 'nursery-source' });

function withSource(change: Partial<SourcePlace>): Bench {
  const { source } = recorded.instruments;
  if (source === undefined) throw new Error('there is no source on this bench');
  return { ...recorded, instruments: { ...recorded.instruments, source: { ...source, ...change } } };
}

it('a bench whose source is at another address, or another output of it, is the same', () => {
  const elsewhere = { connection: { kind: 'tcp', host: '127.0.0.1', port: 1 }, channel: 2 } as const;
  expect(() => {
    requireSameBench(withSource(elsewhere), 'bench.yaml', recorded);
  }).not.toThrow();
});

it.each<[Partial<SourcePlace>, string]>([
  [{ voltage: 12 }, 'instruments.source.voltage was 24 and is 12'],
  [{ current: 2 }, 'instruments.source.current was 4 and is 2'],
  [{ offFor: 60 }, 'instruments.source.off-for was 5 and is 60'],
])('one that feeds the module otherwise, %j, is another', (change, words) => {
  expect(() => {
    requireSameBench(withSource(change), 'bench.yaml', recorded);
  }).toThrow(OtherBenchError);
  expect(() => {
    requireSameBench(withSource(change), 'bench.yaml', recorded);
  }).toThrow(words);
});
