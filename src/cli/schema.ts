import { exitCodes, type ExitCode, RailproofError } from '../errors/railproof-error.js';
import { fileKinds } from '../files/file-kind.js';
import { didYouMean } from '../quantity/nearest.js';
import { fittedTable } from '../report/align.js';
import { jsonText } from '../report/json-text.js';
import {
  isSchemaKind,
  publishedSchema,
  type SchemaKind,
  schemaKinds,
  writtenKinds,
} from './published-schemas.js';
import { show } from './say.js';
import type { Streams } from './streams.js';

/** There is no such kind. */
export class UnknownKindError extends RailproofError {
  readonly code = 'UNKNOWN_KIND';
  readonly exitCode = exitCodes.usage;

  constructor(kind: string) {
    super(`there is no schema called '${kind}'${didYouMean(kind, schemaKinds)}`, {
      advice: `of files there are ${fileKinds.join(', ')}, of what is written ${writtenKinds.join(', ')}; for example: railproof schema bench`,
    });
  }
}

/** `railproof schema`: the JSON Schema of a kind; without one, the kinds there are. */
export function schema(kind: string | undefined, streams: Streams): ExitCode {
  if (kind === undefined) {
    show(streams.stdout, kindsAsText(streams.stdout.columns));
  } else {
    if (!isSchemaKind(kind)) throw new UnknownKindError(kind);
    streams.stdout.write(jsonText(publishedSchema(kind)));
  }
  return exitCodes.conforms;
}

function kindsAsText(columns: number): string {
  return [
    "Files that are read, by the word in their first line ('railproof: bench 1'):",
    ...table(fileKinds, columns),
    '',
    `What is written, by the word in its "format" ("railproof/run 1"):`,
    ...table(writtenKinds, columns),
    '',
  ].join('\n');
}

function table(kinds: readonly SchemaKind[], columns: number): readonly string[] {
  const rows = kinds.map((kind) => [kind, String(publishedSchema(kind)['description'])]);
  return fittedTable(rows, ['left', 'left'], columns);
}
