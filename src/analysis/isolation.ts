import { earthFound, type EarthFound, type EarthLimits, type LeadsProof } from '../circuit/earth-found.js';
import { earthPoint } from '../circuit/earth-point.js';
import type { EarthRelation } from '../circuit/earth-relation.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { Ohms } from '../quantity/quantity.js';
import type { RunHeader } from '../record/run-header.js';
import { stepsOf } from './curve.js';
import type { Evidence, PointEvidence, StepEvidence } from './evidence.js';
import { type Finding, inWords, measured } from './finding.js';

type Module = RunHeader['modules'][number];

/**
 * `earth-relation` and `earth-resistance` of each module, as the last check of the isolation found them;
 * `-of-<module>` where there are several. Where the leads were not proved both before and after, the relation
 * is `undetermined` and there is no resistance: a broken lead reads like the best isolation.
 */
export function isolationFindings(evidence: Evidence): readonly Finding[] {
  const step = stepsOf(evidence, 'isolation-check').at(-1);
  if (step === undefined) return [];
  const { modules } = evidence.header;
  return modules.flatMap((module) => {
    const ending = modules.length === 1 ? '' : `-of-${module.name}`;
    return findingsOf(module, ending, step, evidence.header);
  });
}

function findingsOf(
  module: Module,
  ending: string,
  step: StepEvidence,
  header: RunHeader,
): readonly Finding[] {
  const limits = limitsIn(step);
  const relation = (word: EarthRelation, note: string): Finding =>
    inWords(`earth-relation${ending}`, word, { step: step.step, note });
  if (limits === undefined)
    return [relation('undetermined', 'the record does not say what it was to be judged by')];
  const found = foundIn(step, module, header, limits);
  if (found.kind === 'unproved') return [relation('undetermined', found.why)];
  const { interval } = found.resistance;
  const towards = `measured to ${earthPoint(module)}`;
  const proof =
    found.relation === 'isolated' ? '; what voltage it withstands, only an insulation test shows' : '';
  return [
    relation(found.relation, `${reasons[found.relation](interval, limits)}, ${towards}${proof}`),
    ...resistanceFindings(`earth-resistance${ending}`, found, { step: step.step, note: towards }),
  ];
}

const reasons: Readonly<
  Record<EarthRelation, (interval: readonly [Ohms, Ohms], limits: EarthLimits) => string>
> = {
  bonded: (_interval, { bondedBelow }) => `below ${asSet(bondedBelow)}`,
  isolated: (_interval, { isolatedAbove }) => `above ${asSet(isolatedAbove)}`,
  leaky: (_interval, { bondedBelow, isolatedAbove }) =>
    `neither below ${asSet(bondedBelow)} nor above ${asSet(isolatedAbove)}`,
  undetermined: ([low, high], { bondedBelow, isolatedAbove }) =>
    high < -bondedBelow
      ? 'it reads below zero: a voltage is in the way'
      : `between ${ohms(low)} and ${ohms(high)}, on both sides of ${asSet(low <= bondedBelow ? bondedBelow : isolatedAbove)}`,
};

function resistanceFindings(
  name: string,
  { relation, resistance }: EarthFound & { kind: 'proved' },
  { step, note }: { readonly step: number; readonly note: string },
): readonly Finding[] {
  const { value, budget, interval } = resistance;
  const [low, high] = interval;
  if (value !== undefined && high < Infinity) {
    return [measured(name, 'resistance', value, budget, { step, note: `${note}; the leads are taken off` })];
  }
  // A contact that comes and goes bounds nothing, unless all that was read is on the safe side.
  if (value !== undefined && relation !== 'isolated') return [];
  const least = `${note}; at least this much: the meter showed open`;
  const word = inWords(name, '', { step, note: least });
  return [{ ...word, value: low, dimension: 'resistance', bound: 'least' }];
}

function foundIn(step: StepEvidence, { name }: Module, header: RunHeader, limits: EarthLimits): EarthFound {
  const { points } = step;
  const at = points.findLastIndex(
    ({ phase, of, outcome }) => phase === 'earth' && of === name && outcome !== undefined,
  );
  const earth = points[at];
  if (earth === undefined)
    return { kind: 'unproved', why: 'it was not measured: the check ended before that' };
  const promise = header.instruments.find(({ role }) => role === 'meter')?.accuracy['resistance'];
  return earthFound(
    {
      earth: earth.resistance,
      before: proofIn(points.slice(0, at).reverse()),
      after: proofIn(points.slice(at + 1)),
      promise: promise ?? { ofReading: 0, fixed: 0 },
    },
    limits,
  );
}

/** The proof that is nearest to a measurement, with no other measurement between. */
function proofIn(points: readonly PointEvidence[]): LeadsProof {
  const other = points.findIndex(({ phase }) => phase === 'earth');
  const near = other === -1 ? points : points.slice(0, other);
  const nearest = (wanted: PointEvidence['phase']): PointEvidence['resistance'] | undefined =>
    near.find(({ phase, outcome }) => phase === wanted && outcome !== undefined)?.resistance;
  return { together: nearest('leads-together'), apart: nearest('leads-apart') };
}

function limitsIn({ settings }: StepEvidence): EarthLimits | undefined {
  const { bondedBelow, isolatedAbove, openAbove, leadResistanceBelow } = settings as Partial<
    Record<keyof EarthLimits, unknown>
  >;
  return typeof bondedBelow === 'number' &&
    typeof isolatedAbove === 'number' &&
    typeof openAbove === 'number' &&
    typeof leadResistanceBelow === 'number'
    ? { bondedBelow, isolatedAbove, openAbove, leadResistanceBelow }
    : undefined;
}

function ohms(value: Ohms): string {
  return formatQuantity(value, 'resistance', { significant: 3 });
}

/** A threshold, as it was written. */
function asSet(value: Ohms): string {
  return formatQuantity(value, 'resistance');
}
