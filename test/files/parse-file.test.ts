import { describe, expect, it } from 'vitest';
import { kindOf, openDocument } from '../../src/files/parse-file.js';
import { parseYaml } from '../../src/files/yaml-document.js';
import { problemsOf } from './problems-of.js';

describe('the first line says what a file is', () => {
  it.each([
    ['module', 'railproof: module 1\nname: K1'],
    ['bench', '# the bench in the corner\nrailproof: bench 1'],
    ['driver', '{ railproof: driver 1 }'],
    ['procedure', '---\nrailproof: "procedure 1"'],
  ])('%s', (kind, text) => {
    expect(kindOf(parseYaml(text, 'a.yaml'))).toBe(kind);
  });

  it.each<[string, string]>([
    ['', "a.yaml:1:1: the file is empty; the first line names the kind of file, as in 'railproof: module 1'"],
    ['name: K1', "a.yaml:1:1: the first line names the kind of file, as in 'railproof: module 1'"],
    ['- railproof', "a.yaml:1:1: the first line names the kind of file, as in 'railproof: module 1'"],
    ['hello', "a.yaml:1:1: the first line names the kind of file, as in 'railproof: module 1'"],
    ['name: K1\nrailproof: module 1', "a.yaml:2:12: railproof: the line with 'railproof' must come first"],
    [
      'railproof: modul 1',
      "a.yaml:1:12: railproof: no kind of file is called 'modul'; did you mean 'module'?",
    ],
    [
      'railproof: invoice 1',
      "a.yaml:1:12: railproof: no kind of file is called 'invoice'; one of module, bench, driver, procedure, tolerance, stages is needed",
    ],
    ['railproof: module', "a.yaml:1:12: railproof: the version is missing; this railproof reads 'module 1'"],
    [
      'railproof: bench 2',
      "a.yaml:1:12: railproof: version 2 of the bench format is not known; this railproof reads 'bench 1'",
    ],
    [
      'railproof: bench 01',
      "a.yaml:1:12: railproof: version 01 of the bench format is not known; this railproof reads 'bench 1'",
    ],
    [
      'railproof: 1',
      "a.yaml:1:12: railproof: found the number 1; the first line names the kind of file, as in 'railproof: module 1'",
    ],
    [
      'railproof:',
      "a.yaml:1:1: railproof: found nothing; the first line names the kind of file, as in 'railproof: module 1'",
    ],
  ])('%j', (text, problem) => {
    expect(problemsOf(() => kindOf(parseYaml(text, 'a.yaml')))).toEqual([problem]);
  });
});

it('a file of another kind is told so, and nothing else about it', () => {
  const text = 'railproof: bench 1\nnonsense: 4';
  expect(problemsOf(() => openDocument('module', text, 'a.yaml'))).toEqual([
    'a.yaml:1:12: railproof: this is a bench file; a module file is needed',
  ]);
});
