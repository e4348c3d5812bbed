import { Balance } from './balance.js';
import { type DemandLine, type Line, type Straight, type Stretch, onStretch } from './stretch.js';

/** A place where what the parts give together meets what is demanded, and what each of them gives there. */
export interface Crossing {
  readonly place: number;
  /** Beyond a place where it `falls` the parts give less than is demanded: there the circuit can rest. */
  readonly surplus: 'falls' | 'rises';
  readonly values: readonly number[];
}

export interface Walk {
  /** In ascending order. */
  readonly crossings: readonly Crossing[];
  readonly end: {
    /** Do the parts still give at least what is demanded? */
    readonly isAbove: boolean;
    /** What each part gives on arriving, … */
    readonly values: readonly number[];
    /** … and after those that jump right there have given way to what is demanded. */
    readonly givenWay: readonly number[];
  };
}

/**
 * Walks from one place to another, from corner to corner of all parts and of the demand, and finds every
 * place where they meet. Between two corners the surplus is one line (or one convex curve), so nothing is
 * missed and everything is exact. Where parts jump, they rest within the jump: each gives way by its share
 * of it. Linear in the corners, apart from putting them in order.
 */
export function walk(parts: readonly Line[], demand: DemandLine, from: number, to: number): Walk {
  const firsts = parts.map((line) => lastBefore(line, from));
  const balance = new Balance(firsts, lastBefore(demand, from));
  const changes = changesOf(parts, demand, from, to);
  const crossings: Crossing[] = [];
  let isAbove = true;
  for (const span of spans(changes, from, to)) {
    const left = turn(balance, span.changes);
    const isAboveHere = balance.isAbove(span.from);
    if (isAbove && !isAboveHere) {
      crossings.push({ place: span.from, surplus: 'falls', values: restIn(balance, left, span.from) });
    }
    isAbove = balance.isAbove(span.to);
    if (balance.isEndless) break;
    crossings.push(...crossingsWithin(balance, span, isAboveHere, isAbove));
  }
  const values = balance.valuesAt(to);
  const left = turn(
    balance,
    changes.filter(({ at }) => at === to),
  );
  return { crossings, end: { isAbove, values, givenWay: restIn(balance, left, to) } };
}

interface Change {
  readonly at: number;
  readonly to: { readonly part: number; readonly stretch: Stretch } | { readonly demand: Straight };
}

function changesOf(parts: readonly Line[], demand: DemandLine, from: number, to: number): readonly Change[] {
  const isOnTheWay = ({ at }: Change): boolean => at >= from && at <= to;
  return [
    ...parts.flatMap((line, part) =>
      line.slice(1).map((stretch): Change => ({ at: stretch.from, to: { part, stretch } })),
    ),
    ...demand.slice(1).map((straight): Change => ({ at: straight.from, to: { demand: straight } })),
  ]
    .filter(isOnTheWay)
    .sort((one, other) => one.at - other.at);
}

interface Span {
  readonly from: number;
  readonly to: number;
  /** What turns where the span begins. */
  readonly changes: readonly Change[];
}

function* spans(changes: readonly Change[], from: number, to: number): Generator<Span> {
  let next = 0;
  let place = from;
  while (place < to) {
    const first = next;
    while (changes[next]?.at === place) next += 1;
    const until = Math.min(to, changes[next]?.at ?? to);
    yield { from: place, to: until, changes: changes.slice(first, next) };
    place = until;
  }
}

function lastBefore<S extends Stretch>(line: readonly [S, ...S[]], place: number): S {
  return line.findLast(({ from }) => from < place) ?? line[0];
}

/** What was left: the stretches on the near side of a jump. */
interface Left {
  readonly parts: ReadonlyMap<number, Stretch>;
  readonly demand: Straight;
}

function turn(balance: Balance, changes: readonly Change[]): Left {
  const parts = new Map<number, Stretch>();
  const { demand } = balance;
  for (const { to } of changes) {
    if ('demand' in to) {
      balance.demand = to.demand;
    } else {
      const left = balance.turn(to.part, to.stretch);
      if (left !== undefined && !parts.has(to.part)) parts.set(to.part, left);
    }
  }
  return { parts, demand };
}

/** Where parts jump past what is demanded: together they give way to it, as far as they jump. */
function restIn(balance: Balance, left: Left, place: number): readonly number[] {
  const near = balance.valuesAt(place, left.parts);
  const far = balance.valuesAt(place);
  const excess = near.reduce((sum, value) => sum + value, 0) - onStretch(left.demand, place).value;
  return giveWay(near, far, excess);
}

/**
 * Each gives way in proportion to its jump, as alike modules with ever smaller resistances would. Those
 * that can give way without end do so alone, by equal parts.
 */
function giveWay(near: readonly number[], far: readonly number[], excess: number): readonly number[] {
  const jumps = near.map((value, index) => Math.max(0, value - (far[index] ?? value)));
  const areEndless = jumps.includes(Number.POSITIVE_INFINITY);
  const weights = areEndless ? jumps.map((jump) => (jump === Number.POSITIVE_INFINITY ? 1 : 0)) : jumps;
  const whole = weights.reduce((sum, weight) => sum + weight, 0);
  if (!(excess > 0) || whole === 0) return near;
  const given = areEndless ? excess : Math.min(excess, whole);
  return near.map((value, index) => value - (given * (weights[index] ?? 0)) / whole);
}

function crossingsWithin(
  balance: Balance,
  { from, to }: Span,
  isAboveAtFrom: boolean,
  isAboveAtTo: boolean,
): readonly Crossing[] {
  const crossing = (low: number, high: number, surplus: 'falls' | 'rises'): Crossing => {
    const place = balance.zeroBetween(low, high);
    return { place, surplus, values: balance.valuesAtZero(place) };
  };
  if (isAboveAtFrom !== isAboveAtTo) return [crossing(from, to, isAboveAtFrom ? 'falls' : 'rises')];
  const dip = isAboveAtFrom ? balance.dipBetween(from, to) : undefined;
  return dip === undefined ? [] : [crossing(from, dip, 'falls'), crossing(dip, to, 'rises')];
}
