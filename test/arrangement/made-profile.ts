import type { LimitStyle, ModuleProfile, Taken } from '../../src/arrangement/module-profile.js';
import type { RecordSource } from '../../src/arrangement/understood-record.js';
import type { EarthRelation } from '../../src/circuit/earth-relation.js';

/** What a test says of a module; the rest is that of a good 15 V, 4 A brick of the nursery. */
export interface MadeOf {
  readonly openCircuit?: number;
  readonly droop?: number;
  readonly usable?: number;
  readonly recommended?: number;
  readonly dropout?: number | undefined;
  readonly shortCircuit?: number;
  readonly style?: LimitStyle | undefined;
  readonly earth?: EarthRelation | undefined;
  readonly outputIsolation?: 'unknown' | number;
  readonly input?: 'mains' | 'dc';
  readonly label?: { readonly voltage: number; readonly current: number };
  /** Standard uncertainties, all of them the module's own. */
  readonly uncertainty?: {
    readonly openCircuit?: number;
    readonly droop?: number;
    readonly current?: number;
  };
}

/** A module's profile as if its records had been read; whole, of today, by real-limit and isolation. */
export function madeProfile(name: string, made: MadeOf = {}): ModuleProfile {
  const uncertainty = { openCircuit: 0.003, droop: 0.0001, current: 0.008, ...made.uncertainty };
  const from = madeSource(name, 'real-limit');
  const dropout = 'dropout' in made ? made.dropout : 5.3;
  const style = 'style' in made ? made.style : 'hiccup';
  const earth = 'earth' in made ? made.earth : 'isolated';
  const amperes = (value: number): Taken => madeTaken(value, uncertainty.current, from);
  return {
    name,
    description: '15 V brick from a retired label printer',
    label: made.label ?? { voltage: 15, current: 4 },
    protectionClass: 'I',
    input: made.input ?? 'mains',
    outputIsolation: made.outputIsolation ?? 500,
    openCircuit: madeTaken(made.openCircuit ?? 15.21, uncertainty.openCircuit, from),
    droop: madeTaken(made.droop ?? 0.018, uncertainty.droop, from),
    usable: amperes(made.usable ?? 5.1),
    recommended: { current: made.recommended ?? 4, why: 'the nameplate sets it', from },
    dropout: dropout === undefined ? undefined : amperes(dropout),
    shortCircuit: made.shortCircuit === undefined ? undefined : amperes(made.shortCircuit),
    limitStyle: style === undefined ? undefined : { word: style, from },
    earth: earth === undefined ? undefined : { relation: earth, from: madeSource(name, 'isolation') },
    concerns: [],
  };
}

export function madeSource(name: string, procedure: string): RecordSource {
  return {
    run: `20261130T091500Z-${name}-${procedure}`,
    procedure,
    began: '2026-11-30T09:15:00.000Z',
    state: 'whole',
    simulated: false,
  };
}

/** A number with one line in its budget; 95 % of a normal distribution. */
export function madeTaken(value: number, uncertainty: number, from: RecordSource): Taken {
  return {
    value,
    interval: [value - 1.959964 * uncertainty, value + 1.959964 * uncertainty],
    budget: [
      {
        name: 'made up',
        kind: 'B',
        uncertainty,
        degreesOfFreedom: Number.POSITIVE_INFINITY,
        shared: undefined,
      },
    ],
    from,
    note: '',
  };
}
