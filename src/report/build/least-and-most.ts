import type { StagedBuild } from '../../arrangement/staged-build.js';
import type { Amperes, Volts } from '../../quantity/quantity.js';
import { roundedDown } from '../../quantity/rounded-down.js';
import { brief } from './brief.js';

interface Fed {
  readonly output: Volts;
  readonly current: Amperes;
  readonly coming: '' | ', coming down';
}

/** The least and the most that a staged supply feeds anywhere, whichever way its output goes; undefined for no output. */
export function leastAndMost({ guaranteed }: StagedBuild): { least: Fed; most: Fed } | undefined {
  const [first, ...others] = guaranteed.flatMap(({ output, rising, falling }): readonly Fed[] => [
    { output, current: rising.current, coming: '' },
    { output, current: falling.current, coming: ', coming down' },
  ]);
  if (first === undefined) return undefined;
  return {
    least: others.reduce((one, other) => (other.current < one.current ? other : one), first),
    most: others.reduce((one, other) => (other.current > one.current ? other : one), first),
  };
}

/** `the least is 1.62 A at 21.4 V, coming down, the most 3.00 A at 4.16 V`. */
export function leastAndMostInWords({ least, most }: { least: Fed; most: Fed }): string {
  const feeds = ({ output, current, coming }: Fed): string =>
    `${roundedDown(current, 'current')} at ${brief(output, 'voltage')}${coming}`;
  return `the least is ${feeds(least)}, the most ${feeds(most)}`;
}
