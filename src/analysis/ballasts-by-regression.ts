import { formatQuantity } from '../quantity/format-quantity.js';
import type { Ohms } from '../quantity/quantity.js';
import type { RunHeader } from '../record/run-header.js';
import { LinearCombination, type LinearCombinationFit } from '../statistics/linear-combination.js';
import type { Contribution } from '../statistics/uncertainty-budget.js';
import { type Finding, measured } from './finding.js';
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

/** Beyond what a circuit of places can be solved for. */
const mostPlaces = 16;
/** Places that are wrong by factors as close as this are wrong by one and the same. */
const sameFactor = 1.02;

/**
 * The load's current as a combination of the voltages across the ballasts, I_load = Σ Gₖ·vₖ: least squares
 * without an intercept over all looks. The points with one module unplugged tell the conductances apart.
 * Gains of the load and of the meters scale a conductance; an offset acts as a constant would on the
 * right-hand side, and goes in by what the same fit makes of a constant.
 */
export function ballastsByRegression(header: RunHeader, looks: readonly GroupLook[]): BallastsFound {
  const places = header.modules.length;
  if (places > mostPlaces)
    return { kind: 'unknown', because: 'there are too many places to tell the ballasts apart' };
  const fit = new LinearCombination(places);
  const ofConstant = new LinearCombination(places);
  for (const { currents, total } of looks) {
    const volts = currents.map((each) => each.volts);
    fit.add(volts, total);
    ofConstant.add(volts, 1);
  }
  const solved = fit.solve();
  const constant = ofConstant.solve();
  if (solved.kind === 'undetermined' || constant.kind === 'undetermined') return notToldApart;
  const findings = looks[0]?.currents.map((each, index) =>
    ballastFinding(header, { solved, constant, looks }, { ...each, index }),
  );
  const backwards = findings?.findIndex(({ value }) => Number(value) <= 0) ?? -1;
  if (findings === undefined || backwards !== -1) return notToldApart;
  const wrong = findings.filter((finding, index) => !agrees(finding, header.bench.places?.[index]?.ballast));
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

const notToldApart: BallastsFound = {
  kind: 'unknown',
  because: 'the ballasts cannot be told apart by what was read: measure each of them again',
};

interface Solved {
  readonly solved: LinearCombinationFit;
  /** What the same places make of a constant of 1 A. */
  readonly constant: LinearCombinationFit;
  readonly looks: readonly GroupLook[];
}

interface Where {
  readonly module: string;
  readonly place: number;
  readonly index: number;
  readonly ballast: Ohms;
}

function ballastFinding(header: RunHeader, { solved, constant, looks }: Solved, where: Where): Finding {
  const { coefficients } = solved;
  const conductance = coefficients[where.index] ?? Number.NaN;
  const resistance = 1 / conductance;
  // dR = −R²·dG
  const inOhms = (ofConductance: number): Ohms => Math.abs(ofConductance) * resistance ** 2;
  const load = promisedErrors(header, 'load', 'current');
  const own = promisedErrors(header, meterOf(header, where.place), 'voltage');
  const ofOneAmpere = constant.coefficients[where.index] ?? 0;
  // How a scatter of 1 A in the rows scatters this conductance; the places of the points alone say it.
  const perAmpere = (constant.uncertainties[where.index] ?? 0) / (constant.residualDeviation || 1);
  const scatter = Math.max(solved.residualDeviation, lastDigits(header, looks));
  const budget: readonly Contribution[] = [
    {
      name: 'scatter about the sum',
      kind: 'A',
      uncertainty: inOhms(perAmpere * scatter),
      degreesOfFreedom: solved.degreesOfFreedom,
    },
    promised(`${load.of}, gain`, inOhms(load.gain * conductance)),
    promised(`${load.of}, offset`, inOhms(load.offset * ofOneAmpere)),
    promised(`${own.of}, gain`, inOhms(own.gain * conductance)),
    promised('meters, offset', inOhms(offsetsTogether(header, coefficients) * ofOneAmpere)),
  ];
  const says = header.bench.places?.[where.index]?.ballast?.resistance ?? Number.NaN;
  return measured(`ballast-of-${where.module}`, 'resistance', resistance, budget, {
    step: looks[0]?.step ?? null,
    note: `the bench file says ${formatQuantity(says, 'resistance')}: measure it again; shares are not given until then`,
  });
}

/** What the offsets of the meters add to the sum of the currents: of one meter once, of several independently. */
function offsetsTogether(header: RunHeader, conductances: readonly number[]): number {
  const byMeter = new Map<string, number>();
  conductances.forEach((conductance, index) => {
    const meter = meterOf(header, index + 1);
    byMeter.set(meter, (byMeter.get(meter) ?? 0) + conductance);
  });
  return Math.hypot(
    ...[...byMeter].map(([meter, sum]) => sum * promisedErrors(header, meter, 'voltage').offset),
  );
}

/** What the last digits hide of a sum, in A: residuals smaller than that say nothing. */
function lastDigits(header: RunHeader, looks: readonly GroupLook[]): number {
  const ofPlaces = (looks[0]?.currents ?? []).map(
    ({ place, ballast }) => promisedErrors(header, meterOf(header, place), 'voltage').resolution / ballast,
  );
  return Math.hypot(promisedErrors(header, 'load', 'current').resolution, ...ofPlaces);
}

function agrees(
  { interval }: Finding,
  ballast: { readonly resistance: Ohms; readonly uncertainty: Ohms } | undefined,
): boolean {
  if (ballast === undefined || interval === null) return true;
  const { resistance, uncertainty } = ballast;
  return interval[1] >= resistance - uncertainty && interval[0] <= resistance + uncertainty;
}
