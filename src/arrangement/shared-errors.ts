import type { Finding } from '../analysis/finding.js';
import type { RunHeader } from '../record/run-header.js';
import type { Contribution } from '../statistics/uncertainty-budget.js';

/** What two numbers have in common that were read with one instrument: how much it shows too much, and by how much it is off. */
const common = /^(\S+) \S+, (?:gain|offset)$/;

/**
 * Whose error a line of a budget is, as a name that is the same in every record in which it is the same error;
 * undefined where it is that record's own. The gain and the offset of an instrument are common to all that it
 * reads (JCGM 100:2008, 5.2.4), so they move the same finding of two modules the same way, and drop out of
 * their difference. The same instrument is one of the same role, identity, driver and address on a bench of the
 * same name.
 *
 * Assumed: that it was not adjusted, nor exchanged for another of the same answer, between the records. Where it
 * was, differences of modules are less certain than they are said to be, and sums more. Own are scatter and
 * resolution, and the leads too, as their joints are made anew each time; so is whatever belongs to a droop
 * that came out below 0, where the sign of an error turns round.
 */
export function sharedError(
  header: RunHeader,
  { name, value }: Pick<Finding, 'name' | 'value'>,
  line: Contribution,
): string | undefined {
  const role = line.kind === 'B' ? common.exec(line.name)?.[1] : undefined;
  const instrument = header.instruments.find((one) => one.role === role);
  if (instrument === undefined || !alikeInSign.has(name) || Number(value) < 0) return undefined;
  const { identity, driver, address } = instrument;
  return JSON.stringify([name, line.name, header.bench.name, identity, driver, address]);
}

/** Findings in which an error of an instrument works the same way, whatever the module. */
const alikeInSign: ReadonlySet<string> = new Set([
  'open-circuit-voltage',
  'droop-resistance',
  'usable-current',
  'dropout-current',
]);
