import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { type Adaptation, adaptedDriver } from '../../src/files/adapted-driver.js';
import type { Exchange } from '../../src/files/driver-dialogue.js';
import { parseDriver } from '../../src/files/read-driver.js';
import { driverExample } from './design-examples.js';

const nothing: Adaptation = { name: 'my-load', wire: {}, rests: {}, dialogue: [], remark: 'heard' };
const adapted = (change: Partial<Adaptation>, text = driverExample): string =>
  adaptedDriver(text, { ...nothing, ...change });

const drivers = new URL('../../drivers/', import.meta.url);

describe('an adapted driver', () => {
  it('is the same but for its name where nothing else changes', () => {
    const before = parseDriver(driverExample, 'load.yaml');
    expect(parseDriver(adapted({}), 'my-load.yaml')).toEqual({ ...before, name: 'my-load' });
  });

  it('keeps the comments, and lets a line be long', () => {
    const text = readFileSync(new URL('load-remote-scpi.yaml', drivers), 'utf8');
    const comments = text.split('\n').filter((line) => line.trim().startsWith('#'));
    const lines = adapted({}, text).split('\n');
    expect(comments.length).toBeGreaterThan(5);
    for (const comment of comments) expect(lines).toContain(comment);
  });

  const shipped = readdirSync(drivers).filter((file) => file.endsWith('.yaml'));
  it.each(shipped)('differs from %s only in what was changed', (file) => {
    const text = readFileSync(new URL(file, drivers), 'utf8');
    const lines = (changed: string): string[] => changed.replace(/ +#/g, ' #').split('\n');
    const before = lines(text);
    expect(lines(adapted({}, text)).flatMap((line, at) => (line === before[at] ? [] : [line]))).toEqual([
      'name: my-load',
    ]);
    const wired = lines(adapted({ wire: { gap: 0.123 } }, text));
    const changed = wired.filter((line, at) => line !== before[at]);
    expect(changed).toEqual(['name: my-load', expect.stringMatching(/\bgap: 123 ms\b/)]);
  });

  it('speaks in the way that it is told to', () => {
    const wire = { sendEnd: '\r\n', gap: 0.05, timeout: 5, echo: true, prompt: '> ' };
    const text = adapted({ wire, settling: 0.5 });
    expect(text).toContain('gap: 50 ms');
    expect(text).toContain('send-end: "\\r\\n"');
    expect(parseDriver(text, 'my-load.yaml')).toMatchObject({ wire, settling: 0.5 });
  });

  it('has a wire and a settling where there were none', () => {
    const without = driverExample.replace(/^wire.*\n/m, '').replace(/^settling.*\n/m, '');
    const text = adapted({ wire: { gap: 0.02 }, settling: 0.1 }, without);
    expect(parseDriver(text, 'my-load.yaml')).toMatchObject({ wire: { gap: 0.02 }, settling: 0.1 });
  });

  it('lets an operation rest, whether or not it had a rest before', () => {
    const before = driverExample.replace('["FUNC VOLT"]', '[{ send: "FUNC VOLT", rest: 10 ms }]');
    const text = adapted({ rests: { 'current-mode': 0.5, 'voltage-mode': 0.2 } }, before);
    expect(text).toContain('current-mode: [{ send: "FUNC CURR", rest: 500 ms }]');
    expect(parseDriver(text, 'my-load.yaml').operations).toMatchObject({
      'current-mode': [{ text: 'FUNC CURR', rest: 0.5 }],
      'voltage-mode': [{ text: 'FUNC VOLT', rest: 0.2 }],
    });
  });

  const dialogue: readonly Exchange[] = [
    { kind: 'identity', answer: 'nursery,load 1,7,\u00b0\t"2.1"', is: 'understood' },
    { kind: 'operation', operation: 'set-current', value: 2.5, sends: ['CURR 2.5'] },
    { kind: 'operation', operation: 'input-off', sends: ['INP OFF'] },
    {
      ...{ kind: 'reading', reading: 'voltage', sends: ['MEAS:VOLT?'] },
      heard: { answer: '1.5210E+01', is: { kind: 'number', value: 15.21, dimension: 'voltage' } },
    },
    { kind: 'reading', reading: 'input-state', heard: { answer: '0', is: { kind: 'flag', value: false } } },
    { kind: 'reading', reading: 'current', heard: { answer: '4 apples', is: { kind: 'not-understood' } } },
    { kind: 'errors', answer: '-113,"Undefined header"', is: 'error' },
  ];

  it('holds what was said and answered, as it was', () => {
    const text = adapted({ dialogue });
    expect(parseDriver(text, 'my-load.yaml').dialogue).toEqual(dialogue);
    expect(text).toMatch(/"4 apples", is: not-understood \} # write what it means/);
  });

  it('keeps the exchanges that stand there, and adds none twice', () => {
    const once = adapted({ dialogue: dialogue.slice(0, 3) });
    const twice = adapted({ dialogue: [...dialogue, ...dialogue] }, once);
    expect(parseDriver(twice, 'my-load.yaml').dialogue).toEqual(dialogue);
  });
});
