import { describe, expect, it } from 'vitest';
import { settledTemperature } from '../../src/analysis/settled-temperature.js';
import { randomFrom } from '../../src/statistics/random.js';

/** Looks each 10 s of something that goes from 23 °C by 35 K, with a time constant of 720 s. */
function looks(until: number, noise: () => number = () => 0, at = warming) {
  const times = Array.from({ length: Math.floor(until / 10) + 1 }, (_, index) => 10 * index);
  return { times, temperatures: times.map((t) => at(t) + noise()) };
}

const warming = (t: number): number => 23 + 35 * (1 - Math.exp(-t / 720));

function settledOf({ times, temperatures }: ReturnType<typeof looks>) {
  return settledTemperature(times, temperatures, 600);
}

describe('where a temperature goes', () => {
  it('is predicted from the beginning of its way', () => {
    const found = settledOf(looks(1080));
    expect(found?.settled).toBeCloseTo(58, 6);
    expect(found?.timeConstant?.value).toBeCloseTo(720, 4);
    expect(found?.left).toBeCloseTo(35 * Math.exp(-1.5), 6);
  });

  it('lies within its interval about as often as promised, cut short after one and a half time constants', () => {
    let inside = 0;
    const runs = 300;
    for (let seed = 1; seed <= runs; seed += 1) {
      const random = randomFrom(seed);
      const [low, high] = settledOf(looks(1080, () => 0.2 * random.normal()))?.interval ?? [0, 0];
      if (low <= 58 && 58 <= high) inside += 1;
    }
    expect(inside / runs).toBeGreaterThan(0.92);
    expect(inside / runs).toBeLessThan(0.985);
  });

  it('is lopsided the shorter it was watched: more may come than less', () => {
    const random = randomFrom(5);
    const found = settledOf(looks(720, () => 0.2 * random.normal()));
    const [low, high] = found?.interval ?? [0, 0];
    expect(high - (found?.settled ?? 0)).toBeGreaterThan((found?.settled ?? 0) - low);
  });

  it('is wider where neighbouring readings hang together', () => {
    const random = randomFrom(9);
    let wander = 0;
    const hanging = () => (wander = 0.9 * wander + 0.1 * random.normal());
    const dependent = settledOf(looks(2000, hanging));
    const again = randomFrom(9);
    const spread = 0.1 / Math.sqrt(1 - 0.81);
    const independent = settledOf(looks(2000, () => spread * again.normal()));
    expect(dependent?.uncertainty).toBeGreaterThan(2 * (independent?.uncertainty ?? 0));
  });

  it('is found to a kelvin where a probe lags behind at first, and a single curve through all would miss it by far', () => {
    // Two time constants, 720 s and 90 s: flat at first.
    const lagging = (t: number) =>
      58 - 35 * ((720 * Math.exp(-t / 720) - 90 * Math.exp(-t / 90)) / (720 - 90));
    for (const until of [1080, 1800, 2500, 4000]) {
      const random = randomFrom(until);
      const found = settledOf(looks(until, () => 0.05 * random.normal(), lagging));
      if (found === undefined) throw new Error(`nothing found after ${until} s`);
      expect(Math.abs(found.settled - 58)).toBeLessThan(1);
    }
  });

  it('is where it is, for one that does not change any more', () => {
    const random = randomFrom(2);
    const still = looks(
      900,
      () => 0.1 * random.normal(),
      () => 41,
    );
    const found = settledOf(still);
    expect(found?.settled).toBeCloseTo(41, 1);
    expect(found).toMatchObject({ left: 0, timeConstant: undefined });
  });

  it.each([
    [
      'a straight line',
      looks(
        900,
        () => 0,
        (t) => 23 + t / 100,
      ),
    ],
    ['three looks', looks(20)],
    [
      'nothing to see in too short a time',
      looks(
        300,
        () => 0,
        () => 23,
      ),
    ],
  ])('is not told by %s', (_, given) => {
    expect(settledOf(given)).toBeUndefined();
  });
});
