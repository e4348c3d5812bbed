import { describe, expect, it } from 'vitest';
import { parseBench } from '../../src/files/read-bench.js';
import { problemsOf } from './problems-of.js';

const scanned = `railproof: bench 1
name: corner bench
instruments:
  load: { driver: load-input-scpi, connection: "tcp://127.0.0.1:5025" }
  meter: { driver: meter-read-scpi, connection: "tcp://127.0.0.1:5026" }
  scanner: { driver: scanner-route-scpi, connection: "tcp://127.0.0.1:5027" }
  thermometer: { driver: thermometer-query-scpi, connection: "tcp://127.0.0.1:5028" }
voltage-from: meter-at-module
limits: { voltage: 60 V, current: 8 A, power: 120 W, temperature: 80 °C }
ambient: { temperature: 22 °C }
group:
  measured-by: scanner
  output-channel: 110
  places:
    - { ballast: { resistance: 50.2 mΩ, uncertainty: 0.3 mΩ }, channel: 101 }
    - { ballast: { resistance: 49.8 mΩ, uncertainty: 0.3 mΩ }, channel: 102 }
`;
const own = scanned
  .replace(/^ {2}scanner:.*\n/m, '')
  .replace('measured-by: scanner', 'measured-by: meters')
  .replace('  output-channel: 110\n', '')
  .replace('channel: 101', 'meter: { driver: meter-query-scpi, connection: "tcp://127.0.0.1:5031" }')
  .replace('channel: 102', 'meter: { driver: meter-query-scpi, connection: "tcp://127.0.0.1:5032" }');

const changed = (text: string, find: string, replacement: string): string => {
  expect(text).toContain(find);
  return text.replace(find, replacement);
};

describe('the group of a bench', () => {
  it('is read: what tells its places apart, and the ballast of each', () => {
    const bench = parseBench(scanned, 'bench.yaml');
    expect(bench.group).toEqual({
      measuredBy: 'scanner',
      outputChannel: 110,
      places: [
        { ballast: { resistance: 0.0502, uncertainty: 0.0003 }, channel: 101 },
        { ballast: { resistance: 0.0498, uncertainty: 0.0003 }, channel: 102 },
      ],
    });
    expect(bench.limits.temperature).toBe(80);
    expect(bench.ambient).toEqual({ temperature: 22, uncertainty: 2 });
  });

  it('may have a meter at each place', () => {
    const [first] = parseBench(own, 'bench.yaml').group?.places ?? [];
    expect(first?.meter).toEqual({
      driver: 'meter-query-scpi',
      connection: { kind: 'tcp', host: '127.0.0.1', port: 5031 },
    });
  });

  it('may be measured by an operator, with nothing more than its ballasts', () => {
    const text = own
      .replace('measured-by: meters', 'measured-by: operator')
      .replaceAll(/, meter: \{[^}]*\}/g, '');
    expect(parseBench(text, 'bench.yaml').group).toMatchObject({ measuredBy: 'operator' });
  });
});

describe('one mistake is one line, at its place', () => {
  it.each<[string, string, string, string, string]>([
    [
      'a scanner that is not there',
      scanned,
      '  scanner: { driver: scanner-route-scpi, connection: "tcp://127.0.0.1:5027" }\n',
      '',
      '11:16: group.measured-by: there is no scanner among the instruments',
    ],
    [
      'a scanner that nothing is known of',
      own,
      '  thermometer:',
      '  scanner: { driver: scanner-route-scpi, connection: "tcp://127.0.0.1:5027" }\n  thermometer:',
      "6:12: instruments.scanner: the group is measured by meters; with a scanner it is 'measured-by: scanner'",
    ],
    [
      'a place without a channel',
      scanned,
      ', channel: 102',
      '',
      "16:7: group.places.1: missing 'channel': which one puts the meter across this place?",
    ],
    [
      'a channel for two places',
      scanned,
      'channel: 102',
      'channel: 101',
      '16:73: group.places.1.channel: channel 101 is that of place 1 already',
    ],
    [
      'a channel for a place and for the output',
      scanned,
      'channel: 102',
      'channel: 110',
      '16:73: group.places.1.channel: channel 110 is that of output-channel already',
    ],
    [
      'a place without its own meter',
      own,
      ', meter: { driver: meter-query-scpi, connection: "tcp://127.0.0.1:5032" }',
      '',
      "14:7: group.places.1: missing 'meter': each place needs one of its own",
    ],
    [
      'a ballast of nothing',
      scanned,
      '50.2 mΩ',
      '0 mΩ',
      "15:32: group.places.0.ballast.resistance: found '0 mΩ'; more than 0 Ω is needed",
    ],
    [
      'one place alone',
      scanned,
      '    - { ballast: { resistance: 49.8 mΩ, uncertainty: 0.3 mΩ }, channel: 102 }\n',
      '',
      '15:5: group.places: found 1 of them; at least 2 are needed',
    ],
    [
      'a simulated meter at a place, of a bench that does not say what is there',
      own,
      '"tcp://127.0.0.1:5032"',
      '"simulated:"',
      "14:111: group.places.1.meter.connection: a simulated instrument needs a 'simulation' section, which says what is really there",
    ],
  ])('%s', (_, text, find, replacement, problem) => {
    expect(problemsOf(() => parseBench(changed(text, find, replacement), 'bench.yaml'))).toEqual([
      `bench.yaml:${problem}`,
    ]);
  });

  it('a ballast that the simulation has left out, at the module without it', () => {
    const modules = ['K1', 'K2'].map(
      (name) => `
    - name: ${name}
      open-circuit-voltage: 15.2 V
      droop-resistance: 18 mΩ
      limit: { style: hiccup, current: 5.3 A }`,
    );
    const text = `${scanned}simulation:\n  circuit: parallel\n  modules:${modules.join('\n      ballast: 50 mΩ')}\n`;
    expect(problemsOf(() => parseBench(text, 'bench.yaml'))).toEqual([
      "bench.yaml:25:7: simulation.modules.1: place 2 of the group has a ballast, and 'ballast' of K2 is missing or none: what is really there?",
    ]);
    expect(parseBench(`${text}      ballast: 47 mΩ\n`, 'bench.yaml').simulation?.modules[1]?.ballast).toBe(
      0.047,
    );
  });

  it('a meter that should be read through a scanner, or moved by hand, and is not there', () => {
    const text = changed(
      scanned,
      '  meter: { driver: meter-read-scpi, connection: "tcp://127.0.0.1:5026" }\n',
      '',
    )
      .replace('voltage-from: meter-at-module', 'voltage-from: load-terminals')
      .replace('limits:', 'leads: { resistance: 35 mΩ, uncertainty: 5 mΩ }\nlimits:');
    expect(problemsOf(() => parseBench(text, 'bench.yaml'))).toEqual([
      'bench.yaml:12:16: group.measured-by: scanner needs a meter among the instruments',
    ]);
  });
});
