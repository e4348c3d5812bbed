import { describe, expect, it } from 'vitest';
import { configuredMeter } from '../../../src/simulation/dialects/configured-meter.js';
import type { Dialect, Interpreter } from '../../../src/simulation/dialects/dialect.js';
import { queryMeter } from '../../../src/simulation/dialects/query-meter.js';

function awake(dialect: Dialect): Interpreter {
  if (dialect.role !== 'meter') throw new Error('not a meter');
  return dialect.wake({
    identity: 'railproof,simulated meter,K-bench,1',
    measure: (what) => (what === 'voltage' ? 15.21 : Number.POSITIVE_INFINITY),
  });
}

describe('a meter that is configured once', () => {
  it('reads what it was configured for', () => {
    const meter = awake(configuredMeter);
    expect(meter.hear('READ?').reply).toBe('+1.521000E+01');
    expect(meter.hear('CONF:RES;:READ?').reply).toBe('+9.9E+37');
    expect(meter.hear('CONFIGURE:VOLTAGE:DC 20,0.001').understood).toBe(true);
    expect(meter.hear('READ?').reply).toBe('+1.521000E+01');
  });

  it('does not know how to measure by one query', () => {
    const meter = awake(configuredMeter);
    expect(meter.hear('MEAS:VOLT?').understood).toBe(false);
    expect(meter.hear('SYST:ERR?').reply).toBe('-113,"Undefined header"');
  });
});

describe('a meter asked by one query', () => {
  it.each(['MEAS:VOLT?', 'MEASURE:VOLTAGE:DC?', 'meas:volt:dc? 20, 0.001'])('answers %s', (message) => {
    expect(awake(queryMeter).hear(message)).toEqual({ reply: '+1.521000E+01', understood: true });
  });

  it('has no READ?', () => {
    expect(awake(queryMeter).hear('READ?')).toEqual({ reply: undefined, understood: false });
  });
});
