import { describe, expect, it } from 'vitest';
import type { Finding } from '../../src/analysis/finding.js';
import { compare } from '../../src/judgement/compare.js';
import { movementOf } from '../../src/judgement/movement.js';
import { droopOf, relationOf } from './a-baseline.js';

/** Of the one finding of two records, of which nothing, or this much, is asked. */
function moved(before: Finding | undefined, after: Finding | undefined, share?: number) {
  const side = (finding: Finding | undefined) => ({ modules: ['K1'], findings: finding ? [finding] : [] });
  const name = (before ?? after)?.name ?? '';
  const expected =
    share === undefined
      ? []
      : [{ finding: name, expected: { kind: 'within', limit: { kind: 'share', ratio: share } } } as const];
  const [compared] = compare(side(before), side(after), expected).findings;
  if (compared === undefined) throw new Error('nothing was compared');
  return movementOf(compared);
}

const bare = (value: number): Finding => ({ ...droopOf(value), standardUncertainty: null, interval: null });
const least = (value: number): Finding => ({ ...droopOf(value), bound: 'least' });

describe('a finding', () => {
  // U = √2 · 1.96 · 0.1 mΩ = 0.277 mΩ, by JCGM 100:2008, 5.1.2.
  it.each([
    [0.018, 0.01827, 'as-it-was'],
    [0.018, 0.01829, 'moved'],
    [0.018, 0.01771, 'moved'],
    [0.018, 0.018, 'as-it-was'],
  ] as const)('of %d Ω that is %d Ω now is told by both uncertainties: %s', (then, now, movement) => {
    expect(moved(droopOf(then), droopOf(now))).toBe(movement);
    // Whatever may be.
    expect(moved(droopOf(then), droopOf(now), 0.5)).toBe(movement);
  });

  it('moved from one word to another, unless one of them could not be told', () => {
    expect(moved(relationOf('bonded'), relationOf('isolated'))).toBe('moved');
    expect(moved(relationOf('bonded'), relationOf('bonded'))).toBe('as-it-was');
    expect(moved(relationOf('undetermined'), relationOf('isolated'))).toBe('not-told');
  });

  it('that only one record has is not told', () => {
    expect(moved(undefined, droopOf(0.018))).toBe('not-told');
    expect(moved(droopOf(0.018), undefined, 0.1)).toBe('not-told');
  });

  it('without an uncertainty is taken as it stands, until the tolerance says that it changed', () => {
    expect(moved(bare(0.018), bare(0.019))).toBe('as-it-stands');
    expect(moved(bare(0.018), bare(0.018))).toBe('as-it-was');
    expect(moved(bare(0.018), bare(0.03), 0.1)).toBe('moved');
  });

  it('whose uncertainty one record alone knows is taken as it stands, from either side', () => {
    expect(moved(bare(0.018), droopOf(0.03))).toBe('as-it-stands');
    expect(moved(droopOf(0.018), bare(0.03))).toBe('as-it-stands');
  });

  it('that is chosen, and was a value and is a word now, is taken as it stands', () => {
    const word = (said: string): Finding => ({ ...bare(0), value: said, dimension: null });
    expect(moved(bare(0.22), word('none'))).toBe('as-it-stands');
    expect(moved(word('none'), bare(0.22))).toBe('as-it-stands');
    expect(moved(bare(0.22), word('undetermined'))).toBe('not-told');
    expect(moved(droopOf(0.018), word('none'))).toBe('not-told');
  });

  it('that is a least value without an uncertainty is taken as it stands on the far side', () => {
    const leastBare = (value: number): Finding => ({ ...bare(value), bound: 'least' });
    expect(moved(leastBare(0.02), bare(0.018))).toBe('as-it-stands');
    expect(moved(leastBare(0.02), bare(0.025))).toBe('not-told');
  });

  it('that is a least value moved only where the other lies on its far side', () => {
    expect(moved(least(0.02), droopOf(0.018))).toBe('moved');
    expect(moved(least(0.02), droopOf(0.025))).toBe('not-told');
    expect(moved(droopOf(0.018), least(0.02))).toBe('moved');
    expect(moved(droopOf(0.025), least(0.02))).toBe('not-told');
    expect(moved(least(0.018), least(0.03))).toBe('not-told');
    expect(moved(least(0.03), least(0.018))).toBe('not-told');
    // Less far than the uncertainties leave open.
    expect(moved(least(0.018), droopOf(0.01795))).toBe('not-told');
  });

  it('of which an interval says nothing can not be told', () => {
    const anything: Finding = { ...droopOf(0.018), interval: [-Infinity, Infinity] };
    expect(moved(anything, droopOf(0.03))).toBe('not-told');
  });
});
