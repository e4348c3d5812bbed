import { expression } from '../../src/files/expression.js';
import type { Driver } from '../../src/files/driver.js';
import type { ModuleLimit, SimulatedModule, Simulation } from '../../src/files/simulation-section.js';
import type { Connection } from '../../src/instrument/connection.js';
import { VirtualClock } from '../../src/clock/virtual-clock.js';
import { type OpenedSimulation, openSimulation } from '../../src/simulation/open-simulation.js';

const wire = { sendEnd: '\n', replyEnd: '\n', gap: 0, timeout: 1 };

export const loadDriver: Driver = {
  name: 'load-input-scpi',
  role: 'load',
  summary: '',
  wire,
  identify: '*IDN?',
  errors: { kind: 'queue', ask: 'SYST:ERR?', clear: expression('^[+-]?0\\b'), afterwards: [] },
  remote: [],
  local: [],
  prepare: [{ text: '*CLS' }],
  release: [],
  operations: {
    'make-safe': [{ text: 'INP OFF' }],
    'input-on': [{ text: 'INP ON' }],
    'input-off': [{ text: 'INP OFF' }],
    'current-mode': [{ text: 'FUNC CURR' }],
    'voltage-mode': [{ text: 'FUNC VOLT' }],
    'set-current': [{ text: 'CURR {amps}' }],
    'set-voltage': [{ text: 'VOLT {volts}' }],
    'protect-current': [{ text: 'CURR:PROT {amps}' }],
  },
  readings: {
    voltage: { kind: 'number', ask: [{ text: 'MEAS:VOLT?' }], dimension: 'voltage', factor: 1 },
    current: { kind: 'number', ask: [{ text: 'MEAS:CURR?' }], dimension: 'current', factor: 1 },
    'input-state': { kind: 'flag', ask: [{ text: 'INP?' }], trueWhen: expression('^(1|ON)$') },
  },
  settling: 0.02,
  ratings: { voltage: 150, current: 40, power: 200, leastVoltage: 1 },
  accuracy: { voltage: { ofReading: 0.001, fixed: 0.01 }, current: { ofReading: 0.002, fixed: 0.01 } },
};

export const meterDriver: Driver = {
  name: 'meter-read-scpi',
  role: 'meter',
  summary: '',
  wire,
  identify: '*IDN?',
  errors: { kind: 'queue', ask: 'SYST:ERR?', clear: expression('^[+-]?0\\b'), afterwards: [] },
  remote: [],
  local: [],
  prepare: [{ text: '*CLS' }, { text: 'CONF:VOLT:DC' }],
  release: [],
  operations: { 'make-safe': [{ text: '*CLS' }] },
  readings: { voltage: { kind: 'number', ask: [{ text: 'READ?' }], dimension: 'voltage', factor: 1 } },
  settling: 0,
  ratings: { voltage: 300 },
  accuracy: { voltage: { ofReading: 0.0005, fixed: 0.003, resolution: 0.001 } },
};

const none = { gain: 0, offset: 0, resolution: 0 };

/** Instruments without errors, for what is asserted of the module alone. */
export const exactInstruments: Simulation['instruments'] = {
  load: { errors: { voltage: none, current: none, power: none, 'set-current': none, 'set-voltage': none } },
  meter: { errors: { voltage: none } },
};

export function k1(limit: ModuleLimit, change: Partial<SimulatedModule> = {}): SimulatedModule {
  return {
    name: 'K1',
    openCircuitVoltage: 15.21,
    droopResistance: 0.018,
    limit,
    noise: 0,
    ballast: 0,
    reverseDiode: false,
    earth: 'bonded',
    ...change,
  };
}

export const hiccup: ModuleLimit = { style: 'hiccup', current: 5.3, period: 0.8 };

export function simulationOf(module: SimulatedModule, change: Partial<Simulation> = {}): Simulation {
  return {
    seed: 7,
    circuit: 'single',
    leads: 0.035,
    modules: [module],
    instruments: exactInstruments,
    answers: {},
    faults: [],
    ...change,
  };
}

export interface WiredBench extends OpenedSimulation {
  readonly clock: VirtualClock;
  readonly load: Connection;
  readonly meter: Connection;
  /** Sends a message to the load and lets 100 ms pass, so that all has settled. */
  readonly tell: (message: string) => Promise<void>;
  readonly readVoltage: () => Promise<number>;
  readonly readCurrent: () => Promise<number>;
}

/** A bench met by bytes only, as everything above it will. */
export function wireUp(simulation: Simulation): WiredBench {
  const clock = new VirtualClock(new Date('2026-11-20T09:00:00Z'));
  const opened = openSimulation({ simulation, clock, drivers: { load: loadDriver, meter: meterDriver } });
  const load = opened.connect('load', loadDriver);
  const meter = opened.connect('meter', meterDriver);
  return {
    ...opened,
    clock,
    load,
    meter,
    tell: async (message) => {
      await say(load, message);
      await clock.sleep(0.1);
    },
    readVoltage: async () => Number(await ask(meter, 'READ?')),
    readCurrent: async () => Number(await ask(load, 'MEAS:CURR?')),
  };
}

export async function say(connection: Connection, message: string): Promise<void> {
  await connection.write(new TextEncoder().encode(`${message}\n`));
}

export async function ask(connection: Connection, message: string): Promise<string> {
  await say(connection, message);
  const bytes = await connection.receive(1);
  if (bytes === undefined) throw new Error(`no reply to ${message}`);
  return new TextDecoder().decode(bytes).trim();
}
