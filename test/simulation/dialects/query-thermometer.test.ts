import { expect, it } from 'vitest';
import { queryThermometer } from '../../../src/simulation/dialects/query-thermometer.js';

it.each(['MEAS:TEMP?', 'MEASURE:TEMPERATURE?', 'meas:scal:temp? 100,0.1'])(
  'a thermometer answers %s in degrees Celsius',
  (message) => {
    if (queryThermometer.role !== 'thermometer') throw new Error('not a thermometer');
    const thermometer = queryThermometer.wake({ identity: 'K', measure: () => 41.25 });
    expect(thermometer.hear(message)).toEqual({ reply: '+4.125000E+01', understood: true });
    expect(thermometer.hear('MEAS:VOLT?').understood).toBe(false);
  },
);
