import { describe, expect, it } from 'vitest';
import { beatEvery, longestSilence, lookEvery, Vigil, type Word } from '../../src/bench/watchman-vigil.js';

/** Looks at the usual intervals until it takes the runner for hung, or `most` is over. */
function hungAfter(vigil: Vigil, from: number, most: number): number | undefined {
  for (let now = from + lookEvery; now <= from + most; now += lookEvery) {
    if (vigil.hangs(now)) return now - from;
  }
  return undefined;
}

function vigilThatHeard(...heard: readonly Word[]): Vigil {
  const vigil = new Vigil(0);
  for (const word of heard) vigil.hear(word);
  return vigil;
}

describe('a runner counts as hung', () => {
  it('when it stopped beating for some seconds with the input on', () => {
    expect(hungAfter(vigilThatHeard('on'), 0, 60)).toBe(longestSilence + 2 * lookEvery);
  });

  it('from its last word, whatever that was', () => {
    const vigil = vigilThatHeard('on');
    expect(hungAfter(vigil, 0, longestSilence)).toBeUndefined();
    vigil.hear('beat');
    expect(hungAfter(vigil, longestSilence, 60)).toBe(longestSilence + 2 * lookEvery);
  });

  it('never while it beats', () => {
    const vigil = vigilThatHeard('on');
    for (let now = 0; now < 3600; now += beatEvery) {
      vigil.hear('beat');
      expect(vigil.hangs(now)).toBe(false);
    }
  });

  it('never while the input is off, before and after', () => {
    expect(hungAfter(vigilThatHeard('beat'), 0, 3600)).toBeUndefined();
    expect(hungAfter(vigilThatHeard('on', 'off'), 0, 3600)).toBeUndefined();
  });

  it('not because the machine was suspended: an hour away is no silence', () => {
    const vigil = vigilThatHeard('on');
    expect(vigil.hangs(lookEvery)).toBe(false);
    expect(vigil.hangs(3600)).toBe(false);
    vigil.hear('beat');
    expect(hungAfter(vigil, 3600, 60)).toBe(longestSilence + 2 * lookEvery);
  });

  it('also on a machine so busy that the watchman itself hardly gets a turn', () => {
    const vigil = vigilThatHeard('on');
    const looks = [10, 20, 30, 40, 50].map((now) => vigil.hangs(now));
    expect(looks).toEqual([false, false, false, false, true]);
  });
});
