import type { Clock } from '../clock/clock.js';
import { type Bench, type BenchDrivers, driverAt, type Post, postsOf, roleOf } from '../files/bench.js';
import type { Connect } from '../instrument/connect.js';
import { Instrument, type InstrumentParts } from '../instrument/instrument.js';
import type { Seconds } from '../quantity/quantity.js';
import { Audience } from './audience.js';
import { type Ceilings, ceilingsOf } from './ceilings.js';
import { Connections } from './connections.js';
import { sayWhatIsOn } from './found-on.js';
import { type InputListener, Load } from './load.js';
import { checkAgainstLoad } from './meter-against-load.js';
import { MeterPlaces } from './meter-places.js';
import type { SampleWanted, Taken } from './sample.js';
import { Source } from './source.js';
import { WaysBack } from './ways-back.js';

export interface BenchParts {
  readonly bench: Bench;
  readonly drivers: BenchDrivers;
  readonly connect: Connect;
  readonly clock: Clock;
  /** Of the run, where there is one; without them what the bench and its instruments allow. */
  readonly ceilings?: Ceilings;
  readonly onInput: InputListener;
  readonly onNotice: (text: string) => void;
  /** Aborted when the run must stop: no connection that was lost is then waited for. */
  readonly signal?: AbortSignal;
  /** `make-safe` tells the load what makes it safe before anything is asked of it. */
  readonly first?: InstrumentParts['first'];
}

/** The instruments of one bench, opened together. */
export interface OpenBench {
  readonly description: Bench;
  readonly ceilings: Ceilings;
  /** The one that was opened last. */
  readonly load: Load;
  readonly meter: Instrument | undefined;
  readonly thermometer: Instrument | undefined;
  /** What feeds the modules, where the tool switches it; the one that was opened last. */
  readonly source: Source | undefined;
  /** Where the meters' probes are. */
  readonly places: MeterPlaces;
  readonly instruments: readonly BenchInstrument[];
  /**
   * Reads everything there is to read at one moment; `each` is told of every value as it comes, the load's
   * current last.
   * @throws WrongPlaceError, when a meter does not read what it should
   */
  sample(each: (taken: Taken) => void, wanted?: SampleWanted): Promise<readonly Taken[]>;
  /**
   * Closes the load's connection and, after a pause, opens it again to make it safe: what makes it safe is
   * told before anything is asked. Hands over a load that answers.
   */
  reopenLoad(pause: Seconds): Promise<Load>;
  /** The same for the source, where there is one. */
  reopenSource(pause: Seconds): Promise<Source>;
  /** How often a connection was lost, or an answer did not come as it should: what is measured across that is no measurement. */
  readonly gaps: number;
  /** What was the matter the last time, in words. */
  readonly latestGap: string | undefined;
  /**
   * Gives up whatever is under way with any instrument, for whoever can't wait: all connections are closed, and
   * a question without an answer ends. The load can be opened afresh. Never rejects.
   */
  cut(): Promise<void>;
  /** Does something that no listener can stop: a journal on a full disk must not keep the load on. */
  regardless<T>(work: () => Promise<T>): Promise<T>;
  /** Sends each instrument its parting messages and closes all connections. Never rejects. */
  close(): Promise<void>;
}

/** An instrument and its post on the bench. */
export interface BenchInstrument {
  readonly post: Post;
  readonly instrument: Instrument;
}

/**
 * Opens the instruments of a bench; those already open are closed again when one of them fails.
 * Nothing is switched on. Posts for which no driver is given are left alone.
 * @throws FoundOnError when another instrument fails and the load is on, though nobody here switched it on
 */
export async function openBench(wanted: BenchParts): Promise<OpenBench> {
  const connections = new Connections(wanted.connect);
  const parts = { ...wanted, connect: connections.connect };
  const audience = new Audience(parts.onInput, parts.onNotice);
  const ways = new WaysBack({ connect: parts.connect, signal: parts.signal, audience });
  // For a load that is only made safe there is no way back but that.
  const wayTo = parts.first === 'make-safe' ? undefined : ways;
  const load = await openInstrument(parts, audience, 'load', { first: parts.first }, wayTo);
  const others: BenchInstrument[] = [];
  try {
    for (const [post] of postsOf(parts.bench)) {
      if (post === 'load' || driverAt(parts.drivers, post) === undefined) continue;
      parts.signal?.throwIfAborted();
      others.push({ post, instrument: await openInstrument(parts, audience, post, {}, wayTo) });
    }
    return assemble(parts, audience, connections, ways, load, others);
  } catch (error) {
    const told = await sayWhatIsOn(load, error);
    for (const { instrument } of others) await instrument.leave();
    await load.leave();
    throw told;
  }
}

function assemble(
  parts: BenchParts,
  audience: Audience,
  connections: Connections,
  ways: WaysBack,
  first: Instrument,
  others: readonly BenchInstrument[],
): OpenBench {
  const ceilings = parts.ceilings ?? ceilingsOf(parts.bench, parts.drivers);
  let load = new Load(first, ceilings, audience.input);
  const at = (post: Post): Instrument | undefined => others.find((one) => one.post === post)?.instrument;
  const meter = at('meter');
  const scanner = at('scanner');
  const thermometer = at('thermometer');
  let source = sourceOf(parts, at('source'));
  const places = new MeterPlaces({
    group: parts.bench.group,
    clock: parts.clock,
    meter,
    scanner,
    ownOf: (place) => at(`meter-${place}`),
  });
  const instruments = (): readonly BenchInstrument[] => [
    { post: 'load', instrument: load.instrument },
    ...others.map(({ post, instrument }) => ({
      post,
      instrument: post === 'source' && source !== undefined ? source.instrument : instrument,
    })),
  ];
  const reopened = async (post: Post, before: Instrument, pause: Seconds): Promise<Instrument> => {
    await before.close();
    await parts.clock.sleep(pause);
    // Of another one of the same make, found at an address that has changed hands, off would prove nothing.
    const { identity } = before;
    return openInstrument(parts, audience, post, { first: 'make-safe', identity });
  };
  const lookAgain = async (): Promise<readonly Taken[]> => {
    const { gaps } = ways;
    const seen: Taken[] = [];
    await places.read([], (one) => seen.push(one));
    const atLoad: Taken = { of: 'load', what: 'voltage', measurement: await load.readVoltage() };
    // Across a gap the two do not belong together, and contradict nothing.
    return ways.gaps === gaps ? [...seen, atLoad] : [];
  };
  const regardless = <T>(work: () => Promise<T>): Promise<T> => audience.regardless(work);
  return {
    description: parts.bench,
    ceilings,
    get load() {
      return load;
    },
    meter,
    thermometer,
    get source() {
      return source;
    },
    places,
    get instruments() {
      return instruments();
    },
    async sample(each, { taps = [], temperature = false, compared = true } = {}) {
      const { gaps } = ways;
      const taken: Taken[] = [];
      const take = (one: Taken): void => {
        each(one);
        taken.push(one);
      };
      await places.read(taps, take);
      if (temperature && thermometer) {
        take({ of: 'thermometer', what: 'temperature', measurement: await thermometer.read('temperature') });
      }
      take({ of: 'load', what: 'voltage', measurement: await load.readVoltage() });
      take({ of: 'load', what: 'current', measurement: await load.readCurrent() });
      if (compared && ways.gaps === gaps) await checkAgainstLoad(parts.bench, taken, lookAgain);
      return taken;
    },
    async reopenLoad(pause) {
      load = new Load(await reopened('load', load.instrument, pause), ceilings, audience.input);
      return load;
    },
    async reopenSource(pause) {
      if (source === undefined) throw new Error('the bench has no source');
      source = new Source(await reopened('source', source.instrument, pause), source.feed, parts.clock);
      return source;
    },
    get gaps() {
      return ways.gaps;
    },
    get latestGap() {
      return ways.latest;
    },
    cut: () => {
      ways.giveUp();
      return connections.giveUp();
    },
    regardless,
    close: () =>
      regardless(async () => {
        await places.release().catch(() => undefined);
        for (const { instrument } of instruments()) {
          await instrument.release().catch(() => undefined);
          await instrument.close();
        }
      }),
  };
}

function sourceOf({ bench, clock }: BenchParts, instrument: Instrument | undefined): Source | undefined {
  const { source: feed } = bench.instruments;
  return instrument === undefined || feed === undefined ? undefined : new Source(instrument, feed, clock);
}

/** One instrument, at its post. @throws as `Instrument.open`; the connection is closed then */
export async function openInstrument(
  { bench, drivers, connect, clock }: Pick<BenchParts, 'bench' | 'drivers' | 'connect' | 'clock'>,
  { notice }: Audience,
  post: Post,
  { first = 'identity', identity }: { first?: InstrumentParts['first']; identity?: string },
  ways?: WaysBack,
): Promise<Instrument> {
  const place = postsOf(bench).find(([one]) => one === post)?.[1];
  const driver = driverAt(drivers, post);
  if (place === undefined || driver === undefined) throw new Error(`the bench has no ${post}`);
  const connection = await connect(place.connection, driver, post);
  const wayBack = ways?.to(place.connection, driver, post);
  // When this fails it has closed the connection.
  return Instrument.open({
    role: roleOf(post),
    driver,
    connection,
    clock,
    onNotice: notice,
    first,
    ...(identity !== undefined && { identity }),
    ...(wayBack && { wayBack }),
  });
}
