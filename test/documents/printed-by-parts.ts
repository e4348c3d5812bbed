import { once } from 'node:events';
import { writeFileSync, chmodSync } from 'node:fs';
import { createServer } from 'node:http';
import type { AddressInfo } from 'node:net';
import { join } from 'node:path';
import type { Finding } from '../../src/analysis/finding.js';
import { LoadSwitchedOffError, SourceSagsError, SourceWentOffError } from '../../src/bench/bench-error.js';
import type { Ceilings } from '../../src/bench/ceilings.js';
import { BlindSamples, guard } from '../../src/bench/guards.js';
import { guardProbe, ImpossibleCurrents } from '../../src/bench/impossible-readings.js';
import { Load } from '../../src/bench/load.js';
import { checkMeasuresVoltage } from '../../src/bench/meter-mode.js';
import type { OpenBench } from '../../src/bench/open-bench.js';
import { checkAllIsOff } from '../../src/bench/pre-flight.js';
import type { Taken } from '../../src/bench/sample.js';
import type { Trust } from '../../src/bench/trust.js';
import { ScannerStuckError } from '../../src/bench/wrong-place-error.js';
import { openFile } from '../../src/cli/open-file.js';
import { NoWatchmanError } from '../../src/cli/watchman.js';
import { ConnectionLostError, PortBusyError } from '../../src/instrument/connection-errors.js';
import type { Instrument } from '../../src/instrument/instrument.js';
import {
  InstrumentComplainedError,
  NotReadyError,
  WrongInstrumentError,
} from '../../src/instrument/instrument-errors.js';
import { noticeText } from '../../src/instrument/notice.js';
import {
  InstrumentSilentError,
  OutOfStepError,
  ReplyNotUnderstoodError,
  ReplyTooLongError,
} from '../../src/instrument/reply-errors.js';
import { openSerial } from '../../src/instrument/serial-connection.js';
import { openTcp } from '../../src/instrument/tcp-connection.js';
import { judge } from '../../src/judgement/judge.js';
import { RecordWriteError } from '../../src/record/record-error.js';
import type { RunHeader } from '../../src/record/run-header.js';
import { NotIsolatedError } from '../../src/steps/isolation-proved.js';
import { reversed, swapped } from '../../src/steps/place-errors.js';
import { UnsteadyLineError } from '../../src/steps/step-error.js';
import type { UnderTest } from '../../src/steps/under-test.js';
import { Entry } from '../../src/view/entry.js';
import { lostWords } from '../../src/view/page/wording.js';
import { answerRequest, type Desk } from '../../src/view/requests.js';
import { LiveViewError } from '../../src/view/view-error.js';
import { nobody } from '../steps/one-step.js';
import { rehearse } from '../run/rehearsal.js';
import { errorText } from '../../src/cli/error-text.js';

type Says = (folder: string) => unknown;

const load = 'tcp://192.0.2.17:5025';
const meter = 'tcp://192.0.2.18:5025';
const source = 'tcp://192.0.2.19:5025';
const serial = 'serial:/dev/ttyUSB0?baud=9600';
const noPart = { part: undefined };
const nothingYet = new Uint8Array();

/** Under each heading of the page, what is printed then: an error as it is made, thrown or told where it comes from. */
export const printedByParts: Readonly<Record<string, Says>> = {
  'No watchman': () => new NoWatchmanError('spawn node EAGAIN'),
  'No such host': () => thrownBy(() => openTcp({ kind: 'tcp', host: 'load.invalid', port: 5025 })),
  'No such serial port': () => thrownBy(() => openSerial({ kind: 'serial', path: '/dev/ttyUSB9' })),
  'The port may not be opened': async (folder) => {
    const path = join(folder, 'port');
    writeFileSync(path, '');
    chmodSync(path, 0o000);
    // The superuser may open anything, so as such we step down for the moment.
    const superuser = process.getuid?.() === 0;
    if (superuser) process.seteuid?.(65534);
    const error = await thrownBy(() =>
      openSerial({ kind: 'serial', path }).finally(() => {
        if (superuser) process.seteuid?.(0);
      }),
    );
    return textOf(error).replaceAll(path, '/dev/ttyUSB0');
  },
  'The port is busy': () => new PortBusyError({ address: serial }),
  'It does not answer': () => [
    new InstrumentSilentError({ address: serial, question: '*IDN?', timeout: 1, begun: nothingYet }),
    new InstrumentSilentError({ address: serial, question: '*IDN?', timeout: 1, begun: Buffer.from('NUR') }),
    new InstrumentSilentError({
      ...{ address: serial, question: '*IDN?', timeout: 1, begun: Buffer.from('NUR') },
      isUnrepeated: true,
    }),
  ],
  'The connection is lost': () =>
    new ConnectionLostError({ address: load, reason: 'the other side hung up' }),
  'Another instrument answers': () =>
    new WrongInstrumentError({
      ...{ address: load, role: 'load', driver: 'load-input-scpi' },
      identity: 'nursery workshop, bench meter',
    }),
  'The answer makes no sense': () => [
    new ReplyNotUnderstoodError({
      ...{ reply: '1?.52*', expected: 'a number', address: load, question: 'MEAS:CURR?' },
    }),
    new ReplyTooLongError({ address: load, limit: 65536, begins: Buffer.from('login:') }),
  ],
  'Answers come late': () => [
    noticeText(load, { kind: 'late-reply', shown: '14.998' }),
    new OutOfStepError({ address: load, identify: '*IDN?', reason: 'it answered nothing' }),
  ],
  'It refuses a message': () =>
    new InstrumentComplainedError({
      ...{ address: load, entries: [{ number: -113, text: 'Undefined header' }], after: ['INP ON'] },
      ...noPart,
    }),
  'It is not ready': () =>
    new NotReadyError({
      ...{ address: load, told: 'INP ON', question: '*OPC?', answer: '0', within: 5 },
      ...noPart,
    }),
  'Points are interrupted': () => new UnsteadyLineError({ takes: 3, last: `${load} sent nothing` }),
  'It ends at the first question': async () => {
    const { ending } = await rehearse({
      steps: ['open-circuit: { for: 1 s }'],
      wiring: '[Join the outputs.]',
      operator: () => ({ ...nobody, acknowledge: () => Promise.resolve('refused') }),
    });
    return ending.how === 'completed' ? 'it went on' : ending.error;
  },
  'The load is on already': () =>
    thrownBy(() =>
      checkAllIsOff({
        load: { address: load, isOn: () => Promise.resolve(true) },
      } as unknown as OpenBench),
    ),
  'The meter measures something else': () =>
    thrownBy(() =>
      checkMeasuresVoltage({
        ...{ address: meter, reads: () => true, flag: () => Promise.resolve(false) },
      } as unknown as Instrument),
    ),
  'Too much voltage': () => guarded('load', 'voltage', 19.2),
  'Too much current': () => guarded('load', 'current', 9.1),
  'Too much power': () =>
    thrownBy(() => {
      guard([taken('load', 'voltage', 15.6), taken('load', 'current', 10)], {
        ...limits,
        current: { value: 12, setBy: 'the bench' },
      });
    }),
  'Too warm': () => guarded('thermometer', 'temperature', 90.5),
  'A display shows overload': () =>
    thrownBy(() => {
      guard([{ of: 'meter', what: 'voltage', measurement: { kind: 'overload' } }], limits);
    }),
  'A reading stays away': () =>
    thrownBy(() => {
      const blind = new BlindSamples();
      for (let sample = 0; sample < 3; sample += 1) blind.count('voltage');
    }),
  'An impossible temperature': () =>
    thrownBy(() => {
      guardProbe('thermometer', -200);
    }),
  'Current below zero': () => impossible(-0.4, { current: 1 }),
  'Current with the load off': () => impossible(1.2, {}),
  'The load does not turn on': async () => [
    await thrownBy(() => deaf(false).inputOn()),
    await thrownBy(() => deaf(true).inputOff()),
  ],
  'The load trips': () => new LoadSwitchedOffError(load, { current: 5.2 }),
  'The source sags': () => new SourceSagsError(source, { gives: 21.4, told: 24 }),
  'The source went off': () => new SourceWentOffError(source),
  'More is asked for than is allowed': () => thrownBy(() => deaf(false).setCurrent(8.5, 15)),
  Undecided: () => {
    return [[], [leastCurrent(3.99)]].flatMap((findings) =>
      judge(requiring(4.2), findings).map(({ note }) => note),
    );
  },
  'It may not be stacked': () => new NotIsolatedError('K2', 'bonded'),
  'Modules are swapped': () => {
    const pair = { circuit: 'parallel', modules: [{ name: 'K1' }, { name: 'K2' }] } as unknown as UnderTest;
    return [swapped(pair, { place: 'K2', modules: ['K1'] }), reversed(pair, 'K1')];
  },
  'The scanner is stuck': () => new ScannerStuckError('tcp://192.0.2.20:5025', 101, 100),
  'The disk is full': () =>
    new RecordWriteError(
      'runs/20261202T091500Z-K1-real-limit/journal.jsonl',
      Object.assign(new Error('no space'), { code: 'ENOSPC' }),
    ),
  'The live view says no word': () => lostWords({ kind: 'lost', seconds: 5, why: 'silent' }, undefined),
  'Its address opens once': addressOpenedTwice,
  "The live view can't be served": () => new LiveViewError(new Error('listen EPERM 127.0.0.1')),
  'No page opens': () => openFile('report.html', { PATH: '' }),
  'Send what you have': () => new TypeError('what nobody foresaw'),
};

/** All that a part says, as it is shown at the terminal. */
export async function shownOf(says: Says, folder: string): Promise<string> {
  const said = await says(folder);
  return (Array.isArray(said) ? said : [said]).map(textOf).join('\n');
}

function textOf(said: unknown): string {
  return typeof said === 'string' ? said : errorText(said);
}

async function thrownBy(work: () => unknown): Promise<unknown> {
  try {
    await work();
  } catch (error) {
    return error;
  }
  throw new Error('it was to throw');
}

const limits: Ceilings & { readonly ratedVoltage: number } = {
  voltage: { value: 18.75, setBy: 'the nameplate' },
  current: { value: 8, setBy: 'the bench' },
  power: { value: 150, setBy: 'the bench' },
  temperature: { value: 90, setBy: 'the bench' },
  ratedVoltage: 15,
};

function taken(of: Taken['of'], what: Taken['what'], value: number): Taken {
  return { of, what, measurement: { kind: 'value', value } };
}

function guarded(of: Taken['of'], what: Taken['what'], value: number): Promise<unknown> {
  return thrownBy(() => {
    guard([taken(of, what, value)], limits);
  });
}

function impossible(current: number, told: { readonly current?: number }): Promise<unknown> {
  return thrownBy(() => {
    const guardOfThem = new ImpossibleCurrents({ zero: 0.06 } as Trust);
    for (let look = 0; look < 3; look += 1) guardOfThem.look({ current, atLoad: 15, atMeter: 15 }, told);
  });
}

/** A load that takes everything it is told, and says of its input always the same. */
function deaf(isOn: boolean): Load {
  const instrument = {
    ...{ address: load, lookFirst: () => undefined },
    ...{ perform: () => Promise.resolve(), flag: () => Promise.resolve(isOn) },
  } as unknown as Instrument;
  return new Load(instrument, limits, () => undefined);
}

function leastCurrent(value: number): Finding {
  return {
    ...{ name: 'usable-current', value, dimension: 'current', standardUncertainty: 0.007, step: 2, note: '' },
    ...{ interval: [value - 0.014, value + 0.014], bound: 'least', budget: [], coverage: 0.95 },
  } as unknown as Finding;
}

function requiring(current: number): RunHeader {
  return {
    criteria: [
      {
        finding: 'usable-current',
        requirement: { kind: 'at-least', value: { kind: 'absolute', value: current } },
      },
    ],
    modules: [],
  } as unknown as RunHeader;
}

async function addressOpenedTwice(): Promise<string> {
  const entry = new Entry((bytes) => new Uint8Array(bytes));
  const server = createServer((request, response) => {
    const { port } = server.address() as AddressInfo;
    void answerRequest(request, response, { entry, port, tellAfresh: () => undefined } as unknown as Desk);
  });
  await once(server.listen(0, '127.0.0.1'), 'listening');
  const { port } = server.address() as AddressInfo;
  const address = `http://127.0.0.1:${port}/?token=${entry.token}`;
  try {
    await fetch(address, { redirect: 'manual' });
    return await (await fetch(address, { redirect: 'manual' })).text();
  } finally {
    server.close();
  }
}
