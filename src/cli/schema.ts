import { exitCodes, type ExitCode, RailproofError } from '../errors/railproof-error.js';
import { fileKinds, type FileKind } from '../files/file-kind.js';
import { jsonSchemaOf } from '../files/json-schema.js';
import { didYouMean } from '../quantity/nearest.js';
import { jsonText } from '../report/json-text.js';
import type { Streams } from './streams.js';
import { vocabulary } from './wiring.js';

/** There is no such kind of file. */
export class UnknownKindError extends RailproofError {
  readonly code = 'UNKNOWN_KIND';
  readonly exitCode = exitCodes.usage;

  constructor(kind: string) {
    super(`there is no kind of file called '${kind}'${didYouMean(kind, fileKinds)}`, {
      advice: `the kinds are ${fileKinds.join(', ')}; for example: railproof schema bench`,
    });
  }
}

/** `railproof schema`: the JSON Schema of a kind of file. */
export function schema(kind: string, streams: Streams): ExitCode {
  if (!isFileKind(kind)) throw new UnknownKindError(kind);
  streams.stdout.write(jsonText(jsonSchemaOf(kind, vocabulary)));
  return exitCodes.conforms;
}

function isFileKind(kind: string): kind is FileKind {
  return (fileKinds as readonly string[]).includes(kind);
}
