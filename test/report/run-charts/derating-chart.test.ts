import { describe, expect, it } from 'vitest';
import { findingNamed } from '../../../src/analysis/finding.js';
import type { Result } from '../../../src/report/result.js';
import { deratingFigure } from '../../../src/report/run-charts/derating-chart.js';
import { headerOf } from '../../analysis/evidence-of.js';
import fc from '../../property.js';
import { resultOf } from '../fixed-record.js';
import { idle, madeResult, search, upAndBack } from './made-results.js';

/** From where to where each bar goes, in A by the numbers at the axis; what takes nothing away is a line. */
function bars(result: Result) {
  const svg = deratingFigure(result)?.toString() ?? '';
  const ticks = [...svg.matchAll(/class="tick" x="([^"]+)"[^>]*>([^<]+)/g)].map(([, x, text]) => ({
    place: Number(x),
    value: Number(text),
  }));
  const [first, last] = [ticks[0], ticks.at(-1)];
  if (first === undefined || last === undefined) throw new Error('no axis');
  const inAmps = (place: number): number =>
    first.value + ((place - first.place) * (last.value - first.value)) / (last.place - first.place);
  const drawn = [
    ...svg.matchAll(/<rect class="bar" x="([^"]+)"[^>]* width="([^"]+)"|class="whisker" d="M(\S+)/g),
  ];
  return {
    svg: svg.replaceAll('\u00a0', ' '),
    bars: drawn.map(([, x, width = '0', line]) => {
      const start = Number(x ?? line);
      return { from: inAmps(start), to: inAmps(start + Number(width)) };
    }),
  };
}

/** A unit and a half of the drawing is the narrowest bar. */
const drawn = 0.03;

describe('the way from the measured limit to the recommendation', () => {
  it('takes away what each factor takes, each from where the one before it ended', () => {
    const result = resultOf();
    const usable = Number(findingNamed(result.findings, 'usable-current')?.value);
    const recommended = findingNamed(result.findings, 'recommended-current');
    const { bars: all } = bars(result);
    const factors = recommended?.factors ?? [];
    expect(all).toHaveLength(factors.length + 2);
    expect(Math.abs((all[0]?.to ?? NaN) - usable)).toBeLessThan(drawn);
    expect(all[0]?.from).toBeCloseTo(0, 2);
    let current = usable;
    for (const [index, { factor }] of factors.entries()) {
      expect(Math.abs((all[index + 1]?.to ?? NaN) - current)).toBeLessThan(drawn);
      current *= factor;
      expect(Math.abs((all[index + 1]?.from ?? NaN) - current)).toBeLessThan(drawn);
    }
    expect(Math.abs((all.at(-1)?.to ?? NaN) - Number(recommended?.value))).toBeLessThan(drawn);
  });

  it('ends at the product of the factors, whatever the margin', () => {
    fc.assert(
      fc.property(fc.double({ min: 0.3, max: 1, noNaN: true }), (margin) => {
        const result = madeResult([idle, upAndBack, search], headerOf({ margin }));
        const { bars: all, svg } = bars(result);
        // By hand: 5.2 A held and 5.3 A dropped are 5.25 A with a half-width of 0.05 A, rectangular, whose 95 % are
        // 1.96/√3 of it (JCGM 100:2008, 4.3.7); never above the label's 4 A.
        const low = 5.25 - (1.96 / Math.sqrt(3)) * 0.05;
        expect(Math.abs((all.at(-1)?.to ?? NaN) - Math.min(4, low * margin))).toBeLessThan(drawn);
        expect(svg).toContain('nameplate 4 A');
      }),
      { numRuns: 20 },
    );
  });

  it('says every factor, its reason and what is left, and names the label', () => {
    const { svg } = bars(resultOf());
    for (const { name, reason } of findingNamed(resultOf().findings, 'recommended-current')?.factors ?? []) {
      expect(svg).toContain(name);
      expect(svg).toContain(reason.split(' ').slice(0, 4).join(' ').replaceAll('\u00a0', ' '));
    }
    expect(svg).toMatch(/× 0\.8, leaves \d\.\d+ A/);
    expect(svg).toContain('takes nothing away');
    expect(svg).toContain('by its limits alone, continuously');
    expect(bars({ ...resultOf(), outcome: 'conforms' }).svg).toContain('recommended, continuously');
    expect(svg).not.toMatch(/NaN|undefined|Infinity/);
  });

  it('is not there where nothing is recommended', () => {
    expect(deratingFigure(madeResult([idle]))).toBeUndefined();
    expect(deratingFigure({ ...resultOf(), findings: [] })).toBeUndefined();
  });
});
