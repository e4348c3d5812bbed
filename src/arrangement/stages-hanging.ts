import type { Volts } from '../quantity/quantity.js';
import { modulesOf, type Estimate } from './build.js';
import { highestOpen, type LaidOut } from './laid-out.js';
import { noHeight, openVoltageOf, raisedBy } from './height.js';
import type { ModuleProfile } from './module-profile.js';
import type { Rail } from './series-build.js';
import { verdictOn } from './rails.js';
import { type Netlist, netlistOf, settledState, type Switching } from './switching.js';

/** What stands where while the contacts rest in one state, with no load, above in-. */
export interface Standings {
  /** The arrangement; undefined with no contact driven, where no arrangement is made so. */
  readonly arrangement: string | undefined;
  /** Of each module that is tied to in-, whether it feeds anything or not. */
  readonly rails: readonly Rail[];
  /** Those that stand off in- and are no part of the arrangement. */
  readonly hanging: readonly Rail[];
  /** From the lowest to the highest node. */
  readonly span: Volts;
  /** Of in+ at its highest; undefined where nothing lifts it. */
  readonly input: Volts | undefined;
}

interface State {
  readonly arrangement: string | undefined;
  readonly driven: readonly string[];
  /** The modules that feed. */
  readonly part: readonly string[];
}

/** In every arrangement, and with no contact driven. */
export function standingsOf(
  profiles: readonly ModuleProfile[],
  switching: Switching,
  laid: readonly LaidOut[],
): readonly Standings[] {
  const states: readonly State[] = [
    ...laid.map(({ found, driven }) => ({
      arrangement: found.name,
      driven,
      part: modulesOf(found.circuit.form),
    })),
    ...(laid.some(({ driven }) => driven.length === 0)
      ? []
      : [{ arrangement: undefined, driven: [], part: [] }]),
  ];
  return states.map(({ arrangement, driven, part }) => {
    const netlist = netlistOf(switching, settledState(switching.contacts, driven));
    const heights = heightsIn(netlist, profiles);
    const rails = railsIn(netlist, heights, profiles);
    const all = [...heights.values()];
    return {
      arrangement,
      rails,
      hanging: rails.filter(({ module, float }) => float.high > 0 && !part.includes(module)),
      span: Math.max(...all.map(({ high }) => high)) - Math.min(...all.map(({ low }) => low)),
      input: heights.get(netlist.plus)?.high,
    };
  });
}

/**
 * How high each node stands that modules, or diodes that conduct away from what is known, tie to in-. A diode is
 * taken to take nothing, which lifts what is behind it the most.
 */
function heightsIn(netlist: Netlist, profiles: readonly ModuleProfile[]): ReadonlyMap<number, Estimate> {
  const heights = new Map<number, Estimate>([[netlist.minus, noHeight]]);
  const tie = (kind: 'module' | 'diode'): boolean => {
    for (const element of netlist.elements) {
      if (element.kind !== kind) continue;
      const [from, to] = [heights.get(element.from), heights.get(element.to)];
      const own = element.kind === 'module' ? openVoltageOf(element.source.name, profiles) : noHeight;
      if (from !== undefined && to === undefined) {
        heights.set(element.to, raisedBy(from, own));
        return true;
      }
      if (kind === 'module' && to !== undefined && from === undefined) {
        heights.set(element.from, raisedBy(to, mirrored(own)));
        return true;
      }
    }
    return false;
  };
  // What a module fixes goes before what a diode may only lift.
  while (tie('module') || tie('diode'));
  return heights;
}

function mirrored({ value, low, high }: Estimate): Estimate {
  return { value: -value, low: -high, high: -low };
}

function railsIn(
  netlist: Netlist,
  heights: ReadonlyMap<number, Estimate>,
  profiles: readonly ModuleProfile[],
): readonly Rail[] {
  return netlist.elements.flatMap((element): readonly Rail[] => {
    if (element.kind !== 'module') return [];
    const profile = profiles.find(({ name }) => name === element.source.name);
    const [below, above] = [heights.get(element.from), heights.get(element.to)];
    if (profile === undefined || below === undefined || above === undefined) return [];
    // Below in- its insulation bears as much as above it.
    const isBelow = below.value < 0;
    const float = isBelow ? mirrored(below) : below;
    const top = isBelow && float.value > above.value ? float : above;
    const isolation = profile.outputIsolation;
    const verdict = float.high === 0 ? 'not-needed' : verdictOn({ top, isolation });
    return [{ module: profile.name, float, top, isolation, verdict }];
  });
}

/** What in+ stands at with no contact driven, at its highest; 0 where nothing lifts it. */
export function inputAtRest(laid: readonly LaidOut[], standings: readonly Standings[]): Volts {
  const resting = laid.find(({ driven }) => driven.length === 0)?.found.name;
  return Math.max(0, standings.find(({ arrangement }) => arrangement === resting)?.input ?? 0);
}

/** The highest voltage between any two points ahead of the linear stage. */
export function reachOf(laid: readonly LaidOut[], standings: readonly Standings[]): Volts {
  return Math.max(highestOpen(laid), ...standings.map(({ span }) => span));
}
