import { describe, expect, it } from 'vitest';
import { measured } from '../../src/analysis/finding.js';
import { howItFailed } from '../../src/analysis/group-failure.js';
import { heldLooks } from '../../src/analysis/held-looks.js';
import { groupLooks } from '../../src/analysis/module-currents.js';
import { promised } from '../../src/analysis/promised-errors.js';
import { type Brick, circuitEvidence, circuitHeader, sharingPoints } from './circuit-evidence.js';
import { evenly } from './evidence-of.js';

const alike: Brick = { voltage: 15.21, droop: 0.018, ballast: 0.05 };

/** Two bricks that held up to 7 A, of which the group then dropped out. */
function failed(high: number, dropout: number, style: string | undefined): string {
  const header = circuitHeader({ circuit: 'parallel', ballasts: { K1: [0.05, 0], K2: [0.05, 0] } });
  const points = sharingPoints({ K1: { ...alike, voltage: high }, K2: alike }, evenly(1, 7, 7));
  const looks = groupLooks(circuitEvidence(header, points));
  return howItFailed(header, {
    held: heldLooks(header, looks),
    looks,
    saturated: undefined,
    dropout: measured('dropout-current', 'current', dropout, [promised('the load', 0.01)], { step: 2 }),
    style,
  });
}

describe('how a group failed', () => {
  it('is at the sum of all limits where the current stays under overload: nobody leaves', () => {
    expect(failed(15.25, 7.5, 'constant-current')).toBe(
      'it fails when all of them are at their limits: none leaves, the current stays; at 7.00 A they carried K1 3.79 A, K2 3.21 A',
    );
    // K1 carries all of what was looked at, yet it is not what the group fails at.
    expect(failed(15.9, 7.5, 'constant-current')).not.toContain('what one of them holds');
  });

  it.each(['hiccup', 'foldback', 'latch-off'])('is by one that leaves, of the style %s', (style) => {
    expect(failed(15.25, 7.5, style)).toBe(
      "it fails when one of them leaves at its limit and the rest can't carry it, most likely K1, which was worked hardest; at 7.00 A they carried K1 3.79 A, K2 3.21 A",
    );
  });

  it('does not guess who left where they carried about the same', () => {
    expect(failed(15.22, 7.5, 'hiccup')).toBe(
      "it fails when one of them leaves at its limit and the rest can't carry it; at 7.00 A they carried K1 3.57 A, K2 3.43 A",
    );
  });

  it('is at about what one of them holds, only where it was looked at near there', () => {
    expect(failed(15.9, 7.5, 'hiccup')).toMatch(/^it fails at about what one of them holds: K1 hogs/);
    expect(failed(15.9, 12, 'hiccup')).toMatch(/^it fails when one of them leaves/);
  });

  it('is not known where nothing tells: then only what each carried', () => {
    expect(failed(15.25, 7.5, undefined)).toBe('at 7.00 A they carried K1 3.79 A, K2 3.21 A');
    expect(failed(15.25, 7.5, 'undetermined')).toBe('at 7.00 A they carried K1 3.79 A, K2 3.21 A');
  });
});
