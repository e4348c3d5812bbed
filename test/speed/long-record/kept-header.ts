import type * as runHeader from '../../../src/record/run-header.js';
import type { RunHeader } from '../../../src/record/run-header.js';
import { root } from '../../whole/railproof.js';
import { built } from '../built.js';

const { readHeader } = await built<typeof runHeader>('record/run-header.js');

/** The header of a record of the drawer, as its name says; to be changed into that of another. */
export function keptHeader(run: string): RunHeader {
  return readHeader(`${root}fixtures/runs/${run}`).header;
}

/** As steps have it among their settings; in A. */
export function quantity(value: number) {
  return { kind: 'absolute', value } as const;
}

export function shareOfRated(ratio: number) {
  return { kind: 'share', ratio, of: 'rated-current' } as const;
}
