import type {
  FoundArrangement,
  Guaranteed,
  Movement,
  MovementVerdict,
  StagedBuild,
} from '../../arrangement/staged-build.js';
import { type Sequence, sequences, type StagesWish } from '../../arrangement/stages-wish.js';
import { ucumCode } from '../../quantity/ucum.js';
import { circuitAsJson, commonAsJson } from './json-parts.js';
import type { StagedSupplyJson } from '../schema/staged-supply-schema.js';
import { estimateAsJson, finite, valueAsJson, valuesAsJson } from './json-values.js';

type MovementJson = StagedSupplyJson['switchOvers'][number]['goingUp'];

/** The name and version of the format; the number changes when a reader would have to. */
export const stagedSupplyFormat = 'railproof/staged-supply 1';

/**
 * A staged supply as one JSON object; numbers, `standing`, `outcome` and `modules` as in
 * {@link combinationAsJson}. `guaranteed` holds a point for each output voltage, rising; at each what it feeds
 * coming from below and from above. `dissipation.watts` is by output, then by current; null beyond what is
 * guaranteed. Each movement of contacts has a verdict for every way of driving them; that of `sequence` decides.
 */
export function stagedSupplyAsJson(build: StagedBuild): StagedSupplyJson {
  const { wish, arrangements, switchOvers, guaranteed, map, mostDissipation } = build;
  return {
    format: stagedSupplyFormat,
    name: wish.name,
    title: wish.title,
    ...commonAsJson(build),
    output: { from: valueAsJson(wish.output.from, 'voltage'), to: valueAsJson(wish.output.to, 'voltage') },
    hysteresis: valueAsJson(wish.hysteresis, 'voltage'),
    sequence: wish.sequence,
    linearStage: linearStageAsJson(wish.linearStage, mostDissipation),
    arrangements: arrangements.map(arrangementAsJson),
    switchOvers: switchOvers.map(({ lower, upper, up, down, swing, goingUp, comingDown }) => ({
      lower,
      upper,
      up: valueAsJson(up, 'voltage'),
      down: valueAsJson(down, 'voltage'),
      swing: {
        noLoad: valueAsJson(swing.noLoad, 'voltage'),
        fullLoad: valueAsJson(swing.fullLoad, 'voltage'),
      },
      goingUp: movementAsJson(goingUp),
      comingDown: movementAsJson(comingDown),
    })),
    guaranteed: guaranteed.map(({ output, rising, falling }) => ({
      output: valueAsJson(output, 'voltage'),
      rising: guaranteedAsJson(rising),
      falling: guaranteedAsJson(falling),
    })),
    dissipation: {
      output: valuesAsJson(map.outputs, 'voltage'),
      current: valuesAsJson(map.currents, 'current'),
      watts: map.watts.map((row) => row.map((watts) => (watts === null ? null : finite(watts, 'power')))),
      unit: ucumCode('power'),
    },
  };
}

/** `most` is what it may turn into heat in this use. */
function linearStageAsJson(
  { dropOut, current, dissipation }: StagesWish['linearStage'],
  most: number,
): StagedSupplyJson['linearStage'] {
  return {
    dropOut: valueAsJson(dropOut, 'voltage'),
    current: valueAsJson(current, 'current'),
    dissipation:
      dissipation.kind === 'fixed'
        ? { kind: dissipation.kind }
        : {
            kind: dissipation.kind,
            full: valueAsJson(dissipation.full, 'power'),
            fullTo: valueAsJson(dissipation.fullTo, 'temperature'),
            noneAt: valueAsJson(dissipation.noneAt, 'temperature'),
            case: valueAsJson(dissipation.case, 'temperature'),
          },
    most: valueAsJson(most, 'power'),
  };
}

function arrangementAsJson(arrangement: FoundArrangement): StagedSupplyJson['arrangements'][number] {
  const { name, circuit, closed, openVoltage, fullVoltage, current, setBy } = arrangement;
  return {
    name,
    circuit: circuitAsJson(circuit),
    closed,
    openVoltage: estimateAsJson(openVoltage, 'voltage'),
    fullVoltage: estimateAsJson(fullVoltage, 'voltage'),
    recommended: { ...valueAsJson(current, 'current'), setBy },
  };
}

function movementAsJson({ moving, bySequence }: Movement): MovementJson {
  return {
    moving,
    verdicts: sequences.map((sequence) => verdictAsJson(sequence, bySequence[sequence])),
  };
}

function verdictAsJson(sequence: Sequence, verdict: MovementVerdict): MovementJson['verdicts'][number] {
  if (verdict.kind === 'clear') {
    const { kind, states, interrupts } = verdict;
    return { sequence, kind, states, interrupts };
  }
  const { kind, order, connection } = verdict;
  return {
    sequence,
    kind,
    order,
    connection: {
      kind: connection.kind,
      modules: connection.modules,
      voltage: valueAsJson(connection.volts, 'voltage'),
      through: connection.through,
      sentence: connection.sentence,
    },
  };
}

function guaranteedAsJson({
  arrangement,
  current,
  setBy,
}: Guaranteed): StagedSupplyJson['guaranteed'][number]['rising'] {
  return { arrangement, current: valueAsJson(current, 'current'), setBy };
}
