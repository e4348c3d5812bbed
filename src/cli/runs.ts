import { existsSync } from 'node:fs';
import { join } from 'node:path';
import * as z from '../libraries/zod.js';
import { exitCodes, type ExitCode } from '../errors/railproof-error.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import { printable } from '../quantity/printable.js';
import { readWhole } from '../record/read-whole.js';
import { runFolderAt } from '../record/run-folder.js';
import { jsonText } from '../report/json-text.js';
import { fittedTable } from '../report/align.js';
import { recordNames } from './record-names.js';
import { show } from './say.js';
import type { RunsJson } from './schema/runs-schema.js';
import type { Streams } from './streams.js';

/** `railproof runs`: the records of a folder, oldest first, a line each. */
export async function runs(
  wanted: { readonly folder: string; readonly json?: boolean; readonly csv?: boolean },
  streams: Streams,
): Promise<ExitCode> {
  const names = recordNames(wanted.folder);
  if (wanted.csv === true) {
    const { runsAsCsv } = await import('./runs-csv.js');
    streams.stdout.write(runsAsCsv(wanted.folder, names));
    return exitCodes.conforms;
  }
  const rows: string[][] = [];
  const listed: RunsJson['runs'][number][] = [];
  for (const name of names) {
    const entry = entryOf(join(wanted.folder, name));
    const { ended, outcome, recommended, resumedFrom } = entry;
    rows.push([
      printable(name),
      printable(ended),
      printable(outcome),
      recommended === null ? '' : formatQuantity(recommended, 'current', { significant: 3 }),
      resumedFrom === null ? '' : `goes on with ${printable(resumedFrom)}`,
    ]);
    listed.push({ run: name, ...entry });
  }
  if (wanted.json === true) {
    streams.stdout.write(jsonText({ format: 'railproof/runs 1', runs: listed } satisfies RunsJson));
  } else if (rows.length === 0) {
    show(streams.stdout, noRecords(wanted.folder));
  } else {
    const head = ['record', 'ended', 'outcome', 'recommended', ''];
    const sides = ['left', 'left', 'left', 'right', 'left'] as const;
    const lines = fittedTable([head, ...rows], sides, streams.stdout.columns, '');
    show(streams.stdout, `${lines.join('\n')}\n`);
  }
  return exitCodes.conforms;
}

function noRecords(folder: string): string {
  if (!existsSync(join(folder, 'run.json'))) return `No records in ${printable(folder)}.\n`;
  return `${printable(folder)} is one record itself; railproof analyse shows what it holds.\n`;
}

interface Entry {
  readonly ended: string;
  readonly outcome: string;
  /** In amperes; null where there is none. */
  readonly recommended: number | null;
  /** The earlier record whose first steps it took over; null where it began afresh. */
  readonly resumedFrom: string | null;
}

const summary = z.object({
  ended: z.string(),
  outcome: z.string(),
  takenOver: z.array(z.object({ run: z.string() })).optional(),
  findings: z.array(z.object({ name: z.string(), value: z.union([z.number(), z.string()]) })),
});

/**
 * From findings.json, which is small however long the run was; a record without one was cut off, and
 * `railproof analyse` tells more. A record that can't be read is still listed: someone may look for it.
 */
function entryOf(path: string): Entry {
  let text: string;
  try {
    text = readWhole(runFolderAt(path).findings);
  } catch (error) {
    const missing = (error as NodeJS.ErrnoException).code === 'ENOENT';
    return { ended: missing ? 'cut-off' : 'unreadable', outcome: '', recommended: null, resumedFrom: null };
  }
  const parsed = summary.safeParse(parseJson(text));
  if (!parsed.success) return { ended: 'unreadable', outcome: '', recommended: null, resumedFrom: null };
  const { ended, outcome, findings, takenOver } = parsed.data;
  const recommended = findings.find((finding) => finding.name === 'recommended-current')?.value;
  return {
    ended,
    outcome,
    recommended: typeof recommended === 'number' ? recommended : null,
    resumedFrom: takenOver?.at(-1)?.run ?? null,
  };
}

function parseJson(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return undefined;
  }
}
