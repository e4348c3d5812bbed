import { describe, expect, it } from 'vitest';
import { memberLook } from '../../../src/report/run-charts/member-look.js';

describe('the members of a circuit', () => {
  it('are told apart without their colour up to the eighth, and by both up to the twenty-fourth', () => {
    const looks = Array.from({ length: 24 }, (_, place) => memberLook(place));
    expect(new Set(looks.slice(0, 8).map(({ shape }) => shape)).size).toBe(8);
    expect(new Set(looks.map(({ shape, look }) => `${shape} ${look % 6}`)).size).toBe(24);
  });
});
