import { railVoltages } from '../circuit/rail-voltages.js';
import type { Volts } from '../quantity/quantity.js';
import type { Concern, Estimate, Form, Standing } from './build.js';
import { noHeight, openVoltageOf, raisedBy } from './height.js';
import { hasStack, type LaidOut } from './laid-out.js';
import type { ModuleProfile } from './module-profile.js';
import { verdictOn } from './rails.js';
import type { Rail } from './series-build.js';
import { seriesStanding } from './series-standing.js';
import type { Standings } from './stages-hanging.js';

/**
 * What the rules for a string say of the modules that are ever stacked, each at the highest place that any
 * arrangement gives it, or the contacts at rest, be it that it feeds nothing there. Those that lie at the 0 V of
 * the supply are each a lowest one.
 */
export function stackStanding(
  profiles: readonly ModuleProfile[],
  laid: readonly LaidOut[],
  standings: readonly Standings[],
): { readonly standings: readonly Standing[]; readonly concerns: readonly Concern[] } {
  const rails = highestRails(profiles, laid, standings);
  const placed = rails.flatMap((rail) => {
    const profile = profiles.find(({ name }) => name === rail.module);
    return profile === undefined ? [] : [{ profile, rail }];
  });
  const [lowest, ...others] = placed.filter(({ rail }) => rail.float.high === 0);
  const above = placed.filter(({ rail }) => rail.float.high > 0);
  const strings = [lowest === undefined ? above : [lowest, ...above], ...others.map((each) => [each])];
  const judged = strings.map((string) =>
    seriesStanding(
      string.map(({ profile }) => profile),
      { rails: string.map(({ rail }) => rail), recommended: 0, load: 0 },
    ),
  );
  return {
    standings: judged.map(({ standing }) => standing),
    concerns: judged.flatMap(({ concerns }) => concerns),
  };
}

/** Of each module that is ever stacked, where it stands highest; the lowest first. */
function highestRails(
  profiles: readonly ModuleProfile[],
  laid: readonly LaidOut[],
  standings: readonly Standings[],
): readonly Rail[] {
  const stacked = laid.flatMap(({ found: { circuit } }) =>
    hasStack(circuit.form) ? railsIn(circuit.form, noHeight, profiles) : [],
  );
  const hung = standings.flatMap(({ rails, hanging }) => (hanging.length > 0 ? rails : []));
  const highest = new Map<string, Rail>();
  for (const rail of [...stacked, ...hung]) {
    const before = highest.get(rail.module);
    if (rail.top.high > (before?.top.high ?? 0)) highest.set(rail.module, rail);
  }
  return [...highest.values()].sort((one, other) => one.float.value - other.float.value);
}

/** With no load, ballasts take nothing. */
function railsIn(form: Form, below: Estimate, profiles: readonly ModuleProfile[]): readonly Rail[] {
  if (form.kind === 'module') return railOf(form.name, below, profiles);
  if (form.kind === 'group') return form.of.flatMap((part) => railsIn(part, below, profiles));
  const heights = form.of.map((part) => heightOf(part, profiles));
  const end = (which: 'value' | 'low' | 'high'): readonly Volts[] =>
    railVoltages(heights.map((height) => height[which]));
  const [values, lows, highs] = [end('value'), end('low'), end('high')];
  return form.of.flatMap((part, index) =>
    railsIn(
      part,
      raisedBy(below, { value: values[index] ?? 0, low: lows[index] ?? 0, high: highs[index] ?? 0 }),
      profiles,
    ),
  );
}

function railOf(module: string, float: Estimate, profiles: readonly ModuleProfile[]): readonly Rail[] {
  const profile = profiles.find(({ name }) => name === module);
  if (profile === undefined) return [];
  const own = openVoltageOf(module, profiles);
  const top = raisedBy(float, own);
  const isolation = profile.outputIsolation;
  const verdict = float.high === 0 ? 'not-needed' : verdictOn({ top, isolation });
  return [{ module, float, top, isolation, verdict }];
}

/** With no load a group stands where its highest does. */
function heightOf(form: Form, profiles: readonly ModuleProfile[]): Estimate {
  if (form.kind === 'module') return openVoltageOf(form.name, profiles);
  const join = (which: 'value' | 'low' | 'high'): Volts => {
    const heights = form.of.map((part) => heightOf(part, profiles)[which]);
    return form.kind === 'group' ? Math.max(...heights) : heights.reduce((sum, each) => sum + each, 0);
  };
  return { value: join('value'), low: join('low'), high: join('high') };
}
