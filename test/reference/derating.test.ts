import { describe, expect, it } from 'vitest';
import published from '../../fixtures/reference/derating.json' with { type: 'json' };
import { allowedInAir } from '../../src/analysis/ambient-line.js';
import { timesLonger } from '../../src/analysis/ten-kelvin-rule.js';

const [guide, common, product] = published.temperature_derating;

// Source: a public derating guide: full load to 50 °C, then 2.5 % less for each degree, 50 % at 70 °C.
describe('the published line from 50 °C to 70 °C', () => {
  const line = { fullTo: 50, fallingTo: 0.5, at: 70 };

  it.each(guide?.samples ?? [])('leaves $load_percent % at $t_C °C', ({ t_C, load_percent }) => {
    expect(allowedInAir(t_C, line)).toBeCloseTo(load_percent / 100, 12);
  });

  it('falls by 2.5 % for each degree', () => {
    const { slope_percent_per_C = Number.NaN } = guide?.rules?.[0] ?? {};
    expect(allowedInAir(61, line) - allowedInAir(60, line)).toBeCloseTo(slope_percent_per_C / 100, 12);
  });
});

// Source: the common shape of data sheets, from memory.
describe('the common line from 40 °C to 60 °C', () => {
  const line = { fullTo: 40, fallingTo: 0.5, at: 60 };

  it.each(common?.samples ?? [])('leaves $load_percent % at $t_C °C', ({ t_C, load_percent }) => {
    expect(allowedInAir(t_C, line)).toBeCloseTo(load_percent / 100, 12);
  });
});

// Source: technical Q&A a0049 of a maker of power supplies: 73 % by the air and 90 % by the input make 65.7 %.
it('two derating curves multiply', () => {
  const inputs = product?.inputs ?? { ambient_percent: Number.NaN, input_voltage_percent: Number.NaN };
  // A line that passes through the published 73 %.
  const byAir = allowedInAir(50.8, { fullTo: 40, fallingTo: 0.5, at: 60 });
  expect(byAir * 100).toBeCloseTo(inputs.ambient_percent, 10);
  expect(byAir * inputs.input_voltage_percent).toBeCloseTo(product?.published_output_percent ?? 0, 10);
});

describe('the ten-kelvin rule', () => {
  const life = published.electrolytic_capacitor_life;

  // Source: makers' public notes, three of which agree.
  it.each(life.samples)('gives $life_h h at $T_C °C', ({ L0_h, T0_C, T_C, life_h }) => {
    expect(L0_h * timesLonger(T0_C - T_C)).toBeCloseTo(life_h, 9);
  });

  // Source: technical Q&A a0057 of a maker of power supplies: a day of 45, 55 and 65 °C ages like 57.2 °C.
  it('ages a day of three temperatures like one of 57.2 °C', () => {
    const { inputs, published_output, recomputed } = life.published_example;
    for (const { T_C, life_h } of inputs.profile) {
      expect(inputs.L0_h * timesLonger(inputs.T0_C - T_C)).toBeCloseTo(life_h, 9);
    }
    const hours = inputs.profile.reduce((sum, { hours_per_day }) => sum + hours_per_day, 0);
    const aged = inputs.profile.reduce(
      (sum, { T_C, hours_per_day }) => sum + hours_per_day / (inputs.L0_h * timesLonger(inputs.T0_C - T_C)),
      0,
    );
    expect(hours / aged).toBeCloseTo(recomputed.life_h, 9);
    const equivalent = recomputed.equivalent_temperature_C;
    expect(equivalent.toFixed(1)).toBe(published_output.equivalent_temperature_C.toFixed(1));
    expect(inputs.L0_h * timesLonger(inputs.T0_C - equivalent)).toBeCloseTo(hours / aged, 6);
  });

  // Source: the Arrhenius law at the activation energies in the fixture (computed).
  it('is an Arrhenius law of some 0.6 eV near 45 °C, and of 0.94 eV near 100 °C roughly', () => {
    const near = (Ea: number, low: number) =>
      published.arrhenius.samples.find(({ Ea_eV, T_low_C }) => Ea_eV === Ea && T_low_C === low)?.AF;
    expect(near(0.6, 40)).toBeCloseTo(timesLonger(10), 1);
    expect(Math.abs((near(0.94, 95) ?? 0) - timesLonger(10))).toBeLessThan(0.25);
  });
});
