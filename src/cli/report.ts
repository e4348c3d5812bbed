import { realClock } from '../clock/real-clock.js';
import type { ExitCode } from '../errors/railproof-error.js';
import { printable } from '../quantity/printable.js';
import { runFolderAt } from '../record/run-folder.js';
import { runPage } from '../report/run-page/run-page.js';
import { understand } from '../report/understand.js';
import { statusOfRecord } from './exit-status.js';
import { showFile } from './open-file.js';
import { madeAt } from './made-at.js';
import { checkPage, writePage } from './page-written.js';
import { resumeHint } from './resume-hint.js';
import type { Streams } from './streams.js';

export interface ReportOptions {
  /** Where the page goes; report.html in the folder of the record where nothing is said. */
  readonly to?: string;
  /** Show it when it is written. */
  readonly open?: boolean;
}

/** `railproof report`: the page of a record, worked out again; it ends with the status that `analyse` ends with. */
export async function report(
  run: string,
  { to = runFolderAt(run).report, open = false }: ReportOptions,
  streams: Streams,
): Promise<ExitCode> {
  const result = understand(run);
  checkPage(to, 'report');
  await writePage(to, runPage(result, madeAt(realClock.wall())), 'report');
  streams.stdout.write(`Report: ${printable(to)}\n`);
  streams.stderr.write(resumeHint(run, result));
  if (open) await showFile(to, streams);
  return statusOfRecord(result);
}
