import type { RunHeader } from '../record/run-header.js';
import { allowedInAir } from './ambient-line.js';
import { type Soaked } from './derating.js';
import type { Factor } from './finding.js';
import { degrees, givenPercent } from './in-words.js';

/** The procedure's margin, and what it must stand for: whatever nothing else of the derating covers. */
export function marginFactor({ derating }: RunHeader, soaked: Soaked | undefined): Factor {
  const open = [
    ...(derating.ambient === undefined ? ['warmer days'] : []),
    ...(soaked === undefined ? ['warming that no soak measured'] : []),
  ];
  const [first, second] = open;
  const others =
    first === undefined ? '' : second === undefined ? ` and ${first}` : `, ${first}, and ${second}`;
  return {
    name: 'margin',
    factor: derating.margin,
    reason: `asked for by the procedure: ageing${others}`,
  };
}

/** What the procedure's line leaves of the load in the air that it expects. */
export function ambientFactor({ derating, modules }: RunHeader): Factor {
  const name = 'ambient';
  const line = derating.ambient;
  if (line === undefined) return { name, factor: 1, reason: withoutLine(modules) };
  const factor = allowedInAir(line.expected, line);
  const [expected, fullTo, at] = [degrees(line.expected), degrees(line.fullTo), degrees(line.at)];
  if (factor === 1) return { name, factor, reason: `${expected} expected, full load up to ${fullTo}` };
  const falling = `full load up to ${fullTo}, falling to ${givenPercent(line.fallingTo)} at ${at}`;
  return line.expected > line.at
    ? { name, factor, reason: `${expected} expected: ${falling}, and nothing beyond` }
    : { name, factor, reason: `${expected} expected: ${falling}` };
}

function withoutLine(modules: RunHeader['modules']): string {
  const rated = modules.flatMap(({ rated }) => (rated.ambient === undefined ? [] : [rated.ambient]));
  const label = rated.length === 0 ? '' : `; the nameplate allows them up to ${degrees(Math.min(...rated))}`;
  return `no derating over temperature was given; it holds for the surroundings of the test${label}`;
}
