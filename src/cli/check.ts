import { dirname } from 'node:path';
import { exitCodes, type ExitCode, RailproofError } from '../errors/railproof-error.js';
import { type AnyFile, readAnyFile, type WordsLoaded } from '../files/read-any-file.js';
import type { FileRead } from '../files/read-text.js';
import { printable } from '../quantity/printable.js';
import { errorText } from './error-text.js';
import { say } from './say.js';
import type { Streams } from './streams.js';

/**
 * `railproof check`: looks at each file and says what is wrong with it, or that it is right. A bench is
 * checked together with its drivers, a driver together with its dialogue, a stages file together with the
 * records that it names. The exit status is that of the first bad one.
 */
export async function check(files: readonly string[], streams: Streams): Promise<ExitCode> {
  let status: ExitCode = exitCodes.conforms;
  for (const path of files) {
    try {
      const file = await readAnyFile(path, words);
      const also = await checkTogether(file);
      say(streams.stdout, `${printable(path)}: a ${file.value.kind} file, and right${also}`, { hang: '  ' });
    } catch (error) {
      if (!(error instanceof RailproofError)) throw error;
      say(streams.stderr, errorText(error));
      if (status === exitCodes.conforms) status = error.exitCode;
    }
  }
  return status;
}

const words: WordsLoaded = {
  vocabulary: async () => (await import('./vocabulary.js')).vocabulary,
  findings: async () => {
    const { findingNames, findingWords } = await import('../analysis/finding-names.js');
    return { findings: findingNames, words: findingWords };
  },
};

/** What a file is checked together with, and a few words about it; what that needs is loaded when it is met. */
async function checkTogether(file: FileRead<AnyFile>): Promise<string> {
  const { kind, content } = file.value;
  if (kind === 'driver') {
    const { checkDialogueOf } = await import('./check-dialogue.js');
    const exchanges = checkDialogueOf({ ...file, value: content });
    return exchanges === 0 ? '' : `; ${counted(exchanges)} of its dialogue too`;
  }
  if (kind === 'stages') {
    const [{ recordsOf }, { besideStages }] = await Promise.all([
      import('./stage-records.js'),
      import('../files/read-stages.js'),
    ]);
    const records = recordsOf(besideStages(content, dirname(file.path)).modules);
    return `; the ${records.length} records of its modules are there too`;
  }
  if (kind === 'bench') {
    const [{ readNamedDrivers }, { driversOfChannels }, { checkDialogueOf }] = await Promise.all([
      import('./bench-drivers.js'),
      import('../files/bench-channels.js'),
      import('./check-dialogue.js'),
    ]);
    const bench = { ...file, value: content };
    const drivers = await readNamedDrivers(bench);
    driversOfChannels(bench, drivers);
    // As its file has it: the bench's is that of one channel, and a dialogue may speak of any.
    for (const driver of new Map(drivers.map(({ file: each }) => [each.path, each])).values())
      checkDialogueOf(driver);
  }
  return '';
}

function counted(exchanges: number): string {
  return exchanges === 1 ? 'the one exchange' : `all ${exchanges} exchanges`;
}
