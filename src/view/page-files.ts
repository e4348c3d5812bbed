import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { look } from './look.js';
import { mark, sharedModules, shell } from './shell.js';
import { LiveViewError } from './view-error.js';

export interface PageFile {
  readonly type: string;
  readonly body: Buffer;
}

/** By the path under which each is asked for. */
export type PageFiles = ReadonlyMap<string, PageFile>;

const html = 'text/html; charset=utf-8';
const script = 'text/javascript; charset=utf-8';
const style = 'text/css; charset=utf-8';
const picture = 'image/svg+xml; charset=utf-8';

/**
 * All that the page is made of, read once: whatever is asked for later, no file is looked for.
 * @param built the folder of what was built.
 * @param uplot the folder of the drawing of curves, as its package has it.
 * @throws LiveViewError
 */
export function readPageFiles(built: string, uplot: string): PageFiles {
  try {
    const modules = readdirSync(join(built, 'view/page')).filter((name) => name.endsWith('.js'));
    const read = (path: string, type: string): PageFile => ({ type, body: readFileSync(path) });
    return new Map([
      ['/', { type: html, body: Buffer.from(shell) }],
      ['/look.css', { type: style, body: Buffer.from(look) }],
      ['/mark.svg', { type: picture, body: Buffer.from(mark) }],
      ['/view-state.js', read(join(built, 'view/view-state.js'), script)],
      ...modules.map((name) => [`/page/${name}`, read(join(built, 'view/page', name), script)] as const),
      ...sharedModules.map((name) => [`/${name}`, read(join(built, name), script)] as const),
      ['/uplot.js', read(join(uplot, 'uPlot.esm.js'), script)],
      ['/uplot.css', read(join(uplot, 'uPlot.min.css'), style)],
    ]);
  } catch (error) {
    throw new LiveViewError(error);
  }
}
