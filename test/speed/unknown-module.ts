import type { ModuleLimit, SimulatedModule } from '../../src/files/simulation-section.js';
import type * as randomness from '../../src/statistics/random.js';
import { built } from './built.js';

const { randomFrom } = await built<typeof randomness>('statistics/random.js');

/** What stands on its label. */
export const rated = { voltage: 15, current: 4 };

/** One that nobody has seen before, the same for the same seed: it drops out somewhere between what is rated and twice that. */
export function randomModule(seed: number): SimulatedModule {
  const random = randomFrom(seed).fork('searched');
  const current = random.uniform(1.02, 1.95) * rated.current;
  const limits: readonly ModuleLimit[] = [
    { style: 'constant-current', current },
    { style: 'foldback', current, shortCircuit: 0.3 * current },
    { style: 'constant-power', current },
    { style: 'hiccup', current, period: 0.8 },
    { style: 'latch-off', current },
  ];
  return {
    name: `S${seed}`,
    openCircuitVoltage: rated.voltage * random.uniform(0.98, 1.03),
    droopResistance: random.uniform(0.006, 0.04),
    limit: limits[Math.floor(random.uniform(0, limits.length))] as ModuleLimit,
    noise: random.uniform(0.0003, 0.003),
    ballast: 0,
    reverseDiode: false,
    earth: 'isolated',
  };
}

/** It lies on a simulated bench, whose instruments are exact. */
export function benchFile(
  seed: number,
  { name, openCircuitVoltage, droopResistance, limit, noise }: SimulatedModule,
) {
  const { style, current } = limit;
  return {
    railproof: 'bench 1',
    name: 'bench of many',
    instruments: {
      load: { driver: 'load-input-scpi', connection: 'simulated:' },
      meter: { driver: 'meter-read-scpi', connection: 'simulated:' },
    },
    leads: { resistance: '35 mΩ', uncertainty: '5 mΩ' },
    'voltage-from': 'meter-at-module',
    limits: { voltage: '60 V', current: '9 A', power: '190 W' },
    simulation: {
      seed,
      circuit: 'single',
      leads: '35 mΩ',
      modules: [
        {
          name,
          'open-circuit-voltage': `${openCircuitVoltage} V`,
          'droop-resistance': `${droopResistance} Ω`,
          limit: {
            style,
            current: `${current} A`,
            ...(style === 'foldback' ? { 'short-circuit': `${limit.shortCircuit} A` } : {}),
            ...(style === 'hiccup' ? { period: `${limit.period} s` } : {}),
          },
          noise: `${noise} V`,
        },
      ],
      instruments: {
        load: { errors: { voltage: {}, current: {}, 'set-current': {} } },
        meter: { errors: { voltage: {} } },
      },
    },
  };
}

export function moduleFile({ name }: SimulatedModule) {
  return {
    railproof: 'module 1',
    name,
    rated: { voltage: `${rated.voltage} V`, current: `${rated.current} A` },
    'protection-class': 'II',
    input: 'mains',
  };
}
