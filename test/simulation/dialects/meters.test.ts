import { describe, expect, it } from 'vitest';
import { configuredMeter } from '../../../src/simulation/dialects/configured-meter.js';
import type { Dialect, Interpreter, MeterMode } from '../../../src/simulation/dialects/dialect.js';
import { queryMeter } from '../../../src/simulation/dialects/query-meter.js';

function awake(dialect: Dialect): Interpreter {
  if (dialect.role !== 'meter') throw new Error('not a meter');
  let mode: MeterMode = 'voltage';
  return dialect.wake({
    identity: 'railproof,simulated meter,K-bench,1',
    mode: () => mode,
    setMode: (wanted) => {
      mode = wanted;
    },
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

  it('says what it is set to, so that a wrong mode is noticed', () => {
    const meter = awake(configuredMeter);
    expect(meter.hear('CONF?').reply).toMatch(/^"VOLT [^"]+"$/);
    expect(meter.hear('CONF:RES;:CONF?').reply).toMatch(/^"RES [^"]+"$/);
    expect(meter.hear('*RST;CONF?').reply).toMatch(/^"VOLT /);
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

  it('measures resistance by another, and is never in the wrong mode', () => {
    const meter = awake(queryMeter);
    expect(meter.hear('MEAS:RES?').reply).toBe('+9.9E+37');
    expect(meter.hear('MEAS:VOLT?').reply).toBe('+1.521000E+01');
  });

  it('has no READ?', () => {
    expect(awake(queryMeter).hear('READ?')).toEqual({ reply: undefined, understood: false });
  });
});
