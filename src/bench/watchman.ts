import type { Clock } from '../clock/clock.js';
import type { Seconds } from '../quantity/quantity.js';
import { loadMayStillBeOn, type Safety } from './make-safe.js';
import { lookEvery, Vigil, type Word } from './watchman-vigil.js';

/** The process that performs the run, as the watchman sees it. */
export interface Runner {
  /** The words said since this was last asked for. */
  heard(): readonly Word[];
  /** Aborted when its end of the line is closed, which the system does for whoever dies. */
  readonly gone: AbortSignal;
  /** Ends one that hangs: it still holds its ports. */
  end(): void;
}

export interface WatchmanParts {
  readonly runner: Runner;
  readonly clock: Clock;
  /** Switches the load off, trying again after each of the pauses. Never rejects. */
  readonly makeSafe: (
    pauses: Iterable<Seconds>,
  ) => Promise<{ readonly safety: Safety; readonly address: string }>;
  /** For whoever is still there to read it. */
  readonly say: (text: string) => void;
}

export type WhyAlarmed = 'runner-vanished' | 'runner-stopped-beating';

/** What the watchman did. */
export interface Deed {
  readonly why: WhyAlarmed;
  readonly noticed: Date;
  readonly address: string;
  /** How many times it tried to reach the load and to switch it off. */
  readonly attempts: number;
  readonly safety: Safety;
  /** From noticing to the load off and read back, or given up. */
  readonly took: Seconds;
}

/** How long a load that can't be reached is tried for. */
const patience: Seconds = 60;
/** After this a person should know that the load is not off yet. */
const untilSaid: Seconds = 3;
/** How long a runner that was ended may take to let go of its ports. */
const dying: Seconds = 2;

/**
 * Watches over a run until it is over, which gives nothing to tell, or until the runner is gone or hangs:
 * then the load is switched off and read back. A living runner is never fought for a port: it is gone, or it
 * is ended first. Never rejects.
 */
export async function keepWatch(parts: WatchmanParts): Promise<Deed | undefined> {
  const { runner, clock } = parts;
  const vigil = new Vigil(clock.now());
  for (;;) {
    // First whether it is gone, then what it said: so its last words are heard before its going counts.
    const isGone = runner.gone.aborted;
    runner.heard().forEach((word) => {
      vigil.hear(word);
    });
    if (vigil.isDone) return undefined;
    if (isGone) return act('runner-vanished', parts);
    if (vigil.hangs(clock.now())) {
      runner.end();
      await awake(clock, dying, runner.gone);
      return act('runner-stopped-beating', parts);
    }
    await awake(clock, lookEvery, runner.gone);
  }
}

async function act(why: WhyAlarmed, { clock, makeSafe, say }: WatchmanParts): Promise<Deed> {
  const noticed = clock.wall();
  const began = clock.now();
  let attempts = 0;
  const counted = function* (): Generator<Seconds> {
    let said = false;
    for (const pause of pauses(clock)) {
      if (!said && clock.now() - began > untilSaid) {
        said = true;
        say(`railproof: the load could not be switched off yet, trying on. ${loadMayStillBeOn}`);
      }
      attempts += 1;
      yield pause;
    }
  };
  const { safety, address } = await makeSafe(counted());
  return { why, noticed, address, attempts, safety, took: clock.now() - began };
}

/**
 * Before each attempt: at once; then short ones, as an instrument that serves one client at a time needs a
 * moment to see that the last one is gone; then a second each, as long as patience lasts.
 */
function* pauses(clock: Clock): Generator<Seconds> {
  const until = clock.now() + patience;
  yield 0;
  for (let pause = 0.1; clock.now() + pause < until; pause = Math.min(1, 1.25 * pause)) yield pause;
}

/** Waits, but not for one that is gone. */
async function awake(clock: Clock, most: Seconds, gone: AbortSignal): Promise<void> {
  await clock.sleep(most, gone).catch(() => undefined);
}
