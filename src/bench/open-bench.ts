import type { Clock } from '../clock/clock.js';
import type { Bench, BenchDrivers } from '../files/bench.js';
import type { Driver } from '../files/driver.js';
import type { Connect } from '../instrument/connect.js';
import { Instrument, type InstrumentParts } from '../instrument/instrument.js';
import type { Seconds } from '../quantity/quantity.js';
import { Audience } from './audience.js';
import { type Ceilings, ceilingsOf } from './ceilings.js';
import { sayWhatIsOn } from './found-on.js';
import { type InputListener, Load } from './load.js';
import type { Taken } from './sample.js';

export interface BenchParts {
  readonly bench: Bench;
  readonly drivers: BenchDrivers;
  readonly connect: Connect;
  readonly clock: Clock;
  readonly onInput: InputListener;
  readonly onNotice: (text: string) => void;
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
  readonly instruments: readonly Instrument[];
  /** Reads everything there is to read at one moment; `each` is told of every value as it comes. */
  sample(each: (taken: Taken) => void): Promise<readonly Taken[]>;
  /**
   * Closes the load's connection and, after a pause, opens it again to make it safe: what makes it safe is
   * told before anything is asked. Hands over a load that answers.
   */
  reopenLoad(pause: Seconds): Promise<Load>;
  /** Does something that no listener can stop: a journal on a full disk must not keep the load on. */
  regardless<T>(work: () => Promise<T>): Promise<T>;
  /** Sends each instrument its parting messages and closes all connections. Never rejects. */
  close(): Promise<void>;
}

/**
 * Opens the instruments of a bench; those already open are closed again when one of them fails.
 * Nothing is switched on.
 * @throws FoundOnError when another instrument fails and the load is on, though nobody here switched it on
 */
export async function openBench(parts: BenchParts): Promise<OpenBench> {
  const audience = new Audience(parts.onInput, parts.onNotice);
  const load = await openInstrument(parts, audience, 'load', parts.drivers.load, parts.first);
  try {
    const meter =
      parts.drivers.meter && (await openInstrument(parts, audience, 'meter', parts.drivers.meter));
    return assemble(parts, audience, load, meter);
  } catch (error) {
    const told = await sayWhatIsOn(load, error);
    await load.close();
    throw told;
  }
}

function assemble(
  parts: BenchParts,
  audience: Audience,
  first: Instrument,
  meter: Instrument | undefined,
): OpenBench {
  const ceilings = ceilingsOf(parts.bench, parts.drivers);
  let load = new Load(first, ceilings, audience.input);
  const instruments = (): readonly Instrument[] =>
    meter === undefined ? [load.instrument] : [load.instrument, meter];
  const regardless = <T>(work: () => Promise<T>): Promise<T> => audience.regardless(work);
  return {
    description: parts.bench,
    ceilings,
    get load() {
      return load;
    },
    meter,
    get instruments() {
      return instruments();
    },
    async sample(each) {
      const taken: Taken[] = [];
      const take = (one: Taken): void => {
        each(one);
        taken.push(one);
      };
      if (meter) take({ of: 'meter', what: 'voltage', measurement: await meter.read('voltage') });
      take({ of: 'load', what: 'voltage', measurement: await load.readVoltage() });
      take({ of: 'load', what: 'current', measurement: await load.readCurrent() });
      return taken;
    },
    async reopenLoad(pause) {
      await load.instrument.close();
      await parts.clock.sleep(pause);
      load = new Load(
        await openInstrument(parts, audience, 'load', parts.drivers.load, 'make-safe'),
        ceilings,
        audience.input,
      );
      return load;
    },
    regardless,
    close: () =>
      regardless(async () => {
        for (const instrument of instruments()) {
          await instrument.release().catch(() => undefined);
          await instrument.close();
        }
      }),
  };
}

async function openInstrument(
  { bench, connect, clock }: BenchParts,
  { notice }: Audience,
  role: keyof Bench['instruments'],
  driver: Driver,
  first: InstrumentParts['first'] = 'identity',
): Promise<Instrument> {
  const place = bench.instruments[role];
  if (place === undefined) throw new Error(`the bench has no ${role}`);
  const connection = await connect(place.connection, driver, role);
  // When this fails it has closed the connection.
  return Instrument.open({ role, driver, connection, clock, onNotice: notice, first });
}
