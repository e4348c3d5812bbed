import { describe, expect, it } from 'vitest';
import reference from '../../../fixtures/reference/scpi-488.json' with { type: 'json' };
import { event, query } from './command.js';
import { errorTexts, eventBitOf } from './errors.js';
import { type LoadBody, loadBody, loadTree } from './load-tree.js';
import { meterBody, meterTree } from './meter-tree.js';
import { strict } from './response.js';
import { StandardInstrument } from './standard-instrument.js';

function aLoad(): {
  readonly load: StandardInstrument;
  readonly body: LoadBody;
  readonly ask: (message: string) => string;
} {
  const body = loadBody();
  const load = new StandardInstrument({
    identity: 'NURSERY,LOAD,K1,1.0',
    commands: [...loadTree(() => body), event('SLOW', () => ({ goesOn: 2 }))],
    reset: () => {
      body.input = false;
    },
  });
  load.write('*ESR?');
  load.read();
  const ask = (message: string): string => {
    load.write(message);
    return load.readIfAny()?.text ?? '';
  };
  return { load, body, ask };
}

// Source: IEEE Std 488.2 and SCPI-1999 as fixtures/reference/scpi-488.json states them.
describe('an instrument made from the standards', () => {
  it('has every command that they ask for', () => {
    const { ask, load } = aLoad();
    const asked = [...reference.mandatory_common_commands.list, ...reference.scpi_required.list];
    for (const printed of asked) {
      const spoken = printed.replace(/[[\]]/g, '').replace(/(ENABle|\*ESE|\*SRE)$/, '$1 0');
      expect(ask(spoken) !== '').toBe(spoken.endsWith('?'));
      expect(load.errors.isEmpty).toBe(true);
    }
  });

  it('answers them in their forms', () => {
    const { ask } = aLoad();
    expect(ask('*IDN?').split(reference.idn.separator)).toHaveLength(reference.idn.fields.length);
    expect(Number(ask('*OPC?'))).toBe(Number(reference.opc_query.response));
    expect(Number(ask('*TST?'))).toBe(Number(reference.tst.ok));
    expect(ask('SYST:VERS?')).toMatch(/^\d{4}\.\d$/);
    expect(ask('SYST:ERR?').replace('+', '')).toBe(reference.error_queue.empty_response);
  });

  it('knows each error by the standard text, and which bit it sets', () => {
    const known = new Map(reference.error_queue.known.map(({ number, text }) => [number, text]));
    for (const [written, text] of Object.entries(errorTexts)) {
      const number = Number(written) as Parameters<typeof eventBitOf>[0];
      if (known.has(number)) expect(text).toBe(known.get(number));
      const of = reference.error_queue.classes.find(({ first, last }) => number <= first && number >= last);
      expect(eventBitOf(number)).toBe(of === undefined ? 0 : 1 << of.esr_bit);
    }
  });

  it('joins the answers of one message with semicolons, in order', () => {
    const { ask, body } = aLoad();
    body.measured.VOLTage = 15.2;
    body.measured.CURRent = 4;
    expect(ask('MEAS:VOLT?;CURR?;:INP?')).toBe('+1.520000E+01;+4.000000E+00;+0');
  });

  it('does what comes before a mistake, and lets what follows go', () => {
    const { ask, body } = aLoad();
    expect(ask('INP ON;CURRENTS 2;:CURR 3')).toBe('');
    expect(body).toMatchObject({ input: true, levels: { CURRent: 0 } });
    expect(ask('SYST:ERR?')).toBe('-113,"Undefined header"');
  });

  it('goes on after what it can read but not do', () => {
    const { ask, body } = aLoad();
    ask('CURR 99;:CURR 3');
    expect(body.levels.CURRent).toBe(3);
    expect(ask('SYST:ERR?')).toBe('-222,"Data out of range"');
  });

  it('refuses what is missing or too much before it does anything', () => {
    const { ask, body } = aLoad();
    for (const message of ['INP', 'INP ON,ON', 'INP? 1', 'MEAS:VOLT', '*IDN']) ask(message);
    expect(body.input).toBe(false);
    expect(ask('SYST:ERR?;ERR?;ERR?;ERR?;ERR?')).toBe(
      '-109,"Missing parameter";-108,"Parameter not allowed";-108,"Parameter not allowed";' +
        '-113,"Undefined header";-113,"Undefined header"',
    );
  });

  it('asks a setting for its bounds by their names', () => {
    const { ask } = aLoad();
    expect(ask('CURR? MAX;:CURR? MINIMUM')).toBe('+6.000000E+01;+0.000000E+00');
  });

  it('keeps its errors in order, puts -350 last when there are too many, and loses the rest', () => {
    const { ask } = aLoad();
    ask('CURR 99');
    for (let count = 0; count < 20; count++) ask('NONSENSE');
    expect(ask('SYST:ERR:COUN?')).toBe('+10');
    const entries = Array.from({ length: 11 }, () => Number(ask('SYST:ERR?').split(',')[0]));
    expect(entries).toEqual([-222, ...Array<number>(8).fill(-113), reference.error_queue.overflow.number, 0]);
  });

  it('sums up its status: errors, answers, events that are enabled, and whether it asks for service', () => {
    const { ask } = aLoad();
    expect(ask('*STB?')).toBe('+0');
    expect(ask('*OPC?;*STB?')).toBe('+1;+16');
    ask('NONSENSE');
    expect(ask('*STB?')).toBe('+4');
    ask('*ESE 32');
    expect(ask('*STB?')).toBe('+36');
    ask('*SRE 96');
    expect(ask('*SRE?;*STB?')).toBe('+32;+116');
    expect(ask('*ESR?')).toBe('+32');
    expect(ask('*ESR?;*STB?')).toBe('+0;+20');
    ask('*CLS');
    expect(ask('*STB?;*ESE?')).toBe('+0;+32');
  });

  it('says with PON that it had no power', () => {
    const fresh = new StandardInstrument({ identity: 'NURSERY,LOAD,K1,1.0', commands: [] });
    fresh.write('*ESR?');
    expect(fresh.read()?.text).toBe('+128');
  });

  it('tells by *OPC, *OPC? and *WAI when all is done', () => {
    const { load } = aLoad();
    const at = (message: string, time: number) => {
      load.write(message, time);
      return load.readIfAny();
    };
    at('SLOW;*OPC', 10);
    expect(at('*ESR?', 11)).toEqual({ text: '+0', at: 11 });
    expect(at('*OPC?', 11)).toEqual({ text: '+1', at: 12 });
    expect(at('*ESR?', 12)).toEqual({ text: '+1', at: 12 });
    at('SLOW', 20);
    expect(at('*WAI;INP?', 20)).toEqual({ text: '+0', at: 22 });
  });

  it('calls it an error when an answer is not read, or asked for without a question', () => {
    const { load, ask } = aLoad();
    load.write('*OPC?');
    expect(ask('SYST:ERR?')).toBe('-410,"Query INTERRUPTED"');
    expect(load.read()).toBeUndefined();
    expect(ask('SYST:ERR?')).toBe('-420,"Query UNTERMINATED"');
    expect(ask('*IDN?;*OPC?')).toBe('NURSERY,LOAD,K1,1.0');
    expect(ask('SYST:ERR?;*ESR?')).toBe('-440,"Query UNTERMINATED after indefinite response";+4');
  });

  it('measures as the standard has it: INITiate goes on, FETCh? waits for it, READ? is both', () => {
    const body = meterBody();
    body.measured['VOLTage[:DC]'] = 15.2;
    body.measured.RESistance = Infinity;
    const meter = new StandardInstrument({
      identity: 'NURSERY,METER,K2,1.0',
      commands: meterTree(body),
      form: { ...strict, plus: false },
    });
    const at = (message: string, time: number) => {
      meter.write(message, time);
      return meter.readIfAny();
    };
    at('FETC?', 0);
    expect(at('SYST:ERR?', 0)?.text).toBe('-230,"Data corrupt or stale"');
    at('INIT', 1);
    expect(at('FETC?', 1)).toEqual({ text: '1.520000E+01', at: 1.1 });
    expect(at('CONF:RES 1KOHM;:READ?', 2)).toEqual({ text: '9.900000E+37', at: 2.1 });
    expect(at('FUNC?;:CONF?', 3)?.text).toBe('"RES";"RES 1.000000E+01,1.000000E-05"');
    expect(at("sense:function:on 'voltage';:FUNC?", 3)?.text).toBe('"VOLT"');
    at('INIT:CONT ON;IMM', 4);
    expect(at('SYST:ERR?', 4)?.text).toBe('-213,"Init ignored"');
  });

  it('hears its headers with any legal tree, by number', () => {
    const numbers: number[][] = [];
    const many = new StandardInstrument({
      identity: 'NURSERY,MANY,K3,1.0',
      commands: [
        query('OUTPut<4>:LIST<2>', (occasion) => {
          numbers.push([...occasion.numbers]);
          return { kind: 'boolean', value: true };
        }),
      ],
    });
    many.write('OUTP3:LIST?;LIST2?;:outp:list5?');
    expect(numbers).toEqual([
      [3, 1],
      [3, 2],
    ]);
    expect(many.read()?.text).toBe('+1;+1');
    many.write('SYST:ERR?');
    expect(many.read()?.text).toBe('-114,"Header suffix out of range"');
  });
});
