import * as z from '../libraries/zod.js';
import type { Group } from './bench.js';
import { choice, count, quantity } from './building-blocks.js';
import { camelKeys } from './camel-keys.js';
import { instrumentPlace } from './instrument-place.js';
import type { Simulation } from './simulation-section.js';
import type { Complaint } from './yaml-document.js';

const channel = (description: string) => count(description, { least: 0, most: 9999 });

/** Where a person measures a resistance of milliohms with leads, a tenth is soon gone. */
const ballast = z.strictObject({
  resistance: quantity('resistance', 'Its measured value.', { above: 0 }),
  uncertainty: quantity('resistance', 'How far off that may be (half-width).', { least: 0 }),
});

/** The `group` section of a bench file. */
export const groupSchema: z.ZodType<Group> = camelKeys(
  z.strictObject({
    'measured-by': choice(
      ['scanner', 'meters', 'operator'],
      'What puts a meter across each place: a scanner, a meter of its own, or the operator who moves the one there is.',
    ),
    'output-channel': channel(
      'The channel of the scanner that puts the meter across the output of the whole.',
    ).exactOptional(),
    places: z
      .array(
        z.strictObject({
          ballast: ballast.exactOptional().describe('The resistor in series with the module.'),
          channel: channel(
            "The channel of the scanner that puts the meter across the ballast, or across a stacked module's output.",
          ).exactOptional(),
          meter: instrumentPlace.exactOptional().describe('A meter of its own, across the same.'),
        }),
      )
      .min(2)
      .max(64)
      .describe('In the order of the circuit; the lowest of a stack first.'),
  }),
).describe('How the modules of a group or of a stack are told apart.');

/** What no key alone can tell: whether what measures is there, and whether no channel is used twice. */
export function* groupProblems(bench: {
  readonly group?: Group;
  readonly instruments: Readonly<Record<string, unknown>>;
  readonly simulation?: Pick<Simulation, 'circuit' | 'modules'>;
}): Generator<Complaint> {
  const { group, instruments, simulation } = bench;
  const { scanner, meter } = instruments;
  if (scanner !== undefined && group?.measuredBy !== 'scanner') {
    const message =
      group === undefined
        ? "no 'group' section says what its channels are"
        : `the group is measured by ${group.measuredBy}; with a scanner it is 'measured-by: scanner'`;
    yield { path: ['instruments', 'scanner'], message };
  }
  if (group === undefined) return;
  const by = ['group', 'measured-by'];
  if (group.measuredBy === 'scanner' && scanner === undefined)
    yield { path: by, message: 'there is no scanner among the instruments' };
  if (group.measuredBy !== 'meters' && meter === undefined)
    yield { path: by, message: `${group.measuredBy} needs a meter among the instruments` };
  if (simulation !== undefined) yield* forgottenBallasts(group, simulation);
  const used = new Map<number, string>();
  if (group.outputChannel !== undefined) used.set(group.outputChannel, 'output-channel');
  for (const [index, place] of group.places.entries()) {
    const path = ['group', 'places', index];
    if (group.measuredBy === 'scanner' && place.channel === undefined)
      yield { path, message: "missing 'channel': which one puts the meter across this place?" };
    if (group.measuredBy === 'meters' && place.meter === undefined)
      yield { path, message: "missing 'meter': each place needs one of its own" };
    if (place.channel === undefined) continue;
    if (group.measuredBy !== 'scanner') {
      const message = `only a scanner has channels, and the group is measured by ${group.measuredBy}`;
      yield { path: [...path, 'channel'], message };
    }
    const other = used.get(place.channel);
    if (other !== undefined) {
      yield { path: [...path, 'channel'], message: `channel ${place.channel} is that of ${other} already` };
    }
    used.set(place.channel, `place ${index + 1}`);
  }
}

/** The simulation may have another ballast than the bench knows of, but one that is left out is a slip. */
function* forgottenBallasts(
  { places }: Group,
  { circuit, modules }: Pick<Simulation, 'circuit' | 'modules'>,
): Generator<Complaint> {
  if (circuit !== 'parallel') return;
  for (const [index, { name, ballast }] of modules.entries()) {
    if (places[index]?.ballast === undefined || ballast > 0) continue;
    const message = `place ${index + 1} of the group has a ballast, and 'ballast' of ${name} is missing or none: what is really there?`;
    yield { path: ['simulation', 'modules', index], message };
  }
}
