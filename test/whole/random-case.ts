import type { Bench } from '../../src/files/bench.js';
import type { Module } from '../../src/files/module.js';
import type { ModuleLimit, SimulatedModule } from '../../src/files/simulation-section.js';
import { randomFrom } from '../../src/statistics/random.js';

const styles = ['constant-current', 'foldback', 'constant-power', 'hiccup', 'latch-off'] as const;

const load = { driver: 'load-input-scpi', connection: { kind: 'simulated' } } as const;
const meter = { driver: 'meter-read-scpi', connection: { kind: 'simulated' } } as const;

export interface RandomCase {
  readonly bench: Bench;
  readonly module: Module;
  readonly truth: SimulatedModule;
}

/** A module that nobody has seen before, and a bench for it; the same for the same seed. */
export function randomCase(seed: number): RandomCase {
  const random = randomFrom(seed).fork('case');
  const { uniform: between } = random;
  const rated = { voltage: [5, 12, 15, 19, 24][seed % 5] ?? 15, current: between(2, 4) };
  const current = rated.current * between(1.1, 1.8);
  const style = styles[Math.floor(between(0, styles.length))] ?? 'hiccup';
  const truth: SimulatedModule = {
    name: `S${seed}`,
    openCircuitVoltage: rated.voltage * between(0.98, 1.03),
    droopResistance: between(0.006, 0.04),
    limit: limitOf(style, current),
    noise: between(0.0003, 0.003),
    ballast: 0,
    reverseDiode: false,
    earth: 'isolated',
  };
  return {
    truth,
    module: {
      name: truth.name,
      description: '',
      rated,
      protectionClass: 'II',
      input: 'mains',
      outputIsolation: 'unknown',
      changes: [],
    },
    bench: {
      name: 'bench-of-many',
      // Every fourth bench has no meter, so the leads count and are corrected for.
      instruments: seed % 4 === 0 ? { load } : { load, meter },
      leads: { resistance: 0.035, uncertainty: 0.005 },
      voltageFrom: seed % 4 === 0 ? 'load-terminals' : 'meter-at-module',
      limits: { voltage: 60, current: 12, power: 300 },
      simulation: {
        seed,
        circuit: 'single',
        leads: between(0.03, 0.04),
        modules: [truth],
        instruments: {},
        answers: {},
        faults: [],
      },
    },
  };
}

function limitOf(style: (typeof styles)[number], current: number): ModuleLimit {
  switch (style) {
    case 'foldback':
      return { style, current, shortCircuit: current * 0.3 };
    case 'hiccup':
      return { style, current, period: 0.8 };
    case 'constant-current':
    case 'constant-power':
    case 'latch-off':
      return { style, current };
  }
}
