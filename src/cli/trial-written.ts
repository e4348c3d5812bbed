import { existsSync } from 'node:fs';
import { writeFile } from 'node:fs/promises';
import { basename } from 'node:path';
import { fileReason } from '../errors/file-reason.js';
import { exitCodes, RailproofError } from '../errors/railproof-error.js';
import { adaptedDriver, type Adaptation } from '../files/adapted-driver.js';
import type { Driver } from '../files/driver.js';
import { namePattern } from '../files/name-pattern.js';
import type { FileRead } from '../files/read-text.js';
import { dialogueHeader, dialogueLine, type TraceEntry } from '../instrument/dialogue-record.js';
import type { Trial } from '../instrument/trial.js';
import { printable } from '../quantity/printable.js';

/** What was to be kept of a trial cannot be. */
export class TrialNotKeptError extends RailproofError {
  readonly code = 'TRIAL_NOT_KEPT';
  readonly exitCode;
  readonly path: string;

  constructor(path: string, reason: 'bad-name' | 'exists' | 'unwritable', cause?: unknown) {
    const words = {
      'bad-name': 'this is no name for a driver: 1 to 64 letters, digits, ".", "_" or "-"',
      exists: 'this file is there already, and is not written over',
      unwritable: `it cannot be written: ${fileReason(cause)}`,
    };
    const advice =
      reason === 'unwritable'
        ? 'make room there, or name a place where it may be written: --write elsewhere/my-load'
        : 'give another name: --write my-load';
    super(`${path}: ${words[reason]}`, { cause, advice });
    this.exitCode = reason === 'unwritable' ? exitCodes.inputOutput : exitCodes.usage;
    this.path = path;
  }
}

/** Where what comes of a trial is kept: a driver file and a recorded dialogue, side by side. */
export interface TrialFiles {
  readonly name: string;
  readonly driver: string;
  readonly dialogue: string;
}

/**
 * Where it goes; looked at before anything is tried, so that nothing is tried in vain.
 * @throws TrialNotKeptError when one of the two is there already
 */
export function trialFiles(given: string): TrialFiles {
  const base = given.replace(/\.(ya?ml|jsonl)$/i, '');
  const name = basename(base);
  if (!namePattern.test(name)) throw new TrialNotKeptError(given, 'bad-name');
  const files = { name, driver: `${base}.yaml`, dialogue: `${base}.jsonl` };
  for (const path of [files.driver, files.dialogue]) {
    if (existsSync(path)) throw new TrialNotKeptError(path, 'exists');
  }
  return files;
}

/** The recorded dialogue, of a trial that was broken off too. @throws TrialNotKeptError */
export function writeDialogue(
  { dialogue }: TrialFiles,
  address: string,
  entries: readonly TraceEntry[],
): Promise<void> {
  return write(dialogue, [dialogueHeader(address), ...entries.map(dialogueLine)].join(''));
}

/** The driver's own text with what the trial has shown. @throws TrialNotKeptError */
export function writeAdapted(
  files: TrialFiles,
  { text, value }: FileRead<Driver>,
  { address, trial }: { readonly address: string; readonly trial: Trial },
): Promise<void> {
  const dialogue = trial.results.flatMap(({ exchanges }) => exchanges);
  const remark = `What the instrument at ${printable(address)} was sent and answered in a trial.`;
  return write(
    files.driver,
    adaptedDriver(text, { ...changes(value, trial), name: files.name, dialogue, remark }),
  );
}

function changes(
  { wire, settling }: Driver,
  { meeting, proposal }: Trial,
): Pick<Adaptation, 'wire' | 'settling' | 'rests'> {
  const { sendEnd, replyEnd, echo = false, prompt } = meeting.wire;
  return {
    wire: {
      ...(sendEnd !== wire.sendEnd && { sendEnd }),
      ...(replyEnd !== wire.replyEnd && { replyEnd }),
      ...(echo !== (wire.echo ?? false) && { echo }),
      ...(prompt !== undefined && prompt !== wire.prompt && { prompt }),
      ...(proposal && proposal.gap !== wire.gap && { gap: proposal.gap }),
      ...(proposal && proposal.timeout !== wire.timeout && { timeout: proposal.timeout }),
    },
    rests: proposal?.rests ?? {},
    ...(proposal && proposal.settling !== settling && { settling: proposal.settling }),
  };
}

async function write(path: string, text: string): Promise<void> {
  await writeFile(path, text, { flag: 'wx' }).catch((error: unknown) => {
    const exists = (error as NodeJS.ErrnoException).code === 'EEXIST';
    throw new TrialNotKeptError(path, exists ? 'exists' : 'unwritable', error);
  });
}
