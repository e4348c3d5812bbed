import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { makeRunFolder, writeHeader } from '../../src/record/run-folder.js';
import { readHeader, type RunHeader } from '../../src/record/run-header.js';
import { someBaseline, someHeader } from './some-header.js';
import { temporaryFolder } from './some-run.js';

const place = temporaryFolder();
const began = new Date('2026-11-20T09:00:00Z');

/** A record whose run.json says this. */
function recordWith(text: string): string {
  const folder = makeRunFolder(place('runs'), began, 'K1', 'real-limit').path;
  writeFileSync(join(folder, 'run.json'), text);
  return folder;
}

describe('the header of a record', () => {
  it('reads back as it was written', () => {
    const folder = makeRunFolder(place('runs'), began, 'K1', 'real-limit');
    writeHeader(folder, someHeader);
    expect(readHeader(folder.path).header).toEqual(someHeader);
  });

  it('carries all of a derating, and one from before there was more of it still reads', () => {
    const derating: RunHeader['derating'] = {
      ...someHeader.derating,
      ambient: { expected: 45, fullTo: 40, fallingTo: 0.5, at: 60 },
      lossModel: { fixed: 0.1 },
      temperatureLimit: 85,
    };
    const folder = recordWith(JSON.stringify({ ...someHeader, derating }));
    expect(readHeader(folder).header.derating).toEqual(derating);
    const before = { margin: 0.8, aboveNameplate: 'never' };
    const old = recordWith(JSON.stringify({ ...someHeader, derating: before }));
    expect(readHeader(old).header.derating).toEqual(before);
  });

  it('with a baseline reads back too, whatever kinds of findings that holds', () => {
    const folder = makeRunFolder(place('compared'), began, 'K1', 'acceptance');
    const header = { ...someHeader, baseline: someBaseline };
    writeHeader(folder, header);
    expect(readHeader(folder.path).header).toEqual(header);
  });

  it.each([
    ['cut off', JSON.stringify(someHeader).slice(0, 100), 'it is not JSON'],
    ['empty', '', 'it is not JSON'],
    ['nothing', 'null', 'Invalid input: expected object, received null'],
    [
      'of another format',
      JSON.stringify({ ...someHeader, format: 'railproof/record 2' }),
      'format: Invalid input: expected "railproof/record 1"',
    ],
    [
      'changed inside',
      JSON.stringify(someHeader).replace('"voltage":15', '"voltage":"15 V"'),
      'modules.0.rated.voltage: Invalid input: expected number, received string',
    ],
    [
      'compared by no tolerance',
      JSON.stringify({ ...someHeader, baseline: { ...someBaseline, tolerance: undefined } }),
      'baseline.tolerance: Invalid input: expected object, received undefined',
    ],
    [
      'of no module',
      JSON.stringify({ ...someHeader, modules: [] }),
      'modules: Too small: expected array to have >=1 items',
    ],
  ])('that is %s is refused, with its path and what is wrong', (_, text, problem) => {
    const folder = recordWith(text);
    expect(() => readHeader(folder)).toThrow(
      expect.objectContaining({
        code: 'BAD_RECORD',
        exitCode: 65,
        message: `${join(folder, 'run.json')}: ${problem}`,
      }),
    );
  });

  it('takes no number beyond all numbers', () => {
    const text = JSON.stringify(someHeader).replace(/"voltage":[\d.]+/, '"voltage":1e309');
    expect(() => readHeader(recordWith(text))).toThrow(expect.objectContaining({ code: 'BAD_RECORD' }));
  });

  it('is missed in a folder that is no record', () => {
    mkdirSync(place('empty'));
    expect(() => readHeader(place('empty'))).toThrow(
      expect.objectContaining({
        exitCode: 66,
        message: `${place('empty')} is no record: it has no run.json`,
      }),
    );
  });

  it('and a folder that is not there is said not to be there', () => {
    expect(() => readHeader(place('nowhere'))).toThrow(
      expect.objectContaining({
        exitCode: 66,
        message: `${place('nowhere')} is no record: there is no such file or folder`,
        advice: '`railproof runs` lists the records here',
      }),
    );
  });
});
