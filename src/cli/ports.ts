import { exitCodes, type ExitCode } from '../errors/railproof-error.js';
import { listPorts } from '../instrument/ports.js';
import { printable } from '../quantity/printable.js';
import { jsonText } from '../report/json-text.js';
import { fittedTable } from '../report/align.js';
import type { PortsJson } from './schema/ports-schema.js';
import type { Streams } from './streams.js';

/** `railproof ports`: the serial ports of this machine, as a bench file would name them. */
export async function ports({ json }: { readonly json?: boolean }, streams: Streams): Promise<ExitCode> {
  const found = await listPorts();
  if (json === true) {
    streams.stdout.write(jsonText({ format: 'railproof/ports 1', ports: found } satisfies PortsJson));
  } else if (found.length === 0) {
    streams.stdout.write('No serial ports here. Is the adapter plugged in?\n');
  } else {
    const rows = found.map(({ path, description }) => [
      `serial:${printable(path)}?baud=9600`,
      printable(description),
    ]);
    streams.stdout.write(`${fittedTable(rows, ['left', 'left'], streams.stdout.columns, '').join('\n')}\n`);
  }
  return exitCodes.conforms;
}
