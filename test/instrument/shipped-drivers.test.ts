import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { parseDriver } from '../../src/files/read-driver.js';
import { readNumber } from '../../src/instrument/reading.js';

const folder = new URL('../../drivers/', import.meta.url);
const files = readdirSync(folder).filter((name) => name.endsWith('.yaml'));
const shipped = (name: string) => parseDriver(readFileSync(new URL(name, folder), 'utf8'), `drivers/${name}`);

describe('the shipped drivers', () => {
  it('are the four families', () => {
    expect(files.sort()).toEqual([
      'load-input-scpi.yaml',
      'load-short-scpi.yaml',
      'meter-query-scpi.yaml',
      'meter-read-scpi.yaml',
    ]);
  });

  it.each(files)('%s can be read, and is named as its file is', (file) => {
    const driver = shipped(file);
    expect(`${driver.name}.yaml`).toBe(file);
    expect(driver.operations['make-safe']).not.toBeUndefined();
    expect(driver.accuracy['voltage']?.fixed).toBeGreaterThan(0);
  });

  it.each([
    ['voltage', '15.21V', 15.21],
    ['voltage', '0.003 V', 0.003],
    ['current', '3.998A', 3.998],
  ])('take the short style with its units: %s %s', (name, reply, value) => {
    const reading = shipped('load-short-scpi.yaml').readings[name];
    const about = { address: 'serial:', question: '?' };
    expect(reading?.kind === 'number' && readNumber(reply, reading, about)).toEqual({ kind: 'value', value });
  });

  it('are all named in the guide that stands beside them', () => {
    const guide = readFileSync(new URL('README.md', folder), 'utf8');
    for (const file of files) expect(guide).toContain(`\`${file.replace('.yaml', '')}\``);
  });
});
