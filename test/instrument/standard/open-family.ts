import { VirtualClock } from '../../../src/clock/virtual-clock.js';
import { Instrument } from '../../../src/instrument/instrument.js';
import { type Family, family } from './families.js';
import type { ReplyForm } from './response.js';
import { virtualLineTo } from './serve-standard.js';

export interface OpenedFamily extends Family {
  readonly opened: Instrument;
  readonly notices: readonly string[];
}

/** A shipped family on a line in virtual time. */
export async function opened(
  name: string,
  form?: ReplyForm,
  found = family(name, form),
): Promise<OpenedFamily> {
  const clock = new VirtualClock(new Date(0));
  const { driver, instrument } = found;
  const connection = virtualLineTo(instrument, clock);
  const notices: string[] = [];
  const onNotice = (text: string): void => void notices.push(text);
  return {
    ...found,
    notices,
    opened: await Instrument.open({ role: driver.role, driver, connection, clock, onNotice }),
  };
}

/** A reading of whichever kind: a number, or the word for why there is none; a yes or a no; a channel. */
export async function readOn(
  instrument: Instrument,
  name: string,
): Promise<number | string | boolean | null> {
  switch (instrument.driver.readings[name]?.kind) {
    case 'number': {
      const read = await instrument.read(name);
      return read.kind === 'value' ? read.value : read.kind;
    }
    case 'flag':
      return instrument.flag(name);
    case 'channel':
      return instrument.channel(name);
    case undefined:
      throw new Error(`no reading ${name}`);
  }
}
