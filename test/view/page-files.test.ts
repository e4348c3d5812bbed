import { createRequire } from 'node:module';
import { dirname, posix } from 'node:path';
import { expect, it } from 'vitest';
import { readPageFiles } from '../../src/view/page-files.js';
import { LiveViewError } from '../../src/view/view-error.js';
import { root } from '../whole/railproof.js';

const uplot = dirname(createRequire(import.meta.url).resolve('uplot'));
const files = readPageFiles(`${root}dist/`, uplot);

it('whatever the page and its scripts ask for is served, each by its type', () => {
  const wanted = Array.from(files).flatMap(([path, { body }]) => {
    const asked = /\bfrom '(\.[^']+|\/[^']+)'|\b(?:src|href)="([^"#]+)"/g;
    return Array.from(body.toString().matchAll(asked), ([, module, file]) =>
      posix.resolve(posix.dirname(path), module ?? file ?? ''),
    );
  });
  expect(wanted).toEqual(
    expect.arrayContaining(['/look.css', '/page/main.js', '/view-state.js', '/uplot.js', '/uplot.css']),
  );
  expect(wanted.filter((path) => !files.has(path))).toEqual([]);
  for (const [path, { type }] of files) {
    const ending = posix.extname(path);
    const types = { '': 'text/html', '.js': 'text/javascript', '.css': 'text/css', '.svg': 'image/svg+xml' };
    expect(type, path).toBe(`${types[ending as keyof typeof types]}; charset=utf-8`);
  }
});

it('nothing of it comes from elsewhere', () => {
  for (const [path, { body }] of files) {
    const elsewhere = body
      .toString()
      .match(/(?:from ["']|src=["']|href=["']|url\(|@import )["']?(?:https?:|\/\/)\S*/);
    expect(elsewhere, path).toBeNull();
  }
});

it('a program that was not installed whole says so before anything is begun', () => {
  expect(() => readPageFiles('/there/is/none', uplot)).toThrow(LiveViewError);
  expect(() => readPageFiles(`${root}dist/`, '/there/is/none')).toThrow(/can't be served: ENOENT/);
});
