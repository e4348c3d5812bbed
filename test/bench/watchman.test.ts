import { describe, expect, it } from 'vitest';
import { makeSafeUnopened } from '../../src/bench/make-safe.js';
import { type Deed, keepWatch } from '../../src/bench/watchman.js';
import type { Word } from '../../src/bench/watchman-vigil.js';
import type { Clock } from '../../src/clock/clock.js';
import { VirtualClock } from '../../src/clock/virtual-clock.js';
import { InstrumentUnreachableError } from '../../src/instrument/connection-errors.js';
import { toyDriver, toyLoad } from '../instrument/fixtures/toy-load.js';
import { VirtualLine } from '../instrument/fixtures/virtual-line.js';
import { nursery } from './nursery-bench.js';

const { description } = await nursery();

interface Play {
  /** What the runner says, and when. */
  readonly says: readonly (readonly [number, Word])[];
  /** It beats every half second up to here. */
  readonly beatsUntil?: number;
  /** Of itself. */
  readonly diesAt?: number;
  /** How long it takes to die when it is ended. */
  readonly dying?: number;
  /** How often the load refuses a connection first. */
  readonly refusals?: number;
  readonly replies?: Readonly<Record<string, string | undefined>>;
}

interface Seen {
  readonly deed: Deed | undefined;
  /** When, and in which order, the runner died, it was ended, and the load was reached for and heard words. */
  readonly events: readonly string[];
  readonly said: readonly string[];
  readonly input: string;
  readonly clock: Clock;
}

/** A watch over a runner of which it is known beforehand what it does, and a load in use, on virtual time. */
async function watchOver(play: Play): Promise<Seen> {
  const virtual = new VirtualClock(new Date('2026-11-30T09:15:00Z'));
  const gone = new AbortController();
  const events: string[] = [];
  const note = (what: string): void => void events.push(`${virtual.now().toFixed(1)} ${what}`);
  let diesAt = play.diesAt ?? Number.POSITIVE_INFINITY;
  const clock: Clock = {
    now: () => virtual.now(),
    wall: () => virtual.wall(),
    sleep: async (seconds, signal) => {
      signal?.throwIfAborted();
      const left = gone.signal.aborted ? Number.POSITIVE_INFINITY : Math.max(0, diesAt - virtual.now());
      await virtual.sleep(Math.min(seconds, left));
      if (left <= seconds) {
        note('runner gone');
        gone.abort();
      }
      signal?.throwIfAborted();
    },
  };
  const beats = Array.from({ length: Math.floor((play.beatsUntil ?? 0) / 0.5) + 1 }, (_, at) => at * 0.5);
  const toSay = [...play.says, ...beats.map((at) => [at, 'beat'] as const)].sort(([a], [b]) => a - b);
  const toy = toyLoad(play.replies ? { replies: play.replies } : {});
  toy.state.input = '1';
  let refusals = play.refusals ?? 0;
  const said: string[] = [];
  const deed = await keepWatch({
    clock,
    runner: {
      gone: gone.signal,
      heard: () => {
        const words: Word[] = [];
        while ((toSay[0]?.[0] ?? Number.POSITIVE_INFINITY) <= virtual.now()) {
          const [, word = 'beat'] = toSay.shift() ?? [];
          words.push(word);
        }
        return words;
      },
      end: () => {
        note('runner ended');
        diesAt = virtual.now() + (play.dying ?? 0.1);
      },
    },
    makeSafe: (pauses) =>
      makeSafeUnopened(
        {
          bench: description,
          drivers: { load: toyDriver },
          clock,
          connect: () => {
            note('load reached for');
            refusals -= 1;
            if (refusals >= 0)
              return Promise.reject(
                new InstrumentUnreachableError({ address: 'virtual:', reason: 'it refused' }),
              );
            return Promise.resolve(new VirtualLine(virtual, toy.react));
          },
        },
        pauses,
      ),
    say: (text) => said.push(text),
  });
  return { deed, events, said, input: toy.state.input, clock };
}

describe('the watchman', () => {
  it('goes when the run is over, and has touched nothing', async () => {
    const seen = await watchOver({
      says: [
        [1, 'on'],
        [9, 'off'],
        [10, 'done'],
      ],
      beatsUntil: 10,
      diesAt: 10.2,
    });
    expect(seen.deed).toBeUndefined();
    expect(seen.events.filter((event) => event.includes('load'))).toEqual([]);
    expect(seen.said).toEqual([]);
    expect(seen.input).toBe('1');
  });

  it('hears the last word of a runner that goes right after it', async () => {
    const { deed } = await watchOver({
      says: [
        [1, 'on'],
        [9.7, 'off'],
        [9.7, 'done'],
      ],
      beatsUntil: 9,
      diesAt: 9.7,
    });
    expect(deed).toBeUndefined();
  });

  it('switches the load off at once when the runner is gone without a word', async () => {
    const { deed, events, input } = await watchOver({ says: [[1, 'on']], beatsUntil: 20, diesAt: 7.3 });
    expect(input).toBe('0');
    expect(deed).toMatchObject({ why: 'runner-vanished', attempts: 1, safety: { kind: 'confirmed' } });
    expect(deed?.took).toBeLessThan(0.2);
    expect(deed?.noticed).toEqual(new Date('2026-11-30T09:15:07.300Z'));
    expect(events).toEqual(['7.3 runner gone', '7.3 load reached for']);
  });

  it('does so whatever the runner said of the input', async () => {
    const { deed, input } = await watchOver({
      says: [
        [1, 'on'],
        [3, 'off'],
      ],
      beatsUntil: 20,
      diesAt: 7,
    });
    expect(deed?.why).toBe('runner-vanished');
    expect(input).toBe('0');
  });

  it('ends a runner that hangs with the load on, and waits for it to be gone before it reaches for the load', async () => {
    const { deed, events, input } = await watchOver({ says: [[1, 'on']], beatsUntil: 6, dying: 0.3 });
    expect(deed).toMatchObject({ why: 'runner-stopped-beating', safety: { kind: 'confirmed' } });
    expect(input).toBe('0');
    expect(events).toEqual(['10.0 runner ended', '10.3 runner gone', '10.3 load reached for']);
  });

  it('reaches for the load all the same where the system does not get rid of the runner', async () => {
    const { deed, events } = await watchOver({ says: [[1, 'on']], beatsUntil: 6, dying: 1000 });
    expect(events).toEqual(['10.0 runner ended', '12.0 load reached for']);
    expect(deed?.safety.kind).toBe('confirmed');
  });

  it('leaves a runner alone that is slow with the load off', async () => {
    const { deed, events } = await watchOver({
      says: [
        [1, 'on'],
        [2, 'off'],
        [500, 'done'],
      ],
      beatsUntil: 2,
    });
    expect(deed).toBeUndefined();
    expect(events).toEqual([]);
  });

  it('tries again, soon at first, where an instrument has not noticed yet that its client is gone', async () => {
    const { deed, said, input } = await watchOver({ says: [[0, 'on']], diesAt: 1, refusals: 4 });
    expect(deed).toMatchObject({ attempts: 5, safety: { kind: 'confirmed' } });
    expect(deed?.took).toBeLessThan(1);
    expect(said).toEqual([]);
    expect(input).toBe('0');
  });

  it('says after some seconds that the load may still be on, once, and goes on trying', async () => {
    const { deed, said } = await watchOver({ says: [[0, 'on']], diesAt: 1, refusals: 30 });
    expect(said).toHaveLength(1);
    expect(said[0]).toMatch(/not be switched off yet.*THE LOAD MAY STILL BE ON/);
    expect(deed).toMatchObject({ attempts: 31, safety: { kind: 'confirmed' } });
  });

  it('gives up after a minute, with the reason and what to do by hand', async () => {
    const { deed } = await watchOver({ says: [[0, 'on']], diesAt: 1, refusals: 1e9 });
    expect(deed?.safety).toMatchObject({
      kind: 'unconfirmed',
      why: expect.stringContaining('it refused') as string,
      advice: expect.stringContaining('THE LOAD MAY STILL BE ON') as string,
    });
    expect(deed?.took).toBeGreaterThan(57);
    expect(deed?.took).toBeLessThan(62);
  });

  it('has told a load that never answers to be off', async () => {
    const { deed, input } = await watchOver({
      says: [[0, 'on']],
      diesAt: 1,
      replies: { '*IDN?': undefined, 'INP?': undefined, 'SYST:ERR?': undefined },
    });
    expect(deed?.safety.kind).toBe('unconfirmed');
    expect(input).toBe('0');
  });
});
