import { describe, expect, it } from 'vitest';
import { besideBench, parseBench } from '../../src/files/read-bench.js';
import { benchExample, simulationExample } from './design-examples.js';
import { problemsOf } from './problems-of.js';

const whole = benchExample + simulationExample;
const changed = (find: string, replacement: string): string => {
  expect(whole).toContain(find);
  return whole.replace(find, replacement);
};

it('the example of the design is read', () => {
  expect(parseBench(benchExample, 'bench.yaml')).toEqual({
    name: 'corner bench',
    instruments: {
      load: { driver: 'load-input-scpi', connection: { kind: 'tcp', host: '127.0.0.1', port: 5025 } },
      meter: {
        driver: 'meter-read-scpi',
        connection: { kind: 'serial', path: '/dev/ttyUSB0', baud: 9600 },
      },
    },
    leads: { resistance: 0.035, uncertainty: 0.005 },
    voltageFrom: 'meter-at-module',
    limits: { voltage: 60, current: 8, power: 120 },
  });
});

it('what is really there is read, with its defaults', () => {
  expect(parseBench(whole, 'bench.yaml').simulation).toEqual({
    seed: 7,
    circuit: 'parallel',
    leads: 0.035,
    modules: [
      {
        name: 'K1',
        openCircuitVoltage: 15.21,
        droopResistance: 0.018,
        limit: { style: 'hiccup', current: 5.3, period: 0.8 },
        unsteadyAbove: 5.1,
        noise: 0.001,
        ballast: 0.05,
        reverseDiode: true,
        earth: 'bonded',
        thermal: { riseAtRated: 35, timeConstant: 720, ambient: 23, limitPerKelvin: -0.002 },
      },
      {
        name: 'K2',
        openCircuitVoltage: 15.08,
        droopResistance: 0.021,
        // 30 % of the limit, as it did not say.
        limit: { style: 'foldback', current: 5, shortCircuit: 1.5 },
        noise: 0,
        ballast: 0,
        reverseDiode: false,
        earth: 'isolated',
      },
    ],
    instruments: {},
    answers: {},
    faults: [],
  });
});

it('everything that may be written is read', () => {
  const text = changed(
    'faults: []',
    `instruments:
    load:
      errors: { voltage: { gain: 0.05 %, offset: 2 mV, resolution: 1 mV }, temperature: { offset: 0.5 K }, set-current: { gain: 0.2 % } }
      reading-time: 40 ms
  answers: { temperature: 41 °C }
  faults:
    - { at: 30 s, what: meter-silent }
    - { at: 1 min, what: load-lost, for: 400 ms }`,
  )
    .replace('earth: bonded', 'earth: 2 kΩ')
    .replace('current: 5 A } }', 'current: 5 A, short-circuit: 1.2 A }, rated-current: 4 A }');
  const { simulation } = parseBench(text, 'bench.yaml');
  expect(simulation?.modules[0]?.earth).toBe(2000);
  expect(simulation?.modules[1]).toMatchObject({ limit: { shortCircuit: 1.2 }, ratedCurrent: 4 });
  expect(simulation?.instruments).toEqual({
    load: {
      errors: {
        voltage: { gain: 0.0005, offset: 0.002, resolution: 0.001 },
        temperature: { gain: 0, offset: 0.5, resolution: 0 },
        'set-current': { gain: 0.002, offset: 0, resolution: 0 },
      },
      readingTime: 0.04,
    },
  });
  expect(simulation?.answers).toEqual({ temperature: '41 °C' });
  expect(simulation?.faults).toEqual([
    { at: 30, what: 'meter-silent' },
    { at: 60, what: 'load-lost', for: 0.4 },
  ]);
});

it.each([
  ['constant-current', { style: 'constant-current', current: 5 }],
  ['constant-power', { style: 'constant-power', current: 5 }],
  ['hiccup', { style: 'hiccup', current: 5, period: 0.8 }],
  ['latch-off', { style: 'latch-off', current: 5 }],
])('a module may limit by %s', (style, limit) => {
  const text = changed('style: foldback', `style: ${style}`);
  expect(parseBench(text, 'bench.yaml').simulation?.modules[1]?.limit).toEqual(limit);
});

it('leads need not be known where the meter reads at the module', () => {
  const text = benchExample.replace(/^leads:.*\n/m, '');
  expect(parseBench(text, 'bench.yaml').leads).toEqual({ resistance: 0, uncertainty: 0 });
});

describe('one mistake is one line, at its place', () => {
  it.each<[string, string, string]>([
    [
      'tcp://127.0.0.1:5025',
      'tcp://127.0.0.1',
      "4:49: instruments.load.connection: 'tcp://127.0.0.1' lacks its port: tcp://127.0.0.1:5025",
    ],
    [
      '"tcp://127.0.0.1:5025"',
      '5025',
      '4:49: instruments.load.connection: found the number 5025; an address is needed: tcp://127.0.0.1:5025',
    ],
    [
      ', connection: "tcp://127.0.0.1:5025"',
      '',
      '4:10: instruments.load.connection: missing; an address is needed: tcp://127.0.0.1:5025',
    ],
    ['  meter: {', '  metre: {', "5:3: instruments: unknown key 'metre'; did you mean 'meter'?"],
    [
      'style: hiccup',
      'style: hickup',
      "17:39: simulation.modules.0.limit.style: found 'hickup'; did you mean 'hiccup'?",
    ],
    [
      'style: hiccup, ',
      '',
      '17:14: simulation.modules.0.limit.style: missing; one of constant-current, foldback, constant-power, hiccup, latch-off is needed',
    ],
    [
      'period: 800 ms',
      'perod: 800 ms',
      "17:47: simulation.modules.0.limit: unknown key 'perod'; did you mean 'period'?",
    ],
    [
      'earth: bonded',
      'earth: bondd',
      "22:14: simulation.modules.0.earth: found 'bondd'; did you mean 'bonded'?",
    ],
    [
      'reverse-diode: true',
      'reverse-diode: yes',
      "21:22: simulation.modules.0.reverse-diode: found 'yes'; true or false is needed",
    ],
    ['seed: 7', 'seed: 7.5', '10:9: simulation.seed: found the number 7.5; a whole number is needed'],
    ['seed: 7', 'seed: -7', '10:9: simulation.seed: found the number -7; at least 0 is needed'],
    [
      'circuit: parallel',
      'circuit: single',
      '14:5: simulation.modules: a single circuit has exactly one module; found 2',
    ],
    ['name: K2', 'name: K1', "24:15: simulation.modules.1.name: a second module is called 'K1'"],
    [
      'current: 5 A }',
      'current: 5 A, short-circuit: 6 A }',
      '24:130: simulation.modules.1.limit.short-circuit: a module that folds back gives less into a short than at its limit',
    ],
    [
      'faults: []',
      'faults: [{ at: 3 s, what: meter-silnt }]',
      "25:29: simulation.faults.0.what: found 'meter-silnt'; did you mean 'meter-silent'?",
    ],
    [
      'faults: []',
      'faults: [{ at: 3 s, what: module-dead, for: 2 s }]',
      "25:47: simulation.faults.0.for: module-dead does not pass: leave out 'for'",
    ],
    [
      'faults: []',
      'faults: [{ at: 3 s, what: load-restarted }]',
      "25:12: simulation.faults.0: load-restarted needs a 'for': how long it is away",
    ],
    [
      'faults: []',
      'instruments: { scanner: {} }',
      '25:27: simulation.instruments.scanner: there is no scanner among the instruments of this bench',
    ],
    [
      'faults: []',
      'instruments: { load: { errors: { voltage: { offset: 2 mA } } } }',
      "25:55: simulation.instruments.load.errors.voltage.offset: found '2 mA', which is a current; a voltage is needed: 15 V, 200 mV",
    ],
    [
      'faults: []',
      'answers: { temperature: 41 }',
      '25:27: simulation.answers.temperature: found the number 41; a text is needed',
    ],
    [
      'power: 120 W',
      'power: 120 VA',
      "8:47: limits.power: found '120 VA'; no unit is written 'VA'; a power is given in µW, mW, W, kW",
    ],
  ])('%s → %s', (find, replacement, problem) => {
    expect(problemsOf(() => parseBench(changed(find, replacement), 'bench.yaml'))).toEqual([
      `bench.yaml:${problem}`,
    ]);
  });

  it('a meter at the module that is not there', () => {
    const text = benchExample.replace(/^ {2}meter:.*\n/m, '');
    expect(problemsOf(() => parseBench(text, 'bench.yaml'))).toEqual([
      'bench.yaml:6:15: voltage-from: meter-at-module needs a meter among the instruments',
    ]);
  });

  it('leads that must be known', () => {
    const text = benchExample
      .replace(/^leads:.*\n/m, '')
      .replace('voltage-from: meter-at-module', 'voltage-from: load-terminals');
    expect(problemsOf(() => parseBench(text, 'bench.yaml'))).toEqual([
      'bench.yaml:1:1: leads: missing; the leads must be known when the voltage is read at the load terminals',
    ]);
  });

  it('a simulated instrument on a bench that does not say what is there', () => {
    const text = benchExample.replace('tcp://127.0.0.1:5025', 'simulated:');
    expect(problemsOf(() => parseBench(text, 'bench.yaml'))).toEqual([
      "bench.yaml:4:49: instruments.load.connection: a simulated instrument needs a 'simulation' section, which says what is really there",
    ]);
  });

  it('one module alone in parallel', () => {
    const text = whole.replace(/^ {4}- \{ name: K2.*\n/m, '');
    expect(problemsOf(() => parseBench(text, 'bench.yaml'))).toEqual([
      'bench.yaml:14:5: simulation.modules: a parallel circuit has at least two modules; found 1',
    ]);
  });
});

describe('the dc source of a bench', () => {
  const place = (text: string): string => benchExample.replace('  meter:', `  source: ${text}\n  meter:`);
  const speaks = 'driver: source-output-scpi, connection: "tcp://127.0.0.1:5026"';

  it('is read with what it feeds the modules with', () => {
    const bench = parseBench(
      place(`{ ${speaks}, channel: 2, voltage: 24 V, current: 3 A, off-for: 30 s }`),
      'b.yaml',
    );
    expect(bench.instruments.source).toEqual({
      driver: 'source-output-scpi',
      connection: { kind: 'tcp', host: '127.0.0.1', port: 5026 },
      channel: 2,
      voltage: 24,
      current: 3,
      offFor: 30,
    });
  });

  it('is off for 5 s to clear a latch where the file does not say', () => {
    const bench = parseBench(place(`{ ${speaks}, voltage: 24 V, current: 3 A }`), 'b.yaml');
    expect(bench.instruments.source?.offFor).toBe(5);
  });

  it.each([
    ['current: 3 A', 'instruments.source.voltage: missing'],
    ['voltage: 24 V', 'instruments.source.current: missing'],
    ['voltage: 0 V, current: 3 A', "instruments.source.voltage: found '0 V'; more than 0 V is needed"],
    [
      'voltage: 24, current: 3 A',
      'instruments.source.voltage: found the bare number 24; a voltage needs its unit',
    ],
    ['voltage: 24 A, current: 3 A', "instruments.source.voltage: found '24 A', which is a current"],
    [
      'voltage: 24 V, current: 3 A, off-for: 0 s',
      "instruments.source.off-for: found '0 s'; more than 0 s is needed",
    ],
    [
      'voltage: 24 V, current: 3 A, off-for: 1 h',
      "instruments.source.off-for: found '1 h'; at most 10 min is needed",
    ],
    ['voltage: 24 V, current: 3 A, of-for: 3 s', "did you mean 'off-for'?"],
  ])('with %s is refused, and the place is named', (given, words) => {
    const problems = problemsOf(() => parseBench(place(`{ ${speaks}, ${given} }`), 'b.yaml'));
    expect(problems.join('\n')).toContain(words);
  });

  it('belongs to the instruments that a simulation may give errors', () => {
    expect(() =>
      parseBench(changed('modules:', 'instruments: { source: {} }\n  modules:'), 'b.yaml'),
    ).toThrow('there is no source among the instruments of this bench');
  });
});

describe('recorded answers of the person at the bench', () => {
  const replayed = benchExample
    .replace(/tcp:[^"]*/, 'replay:load.jsonl')
    .replace(/serial:[^"]*/, 'replay:meter.jsonl');

  it('are looked for beside the bench, as the recordings of its instruments', () => {
    const bench = parseBench(`${replayed}operator: replay:operator.jsonl\n`, 'bench.yaml');
    const { operator, instruments } = besideBench(bench, '/bench');
    expect(operator).toEqual({ kind: 'replay', file: '/bench/operator.jsonl' });
    expect(instruments.load.connection).toEqual({ kind: 'replay', file: '/bench/load.jsonl' });
  });

  it('never stand in for a person where an instrument is real', () => {
    const text = `${benchExample}operator: replay:operator.jsonl\n`;
    expect(problemsOf(() => parseBench(text, 'bench.yaml'))).toEqual([
      expect.stringMatching(
        /operator: recorded answers go with replayed instruments only, and the load is none$/,
      ),
    ]);
  });

  it('are a recording', () => {
    const text = `${replayed}operator: tcp://127.0.0.1:1\n`;
    expect(problemsOf(() => parseBench(text, 'bench.yaml'))).toEqual([
      expect.stringContaining("'tcp://127.0.0.1:1'; a recording is needed: replay:operator.jsonl"),
    ]);
  });
});
