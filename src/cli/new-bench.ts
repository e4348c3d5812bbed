import { dirname } from 'node:path';
import type { Driver } from '../files/driver.js';
import { line, quantity } from '../files/building-blocks.js';
import type { NewBench } from '../files/new-bench.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { Dimension } from '../quantity/quantity.js';
import { readBy } from './answer-readers.js';
import { askInstruments, type ChosenInstruments } from './new-bench-instruments.js';
import { askSimulated } from './new-bench-simulated.js';
import type { Questions } from './questions.js';

/** Above this a dc output is no longer safe to touch: the ES1 limit of IEC 62368-1. */
const touchable = 60;

/** What is on a bench, asked of whoever sits at it and of the instruments. @throws NothingWrittenError */
export async function askBench(questions: Questions, path: string, called: string): Promise<NewBench> {
  const name = await questions.ask({
    ask: 'What is the bench called?',
    why: 'It stands in every record made on it.',
    usual: { value: called, words: called },
    read: readBy(line('', 64).min(1)),
  });
  const isReal = await questions.choose(
    {
      ask: 'Are there instruments, or is it to be tried without?',
      why: 'A simulated bench does all that a real one does, and nothing can be broken on it.',
    },
    [
      { word: 'real', means: 'instruments at a serial port or on the network', value: true },
      {
        word: 'simulated',
        means: 'a load, a meter and a thermometer made up, and a module to try things on',
        value: false,
      },
    ],
    'real',
  );
  if (!isReal) return { name, ...(await askSimulated(questions)) };
  const chosen = await askInstruments(questions, dirname(path));
  const voltageFrom = await askVoltageFrom(questions, chosen);
  const leads = await askLeads(questions, voltageFrom);
  const limits = await askLimits(questions, chosen);
  const ambient = await askAmbient(questions);
  return {
    ...{ name, instruments: chosen.instruments, voltageFrom, limits },
    ...(leads === undefined ? {} : { leads }),
    ...(ambient === undefined ? {} : { ambient }),
  };
}

async function askVoltageFrom(
  questions: Questions,
  { instruments }: ChosenInstruments,
): Promise<NewBench['voltageFrom']> {
  if (instruments.meter === undefined) {
    questions.say(
      "\nWithout a meter the voltage is read at the load's terminals, and what the leads drop is reckoned off.",
    );
    return 'load-terminals';
  }
  return questions.choose(
    {
      ask: 'Where is the voltage of the module read?',
      why: 'At a few amperes the leads alone drop more than a good module droops.',
    },
    [
      {
        word: 'meter',
        means: "the meter's probes are at the module itself, so the leads don't count",
        value: 'meter-at-module' as const,
      },
      {
        word: 'load',
        means: "at the load's own terminals; the leads are reckoned off",
        value: 'load-terminals' as const,
      },
    ],
    'meter',
  );
}

async function askLeads(
  questions: Questions,
  voltageFrom: NewBench['voltageFrom'],
): Promise<NewBench['leads']> {
  const isNeeded = voltageFrom === 'load-terminals';
  const resistance = await questions.ask({
    ask: 'How much resistance have the leads from module to load, there and back?',
    why:
      'For example 35 mohm. To measure it: join the ends that go to the module, send a known current through both ' +
      'leads, and divide the voltage between their other ends by it; a multimeter on ohms is too coarse. A metre ' +
      'of copper of 2.5 mm² has about 7 mohm, each way, and joints add to it.' +
      (isNeeded ? ' It is needed, as the voltage is read behind the leads.' : ''),
    ...(isNeeded
      ? {}
      : { usual: { value: undefined, words: 'not known; the meter at the module does without' } }),
    read: readBy(quantity('resistance', '', { least: 0 })),
  });
  if (resistance === undefined) return undefined;
  const share = Number((resistance / 5).toPrecision(2));
  const uncertainty = await questions.ask({
    ask: 'How far off may that be?',
    why: 'To either side, clamps and plugs included. It goes into the uncertainty of what rests on it.',
    usual: {
      value: share,
      words: `a fifth of it, ${formatQuantity(share, 'resistance', { significant: 2 })}`,
    },
    read: readBy(quantity('resistance', '', { least: 0 })),
  });
  return { resistance, uncertainty };
}

/** The least of what the drivers say of the instruments, as far as they say it. */
export function ratedLimits(
  drivers: readonly Driver[],
  load: Driver,
): Record<'voltage' | 'current' | 'power', number | undefined> {
  const voltages = drivers
    .filter(({ role }) => role === 'load' || role === 'meter')
    .flatMap(({ ratings }) => ratings.voltage ?? []);
  return {
    voltage: voltages.length === 0 ? undefined : Math.min(touchable, ...voltages),
    current: load.ratings.current,
    power: load.ratings.power,
  };
}

async function askLimits(
  questions: Questions,
  { drivers, instruments, load }: ChosenInstruments,
): Promise<NewBench['limits']> {
  const rated = ratedLimits(drivers, load);
  questions.say(
    '\nNow the hard limits of the bench. Nothing that a procedure asks goes beyond them, and a reading beyond one ' +
      "stops the run. Take the least of what instruments, leads, clamps and the place can bear: a driver's ratings " +
      'are those of a whole family, and the label of your instrument may say less.',
  );
  const limit = (
    dimension: Dimension,
    ask: string,
    why: string,
    usual: number | undefined,
  ): Promise<number> =>
    questions.ask({
      ...{ ask, why },
      ...(usual === undefined ? {} : { usual: { value: usual, words: formatQuantity(usual, dimension) } }),
      read: readBy(quantity(dimension, '', dimension === 'temperature' ? {} : { above: 0 })),
    });
  const voltage = await limit(
    'voltage',
    'What is the highest voltage on this bench?',
    'Up to 60 V a dc output is safe to touch (ES1, IEC 62368-1); more only where nobody can.',
    rated.voltage,
  );
  const current = await limit(
    'current',
    'What is the highest current?',
    'Mind leads and clamps, and twice the label of the largest module.',
    rated.current,
  );
  const power = await limit(
    'power',
    'What is the highest power?',
    'All of it becomes heat in the load, for as long as a run lasts.',
    rated.power,
  );
  if (instruments.thermometer === undefined) return { voltage, current, power };
  const temperature = await limit(
    'temperature',
    'How warm may the case of a module become?',
    'A run stops where it gets warmer. 90 degC at the outside of a case is a choice of ours, not a rule; mind the label, and what touches it.',
    90,
  );
  return { voltage, current, power, temperature };
}

async function askAmbient(questions: Questions): Promise<NewBench['ambient']> {
  const temperature = await questions.ask({
    ask: 'How warm is the air around the module?',
    why: "Half a metre away from it, for example 23 degC: a module's rise is reckoned from it.",
    usual: {
      value: undefined,
      words: 'not known; the first looks at the cold module stand for it, less surely',
    },
    read: readBy(quantity('temperature', '')),
  });
  if (temperature === undefined) return undefined;
  const uncertainty = await questions.ask({
    ask: 'How far off may that be, in the course of a test?',
    why: 'To either side, for example 1 K; sun and heating count.',
    usual: { value: 2, words: '2 K' },
    read: readBy(quantity('temperature-difference', '', { least: 0 })),
  });
  return { temperature, uncertainty };
}
