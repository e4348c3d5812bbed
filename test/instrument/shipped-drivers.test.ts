import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { parseDriver } from '../../src/files/read-driver.js';
import { checkDialogue } from '../../src/instrument/dialogue-check.js';
import { readChannel, readFlag, readNumber } from '../../src/instrument/reading.js';
import { ReplyNotUnderstoodError } from '../../src/instrument/reply-errors.js';

const folder = new URL('../../drivers/', import.meta.url);
const files = readdirSync(folder).filter((name) => name.endsWith('.yaml'));
const shipped = (name: string) => parseDriver(readFileSync(new URL(name, folder), 'utf8'), `drivers/${name}`);

const about = { address: 'serial:', question: '?' };

describe('the shipped drivers', () => {
  it('are the eleven families', () => {
    expect(files.sort()).toEqual([
      'load-channel-scpi.yaml',
      'load-input-scpi.yaml',
      'load-remote-scpi.yaml',
      'load-short-scpi.yaml',
      'load-source-scpi.yaml',
      'meter-function-scpi.yaml',
      'meter-query-scpi.yaml',
      'meter-read-scpi.yaml',
      'scanner-route-scpi.yaml',
      'source-output-scpi.yaml',
      'thermometer-query-scpi.yaml',
    ]);
  });

  it.each(files)('%s can be read, and is named as its file is', (file) => {
    const driver = shipped(file);
    expect(`${driver.name}.yaml`).toBe(file);
    for (const [name, { kind }] of Object.entries(driver.readings)) {
      if (kind === 'number') expect(driver.accuracy[name]?.fixed).toBeGreaterThan(0);
    }
  });

  it.each(files)('%s holds a dialogue by which it is tested, and passes', (file) => {
    const driver = shipped(file);
    expect(checkDialogue(driver)).toEqual([]);
    const kinds = (driver.dialogue ?? []).map(({ kind }) => kind);
    expect(kinds.filter((kind) => kind === 'reading').length).toBeGreaterThanOrEqual(2);
    if (driver.errors !== 'none') expect(kinds).toContain('errors');
  });

  it.each([
    ['voltage', '15.21V', 15.21],
    ['voltage', '0.003 V', 0.003],
    ['current', '3.998A', 3.998],
  ])('take the short style with its units: %s %s', (name, reply, value) => {
    const reading = shipped('load-short-scpi.yaml').readings[name];
    expect(reading?.kind === 'number' && readNumber(reply, reading, about)).toEqual({ kind: 'value', value });
  });

  it.each([
    ['"VOLT +1.0E+01,+1.0E-05"', true, false],
    ['"VOLT:DC 10,0.001"', true, false],
    ['VOLT', true, false],
    ['"VOLT:AC 10,0.001"', false, false],
    ['"CURR +1.0E+00,+1.0E-06"', false, false],
    ['"RES +1.0E+03,+1.0E-03"', false, true],
    ['"FRES +1.0E+03,+1.0E-03"', false, false],
  ])(
    'tell from CONF? whether a meter measures dc voltage or resistance: %s',
    (reply, voltage, resistance) => {
      const { readings } = shipped('meter-read-scpi.yaml');
      const says = (name: string): boolean | undefined => {
        const reading = readings[name];
        return reading?.kind === 'flag' ? readFlag(reply, reading, about) : undefined;
      };
      expect(says('measures-voltage')).toBe(voltage);
      expect(says('measures-resistance')).toBe(resistance);
    },
  );

  it.each(['', '10', '-113', '"'])('do not take "%s" for what a meter measures', (reply) => {
    const reading = shipped('meter-read-scpi.yaml').readings['measures-voltage'];
    expect(() => reading?.kind === 'flag' && readFlag(reply, reading, about)).toThrow(
      ReplyNotUnderstoodError,
    );
  });

  it.each([
    ['(@101)', 101],
    ['(@ 3 )', 3],
    ['(@)', null],
  ])('find the closed channel in %s', (reply, channel) => {
    const reading = shipped('scanner-route-scpi.yaml').readings['closed-channel'];
    expect(reading?.kind === 'channel' ? readChannel(reply, reading, about) : 0).toBe(channel);
  });

  it.each(['(@101,102)', '(@101:104)', '(@1!2)'])('do not take %s for a channel', (reply) => {
    const reading = shipped('scanner-route-scpi.yaml').readings['closed-channel'];
    expect(() => reading?.kind === 'channel' && readChannel(reply, reading, about)).toThrow(
      ReplyNotUnderstoodError,
    );
  });

  it('are all named in the guide that stands beside them', () => {
    const guide = readFileSync(new URL('README.md', folder), 'utf8');
    for (const file of files) expect(guide).toContain(`\`${file.replace('.yaml', '')}\``);
  });
});
