import type { SimulatedModule } from '../files/simulation-section.js';
import type { Ohms, Seconds, Volts } from '../quantity/quantity.js';
import type { CircuitState } from './circuit-state.js';
import { shortedPlaces } from './earth-bonds.js';
import type { RestingPoint, SimulatedCircuit } from './resting-point.js';
import { rippleOf } from './ripple.js';

/** What oscillation (at the moment) and noise (standard deviation) add to one voltage. */
export interface Disturbance {
  readonly ripple: Volts;
  readonly noise: Volts;
}

export interface Disturbances {
  /** At the output of the whole. */
  readonly output: Disturbance;
  readonly modules: readonly { readonly own: Disturbance; readonly ballast: Disturbance }[];
}

/** A joint and some wire: what is left between modules that are joined directly. */
const LEAST_RESISTANCE: Ohms = 0.001;

/**
 * How each module's oscillation and noise come through. In a stack they add up, the load keeping the current
 * steady. On a bus every module that feeds it is a disturbed source behind its droop and ballast, so the bus
 * has the mean of all weighted with their conductances (Millman), and what a module differs from that drops
 * across its droop and its ballast. Noises are independent of each other and add up as squares.
 */
export function disturbances(
  circuit: SimulatedCircuit,
  state: CircuitState,
  point: RestingPoint,
  at: Seconds,
): Disturbances {
  const sources = circuit.modules.map((module, place): Disturbance => {
    const { rise = 0, phase } = state.modules[place] ?? {};
    const current = point.modules[place]?.current ?? 0;
    return {
      ripple: phase?.kind === 'held' ? rippleOf(module, rise, current, at) : 0,
      noise: phase?.kind === 'off' || phase?.kind === 'latched' ? 0 : module.noise,
    };
  });
  switch (circuit.circuit) {
    case 'single':
      return { output: sources[0] ?? none, modules: sources.map((own) => ({ own, ballast: none })) };
    case 'series': {
      const shorted = shortedPlaces(circuit.modules);
      const seen = sources.map((own, place) => (shorted.has(place) ? none : own));
      return {
        output: combined(seen, () => 1),
        modules: seen.map((own) => ({ own, ballast: none })),
      };
    }
    case 'parallel':
      return onTheBus(circuit, state, point, sources);
  }
}

const none: Disturbance = { ripple: 0, noise: 0 };

function onTheBus(
  { modules }: SimulatedCircuit,
  state: CircuitState,
  point: RestingPoint,
  sources: readonly Disturbance[],
): Disturbances {
  if (sources.every(({ ripple, noise }) => ripple === 0 && noise === 0)) {
    return { output: none, modules: modules.map(() => ({ own: none, ballast: none })) };
  }
  const weights = feedingPlaces(modules, state, point).map((feeds, place) => {
    const { droopResistance = 0, ballast = 0 } = modules[place] ?? {};
    return feeds ? 1 / Math.max(LEAST_RESISTANCE, droopResistance + ballast) : 0;
  });
  const whole = weights.reduce((sum, weight) => sum + weight, 0);
  const share = (place: number): number => (whole > 0 ? (weights[place] ?? 0) / whole : 0);
  return {
    output: combined(sources, share),
    modules: modules.map(({ droopResistance, ballast }, place) => {
      if (share(place) === 0) return { own: combined(sources, share), ballast: none };
      const part = ballast / Math.max(LEAST_RESISTANCE, droopResistance + ballast);
      const itself = (other: number): number => (other === place ? 1 : 0);
      return {
        own: combined(sources, (other) => part * itself(other) + (1 - part) * share(other)),
        ballast: combined(sources, (other) => part * (itself(other) - share(other))),
      };
    }),
  };
}

/** Those that set the bus: the ones that deliver. With no load the highest does; collapsed, whoever is at it. */
function feedingPlaces(
  modules: readonly SimulatedModule[],
  state: CircuitState,
  point: RestingPoint,
): readonly boolean[] {
  const isHeld = modules.map((_, place) => state.modules[place]?.phase.kind === 'held');
  const feeds = isHeld.map((is, place) => is && (point.modules[place]?.current ?? 0) > 0);
  if (feeds.includes(true)) return feeds;
  if (!isHeld.includes(true)) {
    return state.modules.map(({ phase }) => phase.kind === 'limiting' || phase.kind === 'retrying');
  }
  const highest = Math.max(
    ...modules.map(({ openCircuitVoltage }, place) => (isHeld[place] === true ? openCircuitVoltage : 0)),
  );
  return modules.map(
    ({ openCircuitVoltage }, place) => isHeld[place] === true && openCircuitVoltage === highest,
  );
}

function combined(sources: readonly Disturbance[], factor: (place: number) => number): Disturbance {
  let ripple = 0;
  let square = 0;
  for (const [place, source] of sources.entries()) {
    ripple += factor(place) * source.ripple;
    square += (factor(place) * source.noise) ** 2;
  }
  return { ripple, noise: Math.sqrt(square) };
}
