import { describe, expect, it } from 'vitest';
import { ConnectionLostError } from '../../src/instrument/errors.js';
import { Incoming } from '../../src/instrument/incoming.js';

function incoming() {
  const flow: string[] = [];
  const arriving = new Incoming({ pause: () => flow.push('pause'), resume: () => flow.push('resume') });
  return { arriving, flow };
}

const lost = new ConnectionLostError({ address: 'test:', reason: 'the other side hung up' });

describe('what arrives on a line', () => {
  it('is taken all at once, in order', async () => {
    const { arriving } = incoming();
    arriving.arrive(Buffer.from('15'));
    arriving.arrive(Buffer.from(''));
    arriving.arrive(Buffer.from('.1\n'));
    expect(Buffer.from((await arriving.take(1)) ?? []).toString()).toBe('15.1\n');
    expect(await arriving.take(0)).toBeUndefined();
  });

  it('ends the wait for it', async () => {
    const { arriving } = incoming();
    const waiting = arriving.take(10);
    arriving.arrive(Buffer.from('4'));
    expect(await waiting).toEqual(Buffer.from('4'));
  });

  it('is waited for as long as asked, to the fraction of a millisecond', async () => {
    const { arriving } = incoming();
    for (let time = 0; time < 10; time++) {
      const began = performance.now();
      expect(await arriving.take(0.0097)).toBeUndefined();
      expect(performance.now() - began).toBeGreaterThanOrEqual(9.7);
    }
  });

  it('is not waited for any longer than asked', async () => {
    const { arriving } = incoming();
    const began = performance.now();
    expect(await arriving.take(0.02)).toBeUndefined();
    expect(performance.now() - began).toBeGreaterThan(18);
  });

  it('ends the next wait for it too, though it came just as the last one was over', async () => {
    const { arriving } = incoming();
    const first = arriving.take(0.02);
    // Timers of the same length fire together, in the order in which they were set.
    setTimeout(() => {
      arriving.arrive(Buffer.from('4'));
    }, 20);
    expect(await first).toEqual(Buffer.from('4'));
    const second = arriving.take(20);
    setTimeout(() => {
      arriving.arrive(Buffer.from('5'));
    }, 20);
    const late = new Promise((resolve) => setTimeout(resolve, 5000, 'late').unref());
    expect(await Promise.race([second, late])).toEqual(Buffer.from('5'));
  });

  it('is found without waiting when the system already holds it', async () => {
    const { arriving } = incoming();
    setImmediate(() => {
      arriving.arrive(Buffer.from('4'));
    });
    expect(await arriving.take(0)).toEqual(Buffer.from('4'));
  });

  it('is still given after the end; then the first reason of the end', async () => {
    const { arriving } = incoming();
    arriving.arrive(Buffer.from('4'));
    arriving.end(lost);
    arriving.end(new ConnectionLostError({ address: 'test:', reason: 'it was closed here' }));
    arriving.arrive(Buffer.from('too late'));
    expect(await arriving.take(1)).toEqual(Buffer.from('4'));
    await expect(arriving.take(1)).rejects.toBe(lost);
    await expect(arriving.take(0)).rejects.toBe(lost);
  });

  it('is held back at the sender once there is much of it, until it is taken', async () => {
    const { arriving, flow } = incoming();
    for (let count = 0; count < 5; count++) arriving.arrive(new Uint8Array(100 * 1024));
    expect(flow).toEqual(['pause']);
    expect(await arriving.take(0)).toHaveLength(500 * 1024);
    expect(flow).toEqual(['pause', 'resume']);
  });
});
