import { railVoltages } from '../circuit/rail-voltages.js';
import type { Ohms, Volts } from '../quantity/quantity.js';
import { BLEEDER } from './module-curve-of.js';
import type { MeterPlace } from './probes.js';
import type { ModuleMoment, Moment, VirtualBench } from './virtual-bench.js';

/** What is between two probes, and the standard deviation of its noise. */
export interface Sight {
  readonly volts: Volts;
  readonly noise: Volts;
}

/** What leads that touch nothing pick up. */
const PICK_UP: Volts = 0.002;
/** An ohmmeter cannot measure what has a voltage of its own. */
const LIVE: Volts = 0.01;
/** The top of the widest range of a usual ohmmeter. */
const WIDEST_RANGE: Ohms = 120e6;

/** The voltage between a meter's probes. */
export function voltsAt(place: MeterPlace, moment: Moment, bench: VirtualBench): Sight {
  switch (place.kind) {
    case 'output':
      return { volts: moment.moduleVoltage + moment.ripple, noise: moment.noise };
    case 'output-of': {
      const { voltage, ripple, noise } = moduleIn(moment, place.module);
      return { volts: voltage + ripple, noise };
    }
    case 'ballast-of': {
      const { ballastVoltage, ballastRipple, ballastNoise } = moduleIn(moment, place.module);
      return { volts: ballastVoltage + ballastRipple, noise: ballastNoise };
    }
    case 'earth-of':
      return { volts: aboveEarth(place.module, moment, bench), noise: PICK_UP };
    case 'together':
      return { volts: 0, noise: 0 };
    case 'apart':
      return { volts: 0, noise: PICK_UP };
    case 'tied':
      return { volts: Number.NaN, noise: 0 };
  }
}

/** The resistance between a meter's probes, its own leads in it; `Infinity` where its ranges end. */
export function ohmsAt(place: MeterPlace, leads: Ohms, moment: Moment, bench: VirtualBench): Ohms {
  const { volts } = voltsAt(place, moment, bench);
  if (Math.abs(volts) > LIVE) return Number.POSITIVE_INFINITY;
  const ohms = leads + between(place, bench);
  return ohms > WIDEST_RANGE ? Number.POSITIVE_INFINITY : ohms;
}

function between(place: MeterPlace, bench: VirtualBench): Ohms {
  switch (place.kind) {
    case 'output':
    case 'output-of':
      return BLEEDER;
    case 'ballast-of':
      return bench.modules.find(({ name }) => name === place.module)?.ballast ?? Number.NaN;
    case 'earth-of':
      return bench.earthResistance(place.module);
    case 'together':
      return 0;
    case 'apart':
      return Number.POSITIVE_INFINITY;
    case 'tied':
      return Number.NaN;
  }
}

/**
 * A module's 0 V above earth. Earth is where the modules' own ties to it hold it, each with its conductance;
 * where there is none, the meter itself holds both ends together.
 */
function aboveEarth(module: string, moment: Moment, bench: VirtualBench): Volts {
  const rails = zeroRails(moment, bench);
  const ties = moment.modules.map(({ name }) => 1 / bench.earthResistance(name));
  const sum = ties.reduce((total, tie) => total + tie, 0);
  if (sum === 0) return 0;
  const earth = rails.reduce((total, rail, index) => total + rail * ((ties[index] ?? 0) / sum), 0);
  return (rails[moment.modules.findIndex(({ name }) => name === module)] ?? Number.NaN) - earth;
}

/** The 0 V of each module above that of the whole: in a stack each stands on those below it. */
function zeroRails({ modules }: Moment, { circuit }: VirtualBench): readonly Volts[] {
  return railVoltages(
    modules.map(({ voltage, ballastVoltage }) => (circuit === 'series' ? voltage - ballastVoltage : 0)),
  );
}

function moduleIn({ modules }: Moment, name: string): ModuleMoment {
  const found = modules.find((module) => module.name === name);
  if (found === undefined) throw new Error(`no module is called ${name}`);
  return found;
}
