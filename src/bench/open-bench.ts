import type { Clock } from '../clock/clock.js';
import type { Bench } from '../files/bench.js';
import type { Driver, Role } from '../files/driver.js';
import type { Connect } from '../instrument/connect.js';
import { Instrument } from '../instrument/instrument.js';
import { type Ceilings, ceilingsOf } from './ceilings.js';
import { type InputListener, Load } from './load.js';
import type { Taken } from './sample.js';

export interface BenchParts {
  readonly bench: Bench;
  readonly drivers: { readonly load: Driver; readonly meter?: Driver | undefined };
  readonly connect: Connect;
  readonly clock: Clock;
  readonly onInput: InputListener;
  readonly onNotice: (text: string) => void;
}

/** The instruments of one bench, opened together. */
export interface OpenBench {
  readonly description: Bench;
  readonly ceilings: Ceilings;
  readonly load: Load;
  readonly meter: Instrument | undefined;
  readonly instruments: readonly Instrument[];
  /** Reads everything there is to read at one moment. */
  sample(): Promise<readonly Taken[]>;
  /** Opens the load's connection again after it was lost, and hands over a load that answers. */
  reopenLoad(): Promise<Load>;
  /** Sends each instrument its parting messages and closes all connections. Never rejects. */
  close(): Promise<void>;
}

/**
 * Opens the instruments of a bench; those already open are closed again when one of them fails.
 * Nothing is switched on.
 */
export async function openBench(parts: BenchParts): Promise<OpenBench> {
  const { bench, drivers } = parts;
  const ceilings = ceilingsOf(bench, drivers);
  const opened: Instrument[] = [];
  try {
    const loadInstrument = await openInstrument(parts, 'load', drivers.load);
    opened.push(loadInstrument);
    const meter = drivers.meter && (await openInstrument(parts, 'meter', drivers.meter));
    if (meter) opened.push(meter);
    return assemble(parts, ceilings, loadInstrument, meter);
  } catch (error) {
    for (const instrument of opened) await instrument.close();
    throw error;
  }
}

function assemble(
  parts: BenchParts,
  ceilings: Ceilings,
  first: Instrument,
  meter: Instrument | undefined,
): OpenBench {
  const load = new Load(first, ceilings, parts.onInput);
  const instruments = meter === undefined ? [first] : [first, meter];
  return {
    description: parts.bench,
    ceilings,
    load,
    meter,
    instruments,
    async sample() {
      const taken: Taken[] = [];
      if (meter) taken.push({ of: 'meter', what: 'voltage', measurement: await meter.read('voltage') });
      taken.push({ of: 'load', what: 'voltage', measurement: await load.readVoltage() });
      taken.push({ of: 'load', what: 'current', measurement: await load.readCurrent() });
      return taken;
    },
    async reopenLoad() {
      await first.close();
      const again = await openInstrument(parts, 'load', parts.drivers.load);
      instruments.push(again);
      return new Load(again, ceilings, parts.onInput);
    },
    async close() {
      for (const instrument of instruments) {
        await instrument.release().catch(() => undefined);
        await instrument.close();
      }
    },
  };
}

async function openInstrument(parts: BenchParts, role: Role, driver: Driver): Promise<Instrument> {
  const place = parts.bench.instruments[role];
  if (place === undefined) throw new Error(`the bench has no ${role}`);
  const connection = await parts.connect(place.connection, driver, role);
  try {
    return await Instrument.open({ role, driver, connection, clock: parts.clock, onNotice: parts.onNotice });
  } catch (error) {
    await connection.close();
    throw error;
  }
}
