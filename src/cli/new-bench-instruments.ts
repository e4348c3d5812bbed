import type { ConnectionAddress } from '../files/bench.js';
import { count, quantity } from '../files/building-blocks.js';
import { formatAddress, lineOf, parseAddress } from '../files/connection-address.js';
import type { Driver, Role } from '../files/driver.js';
import type { NewBench, NewInstrument } from '../files/new-bench.js';
import { readDriver } from '../files/read-driver.js';
import { shippedNames } from '../files/shipped-file.js';
import { listPorts } from '../instrument/ports.js';
import { printable } from '../quantity/printable.js';
import { readBy } from './answer-readers.js';
import { meetInstrument } from './meet-instrument.js';
import { makesNoSense, remarkOn, sayLacking, sayMet, wireLacking } from './new-bench-met.js';
import { type Option, type Questions, UnfitAnswerError } from './questions.js';
import { shipped } from './shipped.js';

type Part = keyof NewBench['instruments'];

export interface ChosenInstruments {
  readonly instruments: NewBench['instruments'];
  readonly load: Driver;
  /** Of all of them. */
  readonly drivers: readonly Driver[];
}

interface Chosen {
  readonly place: NewInstrument;
  readonly driver: Driver;
}

const parts: readonly Option<Part>[] = [
  { word: 'load', means: 'the electronic load; a bench needs one', value: 'load' },
  { word: 'meter', means: 'reads the voltage at the module itself', value: 'meter' },
  { word: 'thermometer', means: 'touches the case of the module', value: 'thermometer' },
  { word: 'source', means: 'a dc source that feeds the inputs of dc modules', value: 'source' },
];
const leaveOut = { word: 'none', means: 'leave this one out', value: undefined };

/**
 * Which instruments there are: at each address given, or chosen among the serial ports found, it is asked who is there,
 * and the driver that fits is proposed. `folder` is that of the bench file, from which paths of drivers start.
 * @throws NothingWrittenError
 */
export async function askInstruments(questions: Questions, folder: string): Promise<ChosenInstruments> {
  const shelf = { relativeTo: folder, shipped: shipped.drivers };
  const names = await shippedNames(shipped.drivers);
  const known = await Promise.all(names.map(async (name) => (await readDriver(name, shelf)).value));
  const ports = (await listPorts()).map(({ path, description }) => ({
    address: `serial:${path}?baud=9600`,
    description,
  }));
  sayPorts(questions, ports);
  const chosen = new Map<Part, Chosen>();
  for (;;) {
    const address = await askAddress(questions, ports, chosen);
    if (address === undefined) break;
    const instrument = await askInstrument(questions, address, { known, shelf, chosen });
    if (instrument !== undefined) chosen.set(instrument.part, instrument);
  }
  return together(questions, chosen);
}

function sayPorts(
  questions: Questions,
  ports: readonly { readonly address: string; readonly description: string }[],
): void {
  if (ports.length === 0) {
    questions.say('\nNo serial ports here; an adapter that is plugged in later shows with railproof ports.');
    return;
  }
  questions.say('\nSerial ports of this machine:');
  for (const [index, { address, description }] of ports.entries())
    questions.say(`${index + 1}  ${printable(address)}  ${printable(description)}`, '  ');
}

function askAddress(
  questions: Questions,
  ports: readonly { readonly address: string }[],
  chosen: ReadonlyMap<Part, Chosen>,
): Promise<ConnectionAddress | undefined> {
  const isEnough = chosen.has('load');
  return questions.ask({
    ask: isEnough ? 'Where is the next instrument?' : 'Where is an instrument?',
    why: isEnough
      ? 'The meter makes the results better, the thermometer is for soaks, the source for modules that run from dc.'
      : 'On the network it is tcp://192.0.2.17:5025, as its own menu shows it; the usual port is 5025. At a serial ' +
        `port it is serial:/dev/ttyUSB0?baud=9600${ports.length === 0 ? '' : ', or the number of a port above'}. ` +
        'It is then asked who it is; nothing is told to it and nothing switched.',
    ...(isEnough ? { usual: { value: undefined, words: 'there are no more' } } : {}),
    read: (answer) => {
      const port = /^\d{1,3}$/.test(answer) ? ports[Number(answer) - 1]?.address : answer;
      if (port === undefined) throw new UnfitAnswerError(`there is no port with the number ${answer}`);
      refuseBare(port);
      const address = parseAddress(port);
      if (address.kind === 'tcp' || address.kind === 'serial') {
        refuseTaken(address, chosen);
        return address;
      }
      throw new UnfitAnswerError(`"${answer}" is no place of a real instrument; tcp:// or serial: is needed`);
    },
  });
}

/** One given twice is mostly a slip, and two parts that speak over one line come in each other's way. */
function refuseTaken(address: ConnectionAddress, chosen: ReadonlyMap<Part, Chosen>): void {
  for (const [part, { place }] of chosen)
    if (lineOf(place.connection) === lineOf(address))
      throw new UnfitAnswerError(
        `the ${part} is at ${formatAddress(place.connection)} already`,
        'give the address of another instrument; where one is really both, write it into the file afterwards',
      );
}

/** An address as its menu, or the system, writes it, which lacks only how to connect to it. @throws UnfitAnswerError */
function refuseBare(answer: string): void {
  if (/^(?:\/dev\/|COM\d)/i.test(answer))
    throw new UnfitAnswerError(`at a serial port it is written serial:${answer}?baud=9600`);
  if (/^(?:[a-z\d-]+\.)+[a-z\d-]+(?::\d+)?$|^[a-z\d-]+:\d+$/i.test(answer))
    throw new UnfitAnswerError(
      `on the network it is written tcp://${answer}${answer.includes(':') ? '' : ':5025'}`,
    );
  if (!answer.includes(':'))
    throw new UnfitAnswerError(
      `found "${answer}"; an address is needed, which begins with tcp:// or with serial:`,
    );
}

interface Around {
  readonly known: readonly Driver[];
  readonly shelf: { readonly relativeTo: string; readonly shipped: string };
  readonly chosen: ReadonlyMap<Part, Chosen>;
}

async function askInstrument(
  questions: Questions,
  address: ConnectionAddress,
  { known, shelf, chosen }: Around,
): Promise<(Chosen & { readonly part: Part }) | undefined> {
  questions.say(`\n${printable(formatAddress(address))}: asking who is there; this takes a while ...`);
  const met = await meetInstrument(address, known, questions.signal);
  questions.forget();
  sayMet(questions, met);
  const families = met.kind === 'answered' ? met.families : [];
  const free = parts.filter(({ value }) => !chosen.has(value));
  const fits = free.find(({ value }) => families.some(({ role }) => role === value));
  const part = await questions.choose<Part | undefined>(
    {
      ask: 'What is it on this bench?',
      why:
        fits === undefined
          ? 'Nothing that it said tells what it is, so that is for you to say.'
          : 'Proposed is what it answers like.',
    },
    [...free, leaveOut],
    met.kind === 'answered' && !makesNoSense(met) && fits === undefined ? undefined : (fits ?? leaveOut).word,
  );
  if (part === undefined) return undefined;
  const best = families.find(({ role }) => role === part)?.driver;
  const chosenDriver = await askDriver(questions, part, { best, known, shelf });
  const lacking = wireLacking(met, chosenDriver.driver);
  if (lacking !== undefined)
    sayLacking(questions, lacking, { name: chosenDriver.name, role: part, connection: address });
  const channel = await askChannel(questions, chosenDriver.driver);
  const more = lacking === undefined ? '' : ` Its driver must say ${lacking}.`;
  const place: NewInstrument = {
    ...{ driver: chosenDriver.name, connection: address, remark: remarkOn(met) + more },
    ...(channel === undefined ? {} : { channel }),
  };
  return { part, place, driver: chosenDriver.driver };
}

function askDriver(
  questions: Questions,
  role: Role,
  { best, known, shelf }: { readonly best: string | undefined } & Omit<Around, 'chosen'>,
): Promise<{ readonly name: string; readonly driver: Driver }> {
  const ofRole = known.filter((each) => each.role === role);
  const proposed = ofRole.find(({ name }) => name === best) ?? (ofRole.length === 1 ? ofRole[0] : undefined);
  const widest = Math.max(...ofRole.map(({ name }) => name.length));
  return questions.ask({
    ask: 'Which driver speaks to it?',
    why: 'A number, a name, or the path of a driver file of your own, from the folder of the bench file on.',
    listed: ofRole.map(({ name, summary }) => `${name.padEnd(widest)}  ${summary}`),
    ...(proposed === undefined
      ? {}
      : { usual: { value: { name: proposed.name, driver: proposed }, words: proposed.name } }),
    read: async (answer) => {
      const numbered = /^\d{1,3}$/.test(answer) ? ofRole[Number(answer) - 1]?.name : undefined;
      const name = numbered ?? answer;
      if (/^(tcp|serial|simulated):/.test(name))
        throw new UnfitAnswerError(
          'that is where it is, and what is asked for now is its driver',
          'give a number or a name of the list above',
        );
      const driver = (await readDriver(name, shelf)).value;
      if (driver.role === role) return { name, driver };
      throw new UnfitAnswerError(`${driver.name} is a driver for a ${driver.role}, and a ${role} is needed`);
    },
  });
}

async function askChannel(questions: Questions, { channels }: Driver): Promise<number | undefined> {
  if (channels === undefined) return undefined;
  const { first, last } = channels;
  return questions.ask({
    ask: `Which of its channels, from ${first} to ${last}?`,
    why: 'Its driver is for instruments with several; what it is told goes to this one.',
    usual: { value: first, words: String(first) },
    read: (answer) =>
      readBy(count('', { least: first, most: last }))(/^\d{1,4}$/.test(answer) ? Number(answer) : answer),
  });
}

async function together(questions: Questions, chosen: ReadonlyMap<Part, Chosen>): Promise<ChosenInstruments> {
  const [load, meter, thermometer, source] = parts.map(({ value }) => chosen.get(value));
  if (load === undefined) throw new Error('the last address is asked for once there is a load');
  const feeds = source === undefined ? undefined : { ...source.place, ...(await askFeed(questions)) };
  return {
    instruments: {
      load: load.place,
      ...(meter === undefined ? {} : { meter: meter.place }),
      ...(thermometer === undefined ? {} : { thermometer: thermometer.place }),
      ...(feeds === undefined ? {} : { source: feeds }),
    },
    load: load.driver,
    drivers: [...chosen.values()].map(({ driver }) => driver),
  };
}

async function askFeed(
  questions: Questions,
): Promise<{ readonly voltage: number; readonly current: number }> {
  const voltage = await questions.ask({
    ask: 'With which voltage does the source feed the modules?',
    why: 'As the labels of the modules state their input: 24 V.',
    read: readBy(quantity('voltage', '', { above: 0 })),
  });
  const current = await questions.ask({
    ask: 'How much current may the modules take from it together?',
    why: 'The source is set to it, and no more power is asked of a module than this gives.',
    read: readBy(quantity('current', '', { above: 0 })),
  });
  return { voltage, current };
}
