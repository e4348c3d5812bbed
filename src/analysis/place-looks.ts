import type { Amperes } from '../quantity/quantity.js';
import type { PointOutcome } from '../record/journal-event.js';
import type { RunHeader } from '../record/run-header.js';
import type { RunningMoments } from '../statistics/running-moments.js';
import type { Evidence, PointEvidence, StepEvidence } from './evidence.js';

/**
 * What a look at the places of a circuit is for: `together` with every module plugged in before anything
 * else, `without` one of them, `climb` a point of the step itself, `after` what did not hold was taken away.
 */
export type LookKind = 'together' | 'without' | 'climb' | 'after';

/** All that was read of the places at one set-point, be it at once or pass by pass. */
export interface PlaceLook {
  readonly step: number;
  readonly kind: LookKind;
  /** The module that was unplugged. */
  readonly without: string | undefined;
  /** Undefined with the load's input off. */
  readonly set: Amperes | undefined;
  /** Which time this set-point was looked at, from 0: more than once where it was held. */
  readonly time: number;
  /** Dropped as soon as one pass saw it dropped. */
  readonly outcome: PointOutcome;
  /** By module, those that could be read. */
  readonly places: ReadonlyMap<string, PlaceRead>;
  /** One, or one for each pass. */
  readonly points: readonly PointEvidence[];
}

/** The voltage at a module's place, and the point at which it was read. */
export interface PlaceRead {
  readonly volts: RunningMoments;
  readonly point: PointEvidence;
}

/**
 * The looks of a step, in the order in which each was first taken. Where an operator moves the one meter
 * there is, the load goes through the same set-points once for each place; these passes are joined by
 * set-point here. Points that were broken off are left out.
 */
export function placeLooks({ circuit, modules }: RunHeader, step: StepEvidence): readonly PlaceLook[] {
  const across = circuit === 'parallel' ? 'ballast' : 'output';
  const taps = modules.map(({ name }) => ({ name, at: `${across}-of-${name}` }));
  const joined = new Map<string, Omit<PlaceLook, 'places'> & { readonly places: Map<string, PlaceRead> }>();
  for (const { point, kind, without, time } of rolesIn(step.points)) {
    if (point.outcome === undefined) continue;
    const set = point.set.current;
    const key = `${kind} ${without ?? ''} ${set ?? 'off'} ${time}`;
    const known = joined.get(key);
    const places = known?.places ?? new Map<string, PlaceRead>();
    for (const { name, at } of taps) {
      const volts = point.taps.get(at);
      if (volts !== undefined && volts.count > 0) places.set(name, { volts, point });
    }
    joined.set(key, {
      step: step.step,
      kind,
      without,
      set,
      time,
      outcome: known?.outcome === 'dropped' ? 'dropped' : point.outcome,
      places,
      points: [...(known?.points ?? []), point],
    });
  }
  return [...joined.values()];
}

/**
 * A step without the last point that it finished, where the run was ended in it against its plan: whatever
 * ended it may have begun there already. A proof that nothing came after proves nothing.
 */
export function believedStep({ ended, steps }: Evidence, step: StepEvidence): StepEvidence {
  if (ended === undefined || ended.how === 'completed' || step !== steps.at(-1)) return step;
  const last = step.points.findLastIndex(({ outcome }) => outcome !== undefined);
  const points = step.points.slice(0, Math.max(0, last));
  return {
    ...step,
    points: points.some(({ phase }) => phase === 'share' || phase === 'stack') ? points : [],
  };
}

/** Whether every place of the circuit was read. */
export function isComplete({ places }: Pick<PlaceLook, 'places'>, { modules }: RunHeader): boolean {
  return places.size === modules.length;
}

interface Role {
  readonly point: PointEvidence;
  readonly kind: LookKind;
  readonly without: string | undefined;
  readonly time: number;
}

/**
 * What each point of a step is for. On a bench that reaches all places at once, only a proof without a
 * module is about that module. Where the operator moves the meter, every point of a pass is about the place
 * that the probes are at: a pass proves it first with all plugged in, then without its own module.
 */
function* rolesIn(points: readonly PointEvidence[]): Generator<Role> {
  const looks = points.filter(({ phase }) => phase === 'proof' || phase === 'share' || phase === 'stack');
  const inPasses = looks[0]?.of !== undefined;
  let pass: string | undefined;
  let times = new Map<string, number>();
  let proofs = 0;
  let climbed = false;
  for (const point of looks) {
    if (inPasses && point.of !== pass) {
      pass = point.of;
      times = new Map();
      proofs = 0;
      climbed = false;
    }
    if (point.phase !== 'proof') climbed = true;
    const kind = kindOf(point, { climbed, isFirst: proofs === 0, inPasses });
    if (point.phase === 'proof') proofs += 1;
    const without = kind === 'without' ? point.of : undefined;
    const key = `${kind} ${without ?? ''} ${point.set.current ?? 'off'}`;
    const time = times.get(key) ?? 0;
    times.set(key, time + 1);
    yield { point, kind, without, time };
  }
}

function kindOf(
  { phase, of }: PointEvidence,
  { climbed, isFirst, inPasses }: { climbed: boolean; isFirst: boolean; inPasses: boolean },
): LookKind {
  if (phase !== 'proof') return 'climb';
  if (climbed) return 'after';
  return of === undefined || (inPasses && isFirst) ? 'together' : 'without';
}
