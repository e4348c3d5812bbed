import { describe, expect, it } from 'vitest';
import { ambientFactor, marginFactor } from '../../src/analysis/derating-factors.js';
import { headerOf } from './evidence-of.js';
import { deratedBy, soakedOf } from './soaked.js';

const ambient = { expected: 45, fullTo: 40, fallingTo: 0.5, at: 60 };

describe('the margin', () => {
  it.each([
    ['no more than ageing', { ambient }, soakedOf(), 'ageing'],
    ['warmer days', {}, soakedOf(), 'ageing and warmer days'],
    ['warming', { ambient }, undefined, 'ageing and warming that no soak measured'],
    ['both', {}, undefined, 'ageing, warmer days, and warming that no soak measured'],
  ])('stands for what nothing else covers: %s', (_, derating, soaked, covers) => {
    expect(marginFactor(deratedBy(derating), soaked)).toEqual({
      name: 'margin',
      factor: 0.8,
      reason: `asked for by the procedure: ${covers}`,
    });
  });
});

describe('the ambient factor', () => {
  it.each([
    [35, 1, '35 °C expected, full load up to 40 °C'],
    [45, 0.875, '45 °C expected: full load up to 40 °C, falling to 50 % at 60 °C'],
    [60, 0.5, '60 °C expected: full load up to 40 °C, falling to 50 % at 60 °C'],
    [61, 0, '61 °C expected: full load up to 40 °C, falling to 50 % at 60 °C, and nothing beyond'],
  ])('for %d °C', (expected, factor, reason) => {
    const header = deratedBy({ ambient: { ...ambient, expected } });
    expect(ambientFactor(header)).toEqual({ name: 'ambient', factor, reason });
  });

  it('without a line is 1, and holds for the surroundings of the test', () => {
    expect(ambientFactor(headerOf())).toEqual({
      name: 'ambient',
      factor: 1,
      reason: 'no derating over temperature was given; it holds for the surroundings of the test',
    });
  });

  it('without a line names what the nameplates allow, the lowest of several', () => {
    const header = headerOf();
    const [module] = header.modules;
    if (module === undefined) throw new Error('no module');
    const labelled = (temperature: number) => ({
      ...module,
      rated: { ...module.rated, ambient: temperature },
    });
    const { reason } = ambientFactor({ ...header, modules: [labelled(50), labelled(40), module] });
    expect(reason).toContain('surroundings of the test; the nameplate allows them up to 40 °C');
  });
});
