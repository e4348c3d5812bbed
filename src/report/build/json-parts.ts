import type { Circuit, Form, Part, Recommendation, ResistorChosen } from '../../arrangement/build.js';
import type { ModuleProfile, Taken } from '../../arrangement/module-profile.js';
import type { RecordSource } from '../../arrangement/understood-record.js';
import type { Dimension } from '../../quantity/quantity.js';
import type {
  CircuitWritten,
  Common,
  FormJson,
  ModuleWritten,
  PartWritten,
  RecommendationWritten,
  ResistorWritten,
  SourceWritten,
  TakenWritten,
  WordWritten,
} from '../schema/build-part-schemas.js';
import { type AnyBuild, outcomeOf } from './any-build.js';
import { finite, intervalAsJson, valueAsJson } from './json-values.js';

/** What every build has, however its modules are joined. */
export function commonAsJson(build: AnyBuild): Common {
  const { standing, concerns, parts, cautions } = build;
  const outcome = outcomeOf(build);
  return {
    outcome,
    standing: {
      kind: standing.kind,
      because: standing.kind === 'may-be-built' ? [] : standing.because,
    },
    concerns: concerns.map(({ kind, module, run, weight, text }) => ({
      kind,
      module,
      record: run ?? null,
      weight,
      text,
    })),
    cautions,
    parts: outcome === 'must-not-be-built' ? [] : parts.map(partAsJson),
    modules: build.modules.map(moduleAsJson),
  };
}

function partAsJson({ marks, what, ratings, why }: Part): PartWritten {
  return { marks, what, ratings, why };
}

function moduleAsJson(module: ModuleProfile): ModuleWritten {
  const { label, outputIsolation, recommended, limitStyle, earth } = module;
  return {
    name: module.name,
    description: module.description,
    nameplate: {
      voltage: valueAsJson(label.voltage, 'voltage'),
      current: valueAsJson(label.current, 'current'),
    },
    protectionClass: module.protectionClass,
    outputIsolation: outputIsolation === 'unknown' ? null : valueAsJson(outputIsolation, 'voltage'),
    openCircuitVoltage: takenAsJson(module.openCircuit, 'voltage'),
    droopResistance: takenAsJson(module.droop, 'resistance'),
    usableCurrent: takenAsJson(module.usable, 'current'),
    recommendedCurrent: {
      ...valueAsJson(recommended.current, 'current'),
      note: recommended.why,
      from: sourceAsJson(recommended.from),
    },
    dropoutCurrent: orNull(module.dropout, 'current'),
    shortCircuitCurrent: orNull(module.shortCircuit, 'current'),
    limitStyle: limitStyle === undefined ? null : wordAsJson(limitStyle.word, limitStyle.from),
    earthRelation: earth === undefined ? null : wordAsJson(earth.relation, earth.from),
  };
}

function orNull(taken: Taken | undefined, dimension: Dimension): TakenWritten | null {
  return taken === undefined ? null : takenAsJson(taken, dimension);
}

function takenAsJson(taken: Taken, dimension: Dimension): TakenWritten {
  return {
    ...valueAsJson(taken.value, dimension),
    bound: taken.bound ?? null,
    ...intervalAsJson(taken.interval, dimension),
    note: taken.note,
    budget: taken.budget.map(({ name, kind, uncertainty, degreesOfFreedom, shared }) => ({
      name,
      type: kind,
      uncertainty: finite(uncertainty, dimension),
      degreesOfFreedom: Number.isFinite(degreesOfFreedom) ? degreesOfFreedom : null,
      shared: shared ?? null,
    })),
    from: sourceAsJson(taken.from),
  };
}

function wordAsJson(word: string, from: RecordSource): WordWritten {
  return { value: word, unit: null, from: sourceAsJson(from) };
}

function sourceAsJson({ run, procedure, began, state, simulated }: RecordSource): SourceWritten {
  return { record: run, procedure, began, state, simulated };
}

export function circuitAsJson({ form, ballast, reverseDiodes, orDiodes }: Circuit): CircuitWritten {
  return {
    form: formAsJson(form),
    ballast:
      ballast === undefined
        ? null
        : {
            resistance: valueAsJson(ballast.resistance, 'resistance'),
            tolerance: valueAsJson(ballast.tolerance, 'ratio'),
          },
    reverseDiodes,
    orDiodes,
  };
}

/** `{ kind: "module", name }`, or `{ kind: "group" | "stack", of: [ … ] }`. */
function formAsJson(form: Form): FormJson {
  return form.kind === 'module'
    ? { kind: form.kind, name: form.name }
    : { kind: form.kind, of: form.of.map(formAsJson) };
}

export function recommendationAsJson({ current, setBy }: Recommendation): RecommendationWritten {
  return { ...valueAsJson(current, 'current'), setBy };
}

export function resistorAsJson(resistor: ResistorChosen): ResistorWritten {
  const { resistance, tolerance, dissipation, dissipationAtLimit, rating, voltageCost } = resistor;
  return {
    resistance: valueAsJson(resistance, 'resistance'),
    tolerance: valueAsJson(tolerance, 'ratio'),
    dissipation: valueAsJson(dissipation, 'power'),
    dissipationAtLimit: valueAsJson(dissipationAtLimit, 'power'),
    rating: rating === undefined ? null : valueAsJson(rating, 'power'),
    voltageCost: valueAsJson(voltageCost, 'voltage'),
  };
}
