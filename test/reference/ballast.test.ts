import { describe, expect, it } from 'vitest';
import published from '../../fixtures/reference/droop-sharing.json' with { type: 'json' };
import { smallestBallast } from '../../src/circuit/ballast.js';
import { branchCurrents } from '../../src/circuit/shared-load.js';
import { type GroupModule, worstSharing } from '../../src/circuit/worst-sharing.js';

const { entries } = published;

function supply(voltage: number, droop: number, expanded = 0): GroupModule {
  return { openCircuit: { value: voltage, expanded }, droop: { value: droop, expanded: 0 } };
}

function entry<T>(pick: (one: (typeof entries)[number]) => T | undefined): T {
  const found = entries.map(pick).find((one) => one !== undefined);
  if (found === undefined) throw new Error('the entry is missing');
  return found;
}

// Source: Millman's theorem, a textbook formula (the values were also checked in ngspice).
describe('Millman sums', () => {
  it.each(entry((one) => ('checks' in one ? one.checks : undefined)))(
    'for $v0_V V',
    ({ v0_V, total_branch_ohm, load_A, currents_A }) => {
      const branches = v0_V.map((voltage, index) => ({
        voltage,
        resistance: total_branch_ohm[index] ?? Number.NaN,
      }));
      const currents = branchCurrents(branches, load_A);
      currents_A.forEach((current, index) => {
        expect(currents[index]).toBeCloseTo(current, 9);
      });
    },
  );
});

// Source: derived from two Thevenin lines; the first line agrees with the pair that Irving and Jovanović
// published at IEEE APEC 2000 (set points within 0.35 % for a sharing accuracy of 10 %).
describe('set points that are only known to within a share, sharing by droop', () => {
  it.each(entry((one) => ('examples' in one ? one.examples : undefined)))(
    '$set_point_percent % and $droop_percent_of_V % of droop',
    ({ set_point_percent, droop_percent_of_V, max_minus_min_percent }) => {
      const [voltage, full] = [15, 4];
      const module = supply(
        voltage,
        ((droop_percent_of_V / 100) * voltage) / full,
        (set_point_percent / 100) * voltage,
      );
      const group = { modules: [module, module], load: 2 * full, ballast: 0, tolerance: 0 };
      expect(worstSharing(group).imbalance).toBeCloseTo(max_minus_min_percent / 100, 9);
    },
  );
});

describe('ballasts that were published', () => {
  // Source: Electronic Design, Using Copper Traces As Ballast Resistors: 2 mV apart, 10 mΩ each, 2 A.
  it('10 mΩ of copper leave 0.2 A between two outputs that are 2 mV apart', () => {
    const group = {
      modules: [supply(5.002, 0), supply(5, 0)],
      load: 2,
      ballast: 0.01,
      tolerance: 0,
    };
    // The mean is 1 A, so the imbalance is the difference in amperes.
    expect(worstSharing(group).imbalance).toBeCloseTo(0.2, 9);
  });

  // Source: data sheet SBVS395 (July 2022): an offset of 0.2 mV and 0.1 A between two need 2 mΩ at least.
  it('2 mΩ are the least for 0.2 mV and 0.1 A', () => {
    const modules = [supply(3.3002, 0), supply(3.3, 0)];
    const outcome = smallestBallast({ modules, load: 2, imbalance: 0.1, tolerance: 0, series: 'E24' });
    expect(outcome).toMatchObject({ kind: 'found', value: 0.002 });
  });
});
