import { expect, it } from 'vitest';
import { BadFileError, MissingFileError } from '../../src/files/file-error.js';

const problem = (line: number, column: number, path: string, message: string) => ({
  file: 'real-limit.yaml',
  line,
  column,
  path,
  message,
});

it('one problem is one line', () => {
  const error = new BadFileError([
    problem(7, 5, 'steps.1', "no step is called 'dropout-serch'; did you mean 'dropout-search'?"),
  ]);
  expect(error.message).toBe(
    "real-limit.yaml:7:5: steps.1: no step is called 'dropout-serch'; did you mean 'dropout-search'?",
  );
  expect(error).toMatchObject({ name: 'BadFileError', code: 'BAD_FILE', exitCode: 65 });
});

it('several problems are told in the order of the file', () => {
  const error = new BadFileError([
    problem(9, 1, 'b', 'second'),
    problem(2, 7, '', 'first'),
    problem(9, 8, 'c', 'third'),
  ]);
  expect(error.message.split('\n')).toEqual([
    'real-limit.yaml:2:7: first',
    'real-limit.yaml:9:1: b: second',
    'real-limit.yaml:9:8: c: third',
  ]);
});

it('a missing file is called by its path', () => {
  const error = new MissingFileError('benches/corner.yaml', 'there is no such file');
  expect(error.message).toBe('benches/corner.yaml: there is no such file');
  expect(error).toMatchObject({ code: 'MISSING_FILE', exitCode: 66, path: 'benches/corner.yaml' });
});
