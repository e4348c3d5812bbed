import type { Band } from '../../arrangement/build.js';
import type { ParallelBuild } from '../../arrangement/parallel-build.js';
import type { Amperes } from '../../quantity/quantity.js';
import { alignTable } from '../align.js';
import type { Style } from '../style.js';
import { briefDigits, loadInWords } from './brief.js';
import { between, estimateCells, valueAt } from './estimate-text.js';
import { section } from './prose.js';

/** What each module carries at the load, and within which limits it stays at a few others. */
export function sharesText(build: ParallelBuild, style: Style): string {
  return [atLoad(build, style), atOthers(build, style)].filter((part) => part !== '').join('\n\n');
}

function atLoad({ modules, atLoad, load }: ParallelBuild, style: Style): string {
  const rows = modules.map(({ name }, index) => {
    const [current, share] = [atLoad.currents[index], atLoad.shares[index]];
    return [
      name,
      ...(current === undefined ? [] : estimateCells(current, 'current')),
      ...(share === undefined ? [] : estimateCells(share, 'ratio')),
    ];
  });
  const what = load.from === 'asked-for' ? 'the load asked for' : 'what is recommended';
  return section(
    `Shares at ${loadInWords(load)}`,
    alignTable(rows, ['left', 'right', 'left', 'right', 'left']),
    style,
    `${what}; 95 %`,
  );
}

/** A quarter and half of the load, and the most that was worked out. */
function atOthers({ modules, sharing, load }: ParallelBuild, style: Style): string {
  const most = sharing.loads.at(-1);
  const least = sharing.loads[0];
  if (most === undefined || least === undefined) return '';
  const places = [0.25, 0.5]
    .map((share) => share * load.current)
    .filter((place) => place >= least && place <= most);
  const loads: readonly Amperes[] = [...places, most];
  const row = (name: string, band: Band | undefined): string[] => [
    name,
    ...loads.map((place) =>
      band === undefined
        ? ''
        : between(valueAt(sharing.loads, band.low, place), valueAt(sharing.loads, band.high, place)),
    ),
  ];
  const rows = [
    ['load, A', ...loads.map(briefDigits)],
    ...modules.map(({ name }, index) => row(`${name}, A`, sharing.currents[index])),
    row('voltage, V', sharing.busVoltage),
  ];
  return section(
    'Shares at other loads',
    alignTable(rows, ['left', ...loads.map(() => 'right' as const)]),
    style,
    '95 % limits; the last is all that the group holds',
  );
}
