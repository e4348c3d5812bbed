import type { StagedBuild } from '../../arrangement/staged-build.js';
import { alignTable } from '../align.js';
import type { Style } from '../style.js';
import { brief, briefDigits } from './brief.js';
import { section } from './prose.js';

const rows = 8;
const columns = 6;

/** What the linear stage turns into heat, at a few outputs and currents of all that were worked out. */
export function dissipationText({ map, mostDissipation }: StagedBuild, style: Style): string {
  const outputs = spread(map.outputs.length, rows);
  const currents = spread(map.currents.length, columns);
  if (outputs.length === 0 || currents.length === 0) return '';
  const head = ['V \\ A', ...currents.map((at) => briefDigits(map.currents[at] ?? Number.NaN))];
  const lines = outputs.map((at) => [
    briefDigits(map.outputs[at] ?? Number.NaN),
    ...currents.map((each) => {
      const watts = map.watts[at]?.[each];
      return watts === null || watts === undefined ? '·' : watts.toFixed(1);
    }),
  ]);
  return section(
    'Heat of the linear stage, W',
    alignTable([head, ...lines], ['right', ...currents.map(() => 'right' as const)]),
    style,
    `at most ${brief(mostDissipation, 'power')}; · beyond what is guaranteed`,
  );
}

/** Places spread evenly over a list, both ends included. */
function spread(length: number, most: number): readonly number[] {
  const count = Math.min(length, most);
  if (count < 2) return count === 1 ? [0] : [];
  return Array.from({ length: count }, (_, index) => Math.round((index * (length - 1)) / (count - 1)));
}
