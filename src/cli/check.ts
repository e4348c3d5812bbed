import { exitCodes, type ExitCode, RailproofError } from '../errors/railproof-error.js';
import { readAnyFile } from '../files/read-any-file.js';
import { printable } from '../quantity/printable.js';
import type { Streams } from './streams.js';
import { errorText } from './error-text.js';
import { readBenchDrivers, vocabulary } from './wiring.js';

/**
 * `railproof check`: looks at each file and says what is wrong with it, or that it is right. A bench is
 * checked together with its drivers. The exit status is that of the first bad one.
 */
export async function check(files: readonly string[], streams: Streams): Promise<ExitCode> {
  let status: ExitCode = exitCodes.conforms;
  for (const path of files) {
    try {
      const file = await readAnyFile(path, vocabulary);
      const { kind, content } = file.value;
      if (kind === 'bench') await readBenchDrivers({ ...file, value: content });
      streams.stdout.write(`${printable(path)}: a ${kind} file, and right\n`);
    } catch (error) {
      if (!(error instanceof RailproofError)) throw error;
      streams.stderr.write(`${errorText(error)}\n`);
      if (status === exitCodes.conforms) status = error.exitCode;
    }
  }
  return status;
}
