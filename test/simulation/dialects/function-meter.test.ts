import { describe, expect, it } from 'vitest';
import type { Interpreter, MeterMode } from '../../../src/simulation/dialects/dialect.js';
import { functionMeter } from '../../../src/simulation/dialects/function-meter.js';

function aMeter(): { readonly meter: Interpreter; readonly measured: MeterMode[] } {
  if (functionMeter.role !== 'meter') throw new Error('not a meter');
  let mode: MeterMode = 'voltage';
  const measured: MeterMode[] = [];
  const meter = functionMeter.wake({
    identity: 'railproof,simulated meter,K-bench,1',
    mode: () => mode,
    setMode: (wanted) => {
      mode = wanted;
    },
    measure: (what) => {
      measured.push(what);
      return what === 'voltage' ? 15.2 : Infinity;
    },
  });
  return { meter, measured };
}

describe('a meter whose function is a text', () => {
  it.each([
    ['FUNC "RES"', '"RES"'],
    ["sense:function:on 'resistance'", '"RES"'],
    ['FUNC "RES";FUNC "VOLT"', '"VOLT:DC"'],
    ['FUNC "RES";FUNC "VOLTAGE:DC"', '"VOLT:DC"'],
    ['FUNC "RES";*RST', '"VOLT:DC"'],
  ])('is set with %s and answers %s', (message, answer) => {
    const { meter } = aMeter();
    expect(meter.hear(message)).toEqual({ reply: undefined, understood: true });
    expect(meter.hear('FUNC?').reply).toBe(answer);
  });

  it('measures at READ? and at INIT, and fetches what was measured last', () => {
    const { meter, measured } = aMeter();
    expect(meter.hear('FETC?').reply).toBe('+9.91E+37');
    expect(meter.hear('INIT;:FETC?;:FETC?').reply).toBe('+1.520000E+01;+1.520000E+01');
    expect(meter.hear('FUNC "RES";:READ?').reply).toBe('+9.9E+37');
    expect(measured).toEqual(['voltage', 'resistance']);
  });

  it.each([
    ['FUNC', '-109,"Missing parameter"'],
    ['FUNC "VOLT","RES"', '-108,"Parameter not allowed"'],
    ['FUNC? 1', '-108,"Parameter not allowed"'],
    ['FUNC VOLT', '-104,"Data type error"'],
    ['FUNC "VOLT:AC"', '-224,"Illegal parameter value"'],
  ])('complains about %s', (message, complaint) => {
    const { meter } = aMeter();
    expect(meter.hear(message).understood).toBe(false);
    expect(meter.hear('SYST:ERR?').reply).toBe(complaint);
  });
});
