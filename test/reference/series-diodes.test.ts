import { describe, expect, it } from 'vitest';
import sharing from '../../fixtures/reference/sharing-spice.json' with { type: 'json' };
import type { LimitStyle, ModuleProfile } from '../../src/arrangement/module-profile.js';
import { reverseDiodesOf } from '../../src/arrangement/reverse-diodes.js';
import type { CurveLimit } from '../../src/circuit/module-curve.js';
import { type Link, stringPoint } from '../../src/circuit/series-string.js';
import fc from '../property.js';
import { madeProfile } from '../arrangement/made-profile.js';

// Source: own circuits, solved with ngspice 39 (Debian); see test/reference/sharing-networks.test.ts.
describe.each(sharing.series)(
  'the diodes of a string against ngspice: $name ($note)',
  ({ modules, points }) => {
    const profiles = modules.map((module, index) => {
      const name = `K${index + 1}`;
      if (!('v0_V' in module)) return madeProfile(name);
      const { v0_V: voltage = 0, droop_ohm: droop = 0, current_limit_A: limit = 0 } = module;
      const knee = voltage - droop * limit;
      const shortCircuit = limit + knee / (module.slope_beyond_limit_ohm ?? NaN);
      return madeProfile(name, {
        openCircuit: voltage,
        droop,
        dropout: limit,
        usable: limit,
        shortCircuit,
        style: 'constant-current',
      });
    });
    const diodes = reverseDiodesOf(profiles);

    it('none is asked to carry more than it is said to, nor to make more heat', () => {
      for (const { diode_A: currents, module_V: voltages } of points) {
        for (const [index, current] of currents.entries()) {
          const { current: most = NaN, heat = NaN } = diodes[index] ?? {};
          expect(current).toBeLessThanOrEqual(most);
          expect(current * -Math.min(0, voltages[index] ?? 0)).toBeLessThanOrEqual(heat);
        }
      }
    });
  },
);

const silicon = { saturationCurrent: 1e-14, idealityFactor: 1, temperature: 300.15 };

interface Some {
  readonly voltage: number;
  readonly limit: number;
  readonly style: Extract<LimitStyle, 'constant-current' | 'foldback'>;
}
const some: fc.Arbitrary<Some> = fc.record({
  voltage: fc.double({ min: 5, max: 24, noNaN: true }),
  limit: fc.double({ min: 1, max: 8, noNaN: true }),
  style: fc.constantFrom('constant-current', 'foldback'),
});
const droop = 0.02;

function profileOf({ voltage, limit, style }: Some, index: number): ModuleProfile {
  const shortCircuit = style === 'foldback' ? limit * 0.3 : limit;
  return madeProfile(`K${index + 1}`, {
    openCircuit: voltage,
    droop,
    usable: limit,
    dropout: limit,
    shortCircuit,
    style,
    uncertainty: { current: 1e-9 },
  });
}

function linkOf({ voltage, limit, style }: Some): Link {
  const curve: CurveLimit =
    style === 'foldback' ? { style, current: limit, shortCircuit: limit * 0.3 } : { style, current: limit };
  return {
    source: {
      kind: 'module',
      curve: { openCircuitVoltage: voltage, droopResistance: droop, limit: curve },
    },
    diode: silicon,
  };
}

const dead: Link = {
  source: { kind: 'off', outputResistance: Number.POSITIVE_INFINITY },
  diode: silicon,
};

/** Into a resistor, at the string's upper end. */
const into = (resistance: number) => ({ kind: 'resistance' as const, resistance, leads: 0 });

describe('the diode of a module that has failed open', () => {
  it('carries no more than it is said to, whatever the load: the other modules of any limits', () => {
    fc.assert(
      fc.property(
        fc.array(some, { minLength: 2, maxLength: 4 }),
        fc.nat(),
        fc.double({ min: 0, max: 100, noNaN: true }),
        (strings, which, load) => {
          const failed = which % strings.length;
          const links = strings.map((each, index) => (index === failed ? dead : linkOf(each)));
          const { links: found } = stringPoint(links, into(load));
          const { current = NaN } = reverseDiodesOf(strings.map(profileOf))[failed] ?? {};
          expect(found[failed]?.diodeCurrent).toBeLessThanOrEqual(current + 1e-6);
        },
      ),
    );
  });

  it('carries what the strongest of the others gives where the output is shorted, not what the weakest does', () => {
    const strings: readonly Some[] = [
      { voltage: 15.2, limit: 5, style: 'constant-current' },
      { voltage: 15.2, limit: 3, style: 'constant-current' },
      { voltage: 15.2, limit: 7, style: 'constant-current' },
    ];
    const [, weak, strong] = strings.map(linkOf);
    if (weak === undefined || strong === undefined) throw new Error('no links');
    const { links } = stringPoint([dead, weak, strong], into(0));
    expect(links[0]?.diodeCurrent).toBeCloseTo(7, 6);
    expect(links[1]?.diodeCurrent).toBeCloseTo(4, 6);
    expect(reverseDiodesOf(strings.map(profileOf))[0]?.current).toBeCloseTo(7, 6);
  });
});

describe('a failed output without its diode', () => {
  it('stands backwards across all that the others give', () => {
    const strings: readonly Some[] = [15.2, 15.1, 15.3].map((voltage) => ({
      voltage,
      limit: 5,
      style: 'constant-current',
    }));
    const { source } = dead;
    const links = strings.map((each, index): Link => (index === 1 ? { source } : linkOf(each)));
    const { links: found } = stringPoint(links, into(10));
    const { voltage = NaN } = reverseDiodesOf(strings.map(profileOf))[1] ?? {};
    expect(-(found[1]?.voltage ?? NaN)).toBeCloseTo(30.5, 9);
    expect(voltage).toBeGreaterThan(30.5);
    expect(voltage).toBeLessThan(30.52);
  });
});
