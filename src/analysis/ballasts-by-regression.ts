import { formatQuantity } from '../quantity/format-quantity.js';
import type { Ohms, Ratio } from '../quantity/quantity.js';
import type { RunHeader } from '../record/run-header.js';
import { LinearCombination, type LinearCombinationFit } from '../statistics/linear-combination.js';
import { combine, type Contribution, expandedFor } from '../statistics/uncertainty-budget.js';
import { expandedOf, type Finding, measured } from './finding.js';
import { type GroupLook, meterOf } from './module-currents.js';
import { promised, promisedErrors } from './promised-errors.js';

/** What the ballasts really are, by the load's current. */
export type BallastsFound =
  | {
      readonly kind: 'found';
      /** By module. */
      readonly resistances: ReadonlyMap<string, Ohms>;
      /** Those that are not what the bench file says. */
      readonly wrong: readonly Finding[];
    }
  | { readonly kind: 'unknown'; readonly because: string };

/** How sure one must be that a ballast is wrong, and by how much it must be, beyond what the bench file allows. */
export interface Demand {
  readonly coverage: Ratio;
  readonly beyond: Ratio;
}

/** Beyond what a circuit of places can be solved for. */
const mostPlaces = 15;
/** Places that are wrong by factors as close as this are wrong by one and the same. */
const sameFactor = 1.02;

/**
 * The load's current as a combination of the voltages across the ballasts, I_load = Σ Gₖ·vₖ + c: least
 * squares over all looks. The points with one module unplugged tell the conductances apart. The offsets of
 * the load and of all meters are the constant c, whatever they are; their gains scale a conductance.
 * @param demand what it takes to call a ballast wrong.
 */
export function ballastsByRegression(
  header: RunHeader,
  looks: readonly GroupLook[],
  demand: Demand,
): BallastsFound {
  const places = header.modules.length;
  if (places > mostPlaces)
    return { kind: 'unknown', because: 'there are too many places to tell the ballasts apart' };
  const fit = new LinearCombination(places + 1);
  for (const { currents, total } of looks) fit.add([...currents.map(({ volts }) => volts), 1], total);
  const solved = fit.solve();
  if (solved.kind === 'undetermined') {
    return solved.why === 'too-few-rows' ? { kind: 'unknown', because: '' } : notToldApart;
  }
  const findings = looks[0]?.currents.map((each, index) =>
    ballastFinding(header, { solved, looks }, { ...each, index }),
  );
  if (findings?.every(isTold) !== true) return notToldApart;
  const wrong = findings.filter(
    (finding, index) => !agrees(finding, header.bench.places?.[index]?.ballast, demand),
  );
  const factors = findings.map(
    ({ value }, index) => Number(value) / (header.bench.places?.[index]?.ballast?.resistance ?? Number.NaN),
  );
  if (wrong.length === places && Math.max(...factors) <= sameFactor * Math.min(...factors)) {
    const factor = Number((factors[0] ?? Number.NaN).toPrecision(3));
    return {
      kind: 'unknown',
      because: `all ballasts alike would have to be ${factor} of what the bench file says: a meter or the load is in question before they are`,
    };
  }
  const resistances = new Map(
    findings.map(({ value }, index) => [header.modules[index]?.name ?? '', Number(value)]),
  );
  return { kind: 'found', resistances, wrong };
}

/** A resistance that is known no better than this is not known. */
const vague: Ratio = 0.15;

function isTold(finding: Finding): boolean {
  const value = Number(finding.value);
  return value > 0 && (expandedOf(finding) ?? 0) <= vague * value;
}

const notToldApart: BallastsFound = {
  kind: 'unknown',
  because: 'the ballasts cannot be told apart by what was read: measure each of them again',
};

interface Solved {
  readonly solved: LinearCombinationFit;
  readonly looks: readonly GroupLook[];
}

interface Where {
  readonly module: string;
  readonly place: number;
  readonly index: number;
  readonly ballast: Ohms;
}

function ballastFinding(header: RunHeader, { solved, looks }: Solved, where: Where): Finding {
  const { coefficients } = solved;
  const conductance = coefficients[where.index] ?? Number.NaN;
  const resistance = 1 / conductance;
  // dR = −R²·dG
  const inOhms = (ofConductance: number): Ohms => Math.abs(ofConductance) * resistance ** 2;
  const load = promisedErrors(header, 'load', 'current');
  const own = promisedErrors(header, meterOf(header, where.place), 'voltage');
  // How a scatter of 1 A in the rows scatters this conductance; the places of the points alone say it.
  const perAmpere = (solved.uncertainties[where.index] ?? 0) / (solved.residualDeviation || 1);
  const scatter = Math.max(solved.residualDeviation, lastDigits(header, looks));
  const budget: readonly Contribution[] = [
    {
      name: 'scatter about the sum',
      kind: 'A',
      uncertainty: inOhms(perAmpere * scatter),
      degreesOfFreedom: solved.degreesOfFreedom,
    },
    promised(`${load.of}, gain`, inOhms(load.gain * conductance)),
    promised(`${own.of}, gain`, inOhms(own.gain * conductance)),
  ];
  const says = header.bench.places?.[where.index]?.ballast?.resistance ?? Number.NaN;
  return measured(`ballast-of-${where.module}`, 'resistance', resistance, budget, {
    step: looks[0]?.step ?? null,
    note: `the bench file says ${formatQuantity(says, 'resistance')}: measure it again; shares are not given until then`,
  });
}

/** What the last digits hide of a sum, in A: residuals smaller than that say nothing. */
function lastDigits(header: RunHeader, looks: readonly GroupLook[]): number {
  const ofPlaces = (looks[0]?.currents ?? []).map(
    ({ place, ballast }) => promisedErrors(header, meterOf(header, place), 'voltage').resolution / ballast,
  );
  return Math.hypot(promisedErrors(header, 'load', 'current').resolution, ...ofPlaces);
}

function agrees(
  { value, budget }: Finding,
  ballast: { readonly resistance: Ohms; readonly uncertainty: Ohms } | undefined,
  { coverage, beyond }: Demand,
): boolean {
  if (ballast === undefined) return true;
  const expanded = expandedFor(combine(budget), coverage);
  const allowed = ballast.uncertainty + beyond * ballast.resistance + arithmetic * ballast.resistance;
  return Math.abs(Number(value) - ballast.resistance) <= expanded + allowed;
}

/** What adding floating-point numbers loses. */
const arithmetic: Ratio = 1e-9;
