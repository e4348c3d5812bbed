import { listed } from '../quantity/listed.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { Volts } from '../quantity/quantity.js';
import type { ForbiddenConnection } from './staged-build.js';
import { contactsBetween, type Element, type Netlist, type Switching, terminalsOf } from './switching.js';

/**
 * By how much two outputs that are meant to be alike may differ, as a share of the label's voltage. Common
 * practice, no published source: a supply is set to within a few per cent of its label.
 */
export const usualMismatch = 0.05;

/** An element gone through, the way it drives or passes a current (1) or against it (−1). */
interface Arc {
  readonly element: Element;
  readonly from: number;
  readonly to: number;
  /** Volts that drive a current along, less what may be a mere mismatch. */
  readonly gain: Volts;
  readonly sense: 1 | -1;
}

type Loop = readonly Arc[];

/**
 * The closed loop that drives a current round through outputs that are not meant for it, the worst where there
 * are several; undefined where there is none.
 *
 * Around a loop the voltages of the modules that push one way, less those that are pushed against, must find
 * something to fall across. A diode bears any voltage against it and its own forward voltage along; a module
 * bears none, in either sense, as its output must neither be pulled below its voltage without a load nor be
 * driven above it. Hence voltages at the nodes can be found at which nothing flows just when no loop gains:
 * potentials with v_plus − v_minus = V for each module and v_anode − v_cathode ≤ V_forward for each diode exist
 * if and only if no cycle of these differences has a positive sum (Farkas' lemma; found as Bellman and Ford do).
 *
 * Each module of a loop may be off by half of what two outputs that are meant to be alike may differ.
 */
export function forbiddenIn(switching: Switching, netlist: Netlist): ForbiddenConnection | undefined {
  const arcs = arcsOf(netlist);
  const gaining = gainingLoop(arcs, netlist.nodes);
  return gaining === undefined ? undefined : told(worstLoop(arcs, gaining), switching, netlist);
}

/** Whether there is any such loop. */
export function isForbidden(netlist: Netlist): boolean {
  return gainingLoop(arcsOf(netlist), netlist.nodes) !== undefined;
}

/** What a current round the circuit could go through, and what each adds to drive it. */
export function arcsOf({ elements }: Netlist): readonly Arc[] {
  return elements.flatMap((element): Arc[] => {
    const { from, to } = element;
    if (element.kind !== 'module') {
      return [{ element, from, to, gain: element.kind === 'diode' ? -element.forward : 0, sense: 1 }];
    }
    const { open, label } = element.source;
    const mayBeOff = (usualMismatch * label) / 2;
    return [
      { element, from, to, gain: open - mayBeOff, sense: 1 },
      { element, from: to, to: from, gain: -open - mayBeOff, sense: -1 },
    ];
  });
}

/** Sums of volts that are 0 but for arithmetic gain nothing. */
const arithmetic = 1e-9;

function gainingLoop(arcs: readonly Arc[], nodes: number): Loop | undefined {
  const best = new Array<number>(nodes).fill(0);
  const last = new Array<Arc | undefined>(nodes).fill(undefined);
  let raised: number | undefined;
  for (let round = 0; round <= nodes; round += 1) {
    raised = undefined;
    for (const arc of arcs) {
      const sum = (best[arc.from] ?? 0) + arc.gain;
      if (sum <= (best[arc.to] ?? 0) + arithmetic) continue;
      best[arc.to] = sum;
      last[arc.to] = arc;
      raised = arc.to;
    }
    if (raised === undefined) return undefined;
  }
  return loopBehind(raised ?? 0, last, nodes);
}

/** What was still raised in the last round has a loop behind it. */
function loopBehind(node: number, last: readonly (Arc | undefined)[], nodes: number): Loop {
  let at = node;
  for (let step = 0; step < nodes; step += 1) at = last[at]?.from ?? at;
  const loop: Arc[] = [];
  let back = at;
  do {
    const arc = last[back];
    if (arc === undefined) break;
    loop.unshift(arc);
    back = arc.from;
  } while (back !== at);
  return loop;
}

/** A circuit that people wire has some ten loops; of one with millions the worst of so many is told. */
const mostSteps = 20_000;

/** The simple loop that gains most. */
function worstLoop(arcs: readonly Arc[], gaining: Loop): Loop {
  let worst = gaining;
  // Of several that gain the same the first in the order of the modules is told.
  let most = gainOf(gaining) - 2 * arithmetic;
  let steps = 0;
  const walk = (start: number, at: number, gain: number, way: readonly Arc[]): void => {
    for (const arc of arcs) {
      if (arc.from !== at || arc.to < start || way.some(({ element }) => element === arc.element)) continue;
      steps += 1;
      if (steps > mostSteps) return;
      const sum = gain + arc.gain;
      if (arc.to === start) {
        if (sum > most + arithmetic) [worst, most] = [[...way, arc], sum];
      } else if (!way.some(({ to }) => to === arc.to)) {
        walk(start, arc.to, sum, [...way, arc]);
      }
    }
  };
  for (const start of new Set(arcs.map(({ from }) => from))) walk(start, start, 0, []);
  return worst;
}

function gainOf(loop: Loop): Volts {
  return loop.reduce((sum, { gain }) => sum + gain, 0);
}

function told(loop: Loop, switching: Switching, { joints }: Netlist): ForbiddenConnection {
  const through = contactsOf(loop, switching, joints);
  const pushing = modulesThat(fromTheLowest(loop), 1);
  const pushed = modulesThat(fromTheLowest(loop), -1).toReversed();
  const volts = loop.reduce((sum, arc) => sum + voltsOf(arc), 0);
  const reversesStage = loop.some(({ element }) => element.kind === 'linear-stage');
  const modules = [...pushing, ...pushed];
  const by = through.length === 0 ? 'through what is wired for good' : `through ${listed(through)}`;
  const size = formatQuantity(volts, 'voltage', { significant: 3 });
  const shared = { modules, volts, through };
  if (reversesStage) {
    return {
      ...shared,
      kind: 'reversed',
      sentence: `${listed(modules)} would feed the linear stage backwards, with ${size}, ${by}`,
    };
  }
  if (pushed.length > 0) {
    return {
      ...shared,
      kind: 'unequal',
      sentence: `${joined(pushing)} would be side by side with ${joined(pushed)}, ${size} apart, ${by}`,
    };
  }
  return modules.length === 1
    ? { ...shared, kind: 'short', sentence: `the output of ${listed(modules)} would be shorted, ${by}` }
    : {
        ...shared,
        kind: 'reversed',
        sentence: `${listed(modules)} would drive a current round against each other, with ${size}, ${by}`,
      };
}

/** The loop from the first module on that pushes after one that is pushed. */
function fromTheLowest(loop: Loop): Loop {
  const modules = loop.filter(({ element }) => element.kind === 'module');
  const first = modules.findIndex(({ sense }, index) => sense === 1 && modules.at(index - 1)?.sense === -1);
  return first < 0 ? modules : [...modules.slice(first), ...modules.slice(0, first)];
}

function joined(modules: readonly string[]): string {
  return modules.length === 1 ? (modules[0] ?? '') : `the stack of ${listed(modules)}`;
}

function modulesThat(loop: Loop, sense: 1 | -1): readonly string[] {
  return loop.flatMap(({ element, sense: its }) =>
    element.kind === 'module' && its === sense ? [element.source.name] : [],
  );
}

function voltsOf({ element, sense }: Arc): Volts {
  if (element.kind === 'module') return sense * element.source.open;
  return element.kind === 'diode' ? -element.forward : 0;
}

/** The contacts that join the end of each element of the loop to the beginning of the next one. */
function contactsOf(loop: Loop, switching: Switching, joints: Netlist['joints']): readonly string[] {
  const ends = loop.map(({ element, sense }) => {
    const [from, to] = terminalsOf(element, switching);
    return sense === 1 ? ([from, to] as const) : ([to, from] as const);
  });
  const found = ends.flatMap(([, end], index) => {
    const [begin] = ends[(index + 1) % ends.length] ?? [end];
    return contactsBetween(joints, end, begin);
  });
  return [...new Set(found)].sort();
}
