import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { type Ended, railproof } from './railproof.js';

export interface Traced extends Ended {
  /** The folder of the record. */
  readonly record: string;
  readonly trace: string;
}

/** `railproof run … --trace`, its record alone in that folder. */
export async function traced(runs: string, args: readonly string[]): Promise<Traced> {
  const ended = await railproof(['run', ...args, '--runs', runs, '--trace', '--yes']);
  const record = onlyIn(runs);
  return { ...ended, record, trace: join(record, 'trace') };
}

/** The run that a trace is of, played back from what is in its folder alone. */
export async function replayed(
  trace: string,
  runs: string,
  more: readonly string[] = [],
): Promise<Ended & { readonly record: string }> {
  const modules = readdirSync(trace).filter((name) => name.startsWith('module-'));
  const ended = await railproof([
    ...['run', join(trace, 'procedure.yaml'), '--bench', join(trace, 'replay.yaml')],
    ...['--module', ...modules.map((name) => join(trace, name))],
    ...['--runs', runs, ...more],
  ]);
  return { ...ended, record: onlyIn(runs) };
}

export function onlyIn(runs: string): string {
  const [name, ...others] = readdirSync(runs);
  if (name === undefined || others.length > 0) throw new Error(`one record is expected in ${runs}`);
  return join(runs, name);
}

interface Found {
  readonly findings: readonly { readonly name: string; readonly value: unknown }[];
  readonly [what: string]: unknown;
}

/**
 * All that a run shows: findings, decisions and every reading; but for the name and the size of its record,
 * and the addresses. */
export function shownBy(record: string): Found & { readonly readings: string } {
  const found = JSON.parse(readFileSync(join(record, 'findings.json'), 'utf8')) as Found;
  return {
    ...found,
    run: undefined,
    integrity: undefined,
    // It names the address.
    reason: String(found['reason']).replace(/^\S+: /, ''),
    readings: readFileSync(join(record, 'readings.csv'), 'utf8'),
  };
}

/** What happened on a line, without the two that say where it led. */
export function happenings(trace: string, post: string): readonly string[] {
  return readFileSync(join(trace, `${post}.jsonl`), 'utf8')
    .split('\n')
    .filter((line) => !line.includes('"format"') && !line.includes('"opened"'));
}
