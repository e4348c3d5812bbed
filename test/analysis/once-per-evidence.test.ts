import { describe, expect, it } from 'vitest';
import { curveSeen } from '../../src/analysis/curve-seen.js';
import { oncePerEvidence } from '../../src/analysis/once-per-evidence.js';
import { collected, eventsOf, headerOf } from './evidence-of.js';

const evidence = () => collected(eventsOf([]), headerOf());

describe('what is worked out once for each evidence', () => {
  it('is the same for the same evidence, also where it is nothing, and worked out anew for another', () => {
    let times = 0;
    const seen = oncePerEvidence((): undefined => {
      times += 1;
    });
    const [one, other] = [evidence(), evidence()];
    seen(one);
    seen(one);
    expect(times).toBe(1);
    seen(other);
    expect(times).toBe(2);
  });

  it('is asked for again where it fails', () => {
    const fails = oncePerEvidence(() => {
      throw new Error('no use');
    });
    const one = evidence();
    expect(() => fails(one)).toThrow('no use');
    expect(() => fails(one)).toThrow('no use');
  });

  it('is so of the curve, which findings and three charts rest on', () => {
    const one = evidence();
    expect(curveSeen(one)).toBe(curveSeen(one));
    expect(curveSeen(evidence())).not.toBe(curveSeen(one));
  });
});
