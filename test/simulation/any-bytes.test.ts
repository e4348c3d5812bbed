import { describe, expect, it } from 'vitest';
import { dialects } from '../../src/simulation/dialects/choose-dialect.js';
import { INPUT_BUFFER } from '../../src/simulation/message-splitter.js';
import { openSimulation } from '../../src/simulation/open-simulation.js';
import { MessageSplitter } from '../../src/simulation/message-splitter.js';
import { VirtualClock } from '../../src/clock/virtual-clock.js';
import fc from '../property.js';
import { hiccup, k1, loadDriver, meterDriver, simulationOf } from './bench-parts.js';

const words = [
  ...[
    '*IDN?',
    '*RST',
    '*CLS',
    'INP',
    'INP ON',
    'INPUT:STATE?',
    'CURR',
    ':CURR:LEV',
    'VOLT',
    'FUNC',
    'MEAS:VOLT?',
  ],
  ...[
    'SYST:ERR?',
    'READ?',
    'CONF?',
    'CONF:RES',
    'ROUT:CLOS',
    'MEAS:TEMP?',
    'MODE CC',
    'CUR?',
    'VOL 5',
    '(@101)',
  ],
  ...[
    ' ',
    ';',
    ',',
    ':',
    '?',
    '"',
    "'",
    '\r',
    '\n',
    '\r\n',
    '\0',
    '\x1b',
    '1e999',
    '-1e-999',
    'NAN',
    '9.91E37',
    '5 A',
  ],
];
const said = fc.oneof(
  fc.uint8Array({ maxLength: 200 }),
  fc
    .array(fc.constantFrom(...words), { maxLength: 30 })
    .map((parts) => Buffer.from(parts.join(''), 'latin1')),
  fc.nat({ max: 3 * INPUT_BUFFER }).map((length) => Buffer.alloc(length, ':A')),
);

describe('a simulated instrument takes whatever bytes it is sent', () => {
  it.each(
    dialects
      .filter(({ role }) => role === 'load' || role === 'meter')
      .map(({ name, role }) => [name, role] as const),
  )(
    '%s: it never fails, answers in whole lines of printable text, and still says who it is',
    (name, role) => {
      const driver = role === 'load' ? loadDriver : meterDriver;
      fc.assert(
        fc.property(fc.array(said, { maxLength: 8 }), (pieces) => {
          const opened = openSimulation({
            simulation: simulationOf(k1(hiccup)),
            clock: new VirtualClock(new Date(0)),
            drivers: { load: loadDriver, meter: meterDriver },
            group: undefined,
          });
          const instrument = opened.instrument(role, driver, name);
          const splitter = new MessageSplitter();
          let now = 0;
          for (const piece of [...pieces, Buffer.from('\n*IDN?\n')]) {
            for (const incoming of splitter.feed(piece)) {
              const { reply, readyAt } = instrument.hear(incoming, now);
              expect(readyAt).toBeGreaterThanOrEqual(now);
              now = readyAt;
              if (reply !== undefined) expect(reply).toMatch(/^[\x20-\x7e]*\r?\n$/);
              if (incoming.kind === 'message' && incoming.text === '*IDN?')
                expect(reply).toMatch(/^railproof,/);
            }
          }
        }),
        { numRuns: 150 },
      );
    },
  );
});
