import {
  behindDrop,
  currentAt,
  inGroup,
  inStack,
  lineOf,
  limitOf,
  type SupplyLine,
  voltageOf,
} from '../circuit/supply-line.js';
import type { Amperes, Ohms, Ratio, Volts } from '../quantity/quantity.js';
import type { Form } from './build.js';
import type { ModuleProfile } from './module-profile.js';

/** A form whose parts may stand behind something that takes a part of their voltage. */
export type FormBehindDrops =
  | { readonly kind: 'module'; readonly name: string }
  | { readonly kind: 'group' | 'stack'; readonly of: readonly FormBehindDrops[] }
  | { readonly kind: 'behind'; readonly drop: Volts; readonly of: FormBehindDrops };

/** Between what lines a supply built of modules lies, and what it can be asked for continuously. */
export interface WorstForm {
  /** Every module at the highest voltage and the lowest resistance that its records allow, … */
  readonly strong: SupplyLine;
  /** … and at the lowest and the highest. Both reach to `limit` at least. */
  readonly weak: SupplyLine;
  /** The largest current at which no module can be above what it is recommended for, whatever is true of them. */
  readonly limit: Amperes;
  /** The module that would be. */
  readonly by: string;
}

/** In series with each module. */
export interface WorstBallast {
  readonly resistance: Ohms;
  /** 0.05 for ± 5 %. */
  readonly tolerance: Ratio;
}

/**
 * The worst case of a form: the voltages, droops and ballasts lie anywhere within their intervals, all
 * independent of each other.
 *
 * One upon the other all carry the same, so the least limit counts. Side by side, member p comes to its limit
 * L_p at the bus voltage V_p(L_p), which is highest where p is strong; and there the others give least where
 * they are weak. So no load below
 *
 *     min over p of  L_p + Σ_{q ≠ p} I_q,weak(V_p,strong(L_p))
 *
 * brings any member to its limit, and the corner of that p does. A member that is itself a group or a stack is
 * taken by its own worst case, which within it no load below its limit can outdo; there the answer may be on
 * the safe side, as one module can't be strong for one sum and weak for the next.
 *
 * Checked against random points within all intervals in test/arrangement/worst-form.test.ts.
 * @param modules in any order; those of the form must be among them.
 * @param ballast in series with each module; undefined for none.
 * @param mayGive what a module may be asked for; what it is recommended for where left out.
 */
export function worstOf(
  form: FormBehindDrops | Form,
  modules: readonly ModuleProfile[],
  ballast: WorstBallast | undefined,
  mayGive: (module: ModuleProfile) => Amperes = ({ recommended }) => recommended.current,
): WorstForm {
  const within = (part: FormBehindDrops): WorstForm => {
    switch (part.kind) {
      case 'module':
        return ofModule(named(part.name, modules), ballast, mayGive);
      case 'behind': {
        const inner = within(part.of);
        return {
          ...inner,
          strong: behindDrop(inner.strong, part.drop),
          weak: behindDrop(inner.weak, part.drop),
        };
      }
      case 'stack':
        return ofStack(atLeastOne(part.of.map(within)));
      case 'group':
        return ofGroup(atLeastOne(part.of.map(within)));
    }
  };
  return within(form);
}

function ofModule(
  profile: ModuleProfile,
  ballast: WorstBallast | undefined,
  mayGive: (module: ModuleProfile) => Amperes,
): WorstForm {
  const { resistance, tolerance } = ballast ?? { resistance: 0, tolerance: 0 };
  const [lowVoltage, highVoltage] = profile.openCircuit.interval;
  const [lowDroop, highDroop] = profile.droop.interval;
  const limit = mayGive(profile);
  const strong = lineOf({
    voltage: highVoltage,
    resistance: Math.max(0, lowDroop) + resistance * (1 - tolerance),
    limit,
  });
  const weak = lineOf({
    voltage: lowVoltage,
    resistance: Math.max(0, highDroop) + resistance * (1 + tolerance),
    limit,
  });
  return { strong, weak, limit: limitOf(weak), by: profile.name };
}

type AtLeastOne<T> = readonly [T, ...T[]];

function ofStack(members: AtLeastOne<WorstForm>): WorstForm {
  const { limit, by } = leastOf(members);
  return { ...linesOf(members, inStack), limit, by };
}

function ofGroup(members: AtLeastOne<WorstForm>): WorstForm {
  const saturating = members.map(({ strong, limit, by }, index) => {
    const bus = voltageOf(strong, limit);
    const besides = members.filter((_, other) => other !== index);
    return { limit: besides.reduce((sum, { weak }) => sum + currentAt(weak, bus), limit), by };
  });
  const { limit, by } = leastOf(atLeastOne(saturating));
  return { ...linesOf(members, inGroup), limit, by };
}

function linesOf(
  members: AtLeastOne<WorstForm>,
  join: (lines: AtLeastOne<SupplyLine>) => SupplyLine,
): Pick<WorstForm, 'strong' | 'weak'> {
  const [first, ...others] = members;
  return {
    strong: join([first.strong, ...others.map(({ strong }) => strong)]),
    weak: join([first.weak, ...others.map(({ weak }) => weak)]),
  };
}

function leastOf(members: AtLeastOne<Pick<WorstForm, 'limit' | 'by'>>): Pick<WorstForm, 'limit' | 'by'> {
  return members.reduce((least, each) => (each.limit < least.limit ? each : least));
}

function atLeastOne<T>(list: readonly T[]): AtLeastOne<T> {
  const [first, ...others] = list;
  if (first === undefined) throw new RangeError('a group or a stack without members');
  return [first, ...others];
}

function named(name: string, modules: readonly ModuleProfile[]): ModuleProfile {
  const profile = modules.find((each) => each.name === name);
  if (profile === undefined) throw new RangeError(`no profile of ${name}`);
  return profile;
}
