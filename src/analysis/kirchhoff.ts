import { formatQuantity } from '../quantity/format-quantity.js';
import type { Amperes, Volts } from '../quantity/quantity.js';
import type { RunHeader } from '../record/run-header.js';
import { combineStandard, expandedFor } from '../statistics/uncertainty-budget.js';
import { ballastsByRegression } from './ballasts-by-regression.js';
import type { Finding } from './finding.js';
import { amps } from './in-words.js';
import { budgetOf, type GroupLook, meterOf } from './module-currents.js';
import { isComplete } from './place-looks.js';
import { promisedErrors } from './promised-errors.js';

/** Whether the modules' currents add up to the load's, and if not, what is known of why. */
export type Kirchhoff =
  /** No look reached every place. */
  | { readonly kind: 'unchecked' }
  | { readonly kind: 'adds-up' }
  /** `ballast-of-<module>` of each whose resistance is not what the bench file says. */
  | {
      readonly kind: 'wrong-ballasts';
      readonly ballasts: readonly [Finding, ...Finding[]];
      readonly note: string;
    }
  | { readonly kind: 'unexplained'; readonly note: string };

/** A sum that chance makes as wrong as this less often is wrong: a whole record has dozens of looks. */
const strictLevel = 1e-3;
/** Of standard uncertainties: at that level the normal distribution allows 3.29, and Student's t always more. */
const surelyAllowed = 3;
/** What adding floating-point numbers loses. */
const arithmetic = 1e-9;

/**
 * Kirchhoff's current law at every look that reached all places: the currents of the modules must add up to
 * the load's within their uncertainties. Where they don't, the ballast is sought that explains it; what
 * then rests on these currents is not given at all, since an average over right and wrong ones is wrong.
 */
export function currentsAddUp(header: RunHeader, looks: readonly GroupLook[]): Kirchhoff {
  const whole = looks.filter((look) => isSound(look) && isComplete(look, header) && look.currents.length > 0);
  if (whole.length === 0) return { kind: 'unchecked' };
  const worst = worstSum(header, whole);
  if (worst === undefined) return hiddenInTheSum(header, whole);
  const off = inWords(worst);
  const plain = plainlyWrong(header, whole);
  if (plain !== undefined) return { kind: 'unexplained', note: `${off}: ${plain}` };
  const found = ballastsByRegression(header, whole, { coverage: 1 - strictLevel, beyond: 0 });
  if (found.kind === 'unknown') {
    return { kind: 'unexplained', note: [off, found.because].filter((part) => part !== '').join('; ') };
  }
  const left = worstSum(
    header,
    whole.map((look) => withBallasts(look, found.resistances)),
  );
  const [first, ...others] = found.wrong;
  if (left !== undefined || first === undefined) {
    return { kind: 'unexplained', note: `${off}; no ballast can be singled out: ${usually}` };
  }
  return { kind: 'wrong-ballasts', ballasts: [first, ...others], note: off };
}

/**
 * The sums may be right within what a meter promises at zero and a ballast be wrong all the same; the points
 * with a module unplugged tell, if it is clearly so. A few percent are forgiven: a resistor warms.
 */
function hiddenInTheSum(header: RunHeader, whole: readonly GroupLook[]): Kirchhoff {
  const found = ballastsByRegression(header, whole, { coverage: 1 - strictLevel, beyond: 0.03 });
  const [first, ...others] = found.kind === 'found' ? found.wrong : [];
  if (first === undefined) return { kind: 'adds-up' };
  const note = "the modules' currents add up, but not by the ballasts that the bench file gives";
  return { kind: 'wrong-ballasts', ballasts: [first, ...others], note };
}

const usually =
  'usually a loose joint beside a ballast, probes that take in more than the ballast, or a wire that goes round it';

/** What was dropped, and what came after, may have changed between one reading and the next. */
function isSound({ kind, outcome }: GroupLook): boolean {
  return kind !== 'after' && outcome !== 'dropped';
}

interface Sum {
  readonly sum: Amperes;
  readonly total: Amperes;
}

/** The sum that is most wrong, in units of what is allowed; undefined where all are right. */
function worstSum(header: RunHeader, looks: readonly GroupLook[]): Sum | undefined {
  let worst: (Sum & { readonly beyond: number }) | undefined;
  for (const look of looks) {
    const sum = look.currents.reduce((added, { current }) => added + current, 0);
    // One ohmmeter that is off by as much as was promised puts all of them off alike, and no ballast is wrong.
    const budget = budgetOf(header, look, {
      modules: look.currents.map(() => 1),
      load: -1,
      ballastsAlike: true,
    });
    const combined = combineStandard(budget);
    const off = Math.abs(sum - look.total);
    if (off <= surelyAllowed * combined.standardUncertainty) continue;
    const allowed = expandedFor(combined, 1 - strictLevel);
    const beyond = off / (allowed + arithmetic * Math.max(1, Math.abs(look.total)));
    if (beyond > (worst?.beyond ?? 1)) worst = { sum, total: look.total, beyond };
  }
  return worst;
}

function inWords({ sum, total }: Sum): string {
  return `the modules' currents add up to ${amps(sum)} where the load takes ${amps(total)}`;
}

function withBallasts(look: GroupLook, resistances: ReadonlyMap<string, number>): GroupLook {
  return {
    ...look,
    currents: look.currents.map((each) => {
      const ballast = resistances.get(each.module) ?? each.ballast;
      const ratio = each.ballast / ballast;
      return {
        ...each,
        ballast,
        current: each.current * ratio,
        scatter: { ...each.scatter, uncertainty: each.scatter.uncertainty * Math.abs(ratio) },
      };
    }),
  };
}

/** Places that read so much alike are one and the same place. */
const alike = 0.005;
/** The load must have changed by this for a reading that stays to say something. */
const changed = 2;

/** What can be seen without reckoning: places that read the same, that never change, that read backwards. */
function plainlyWrong(header: RunHeader, looks: readonly GroupLook[]): string | undefined {
  const totals = looks.map(({ total }) => total);
  if (looks.length < 3 || Math.max(...totals) < changed * Math.min(...totals)) return undefined;
  const largest = Math.max(...looks.flatMap(({ currents }) => currents.map(({ volts }) => Math.abs(volts))));
  const near = (one: number, other: number): boolean => Math.abs(one - other) <= alike * largest;
  const same = looks.every(({ currents }) =>
    currents.every(({ volts }) => near(volts, currents[0]?.volts ?? Number.NaN)),
  );
  if (same) return 'every place reads the same, so one and the same is read: a stuck channel of the scanner';
  for (const [index, { name }] of header.modules.entries()) {
    const volts = looks
      .filter(({ without }) => without !== name)
      .flatMap(({ currents }) => currents[index]?.volts ?? []);
    const first = volts[0];
    if (first === undefined) continue;
    if (volts.every((each) => near(each, first))) {
      const stays = formatQuantity(first, 'voltage', { significant: 2 });
      return `what is read at the ballast of ${name} stays at ${stays} whatever the load takes: a meter in another mode, a stuck channel, or probes elsewhere`;
    }
    const zero = atZero(header, index + 1);
    if (Math.min(...volts) < -Math.max(alike * largest, zero) && Math.max(...volts) < alike * largest) {
      return `the ballast of ${name} reads below zero: its probes are reversed`;
    }
  }
  return undefined;
}

/** What the meter of a place may show where there is nothing: the half-width of what was promised. */
function atZero(header: RunHeader, place: number): Volts {
  return Math.sqrt(3) * promisedErrors(header, meterOf(header, place), 'voltage').offset;
}
