import { realClock } from '../clock/real-clock.js';
import type { ExitCode } from '../errors/railproof-error.js';
import { printable } from '../quantity/printable.js';
import { type AnyBuild, outcomeOf } from '../report/build/any-build.js';
import { buildAsJson } from '../report/build/build-json.js';
import { buildAsText } from '../report/build/build-text.js';
import { jsonText } from '../report/json-text.js';
import { styleFor } from '../report/style.js';
import { statusOfBuild } from './exit-status.js';
import { madeAt } from './made-at.js';
import { show } from './say.js';
import type { Streams } from './streams.js';

/** How the answer of `combine`, `stages` and `select` is wanted. */
export interface ShownAs {
  /** Where the build sheet goes. */
  readonly sheet?: string;
  readonly json?: boolean;
}

/** Looks where the sheet is to go. @throws FileNotKeptError */
export async function checkShown({ sheet }: ShownAs): Promise<void> {
  if (sheet === undefined) return;
  const { checkPage } = await import('./page-written.js');
  checkPage(sheet, 'build sheet');
}

/** Says what was worked out, and keeps its sheet; the exit status says whether it may be built. */
export async function showBuild(build: AnyBuild, wanted: ShownAs, streams: Streams): Promise<ExitCode> {
  const { stdout, environment } = streams;
  if (wanted.json === true) stdout.write(jsonText(buildAsJson(build)));
  else show(stdout, buildAsText(build, styleFor(stdout, environment)));
  if (wanted.sheet !== undefined) {
    const [{ buildPage }, { writePage }] = await Promise.all([
      import('../report/page/build-page.js'),
      import('./page-written.js'),
    ]);
    await writePage(wanted.sheet, buildPage(build, madeAt(realClock.wall())), 'build sheet');
    streams.stderr.write(`Build sheet: ${printable(wanted.sheet)}\n`);
  }
  return statusOfBuild(outcomeOf(build));
}
