import { describe, expect, it } from 'vitest';
import { axisOf } from '../../../src/report/chart/axis.js';
import type { Frame } from '../../../src/report/chart/frame.js';
import { markBands, roomForMarks, verticalMarks } from '../../../src/report/chart/marks.js';
import { textWidth } from '../../../src/report/chart/text-width.js';
import { together } from '../../../src/report/page/markup.js';
import fc from '../../property.js';

const x = axisOf({ label: 'Current', dimension: 'current', from: 0, to: 8 }, [50, 460], 7);
const y = axisOf({ label: 'Voltage', dimension: 'voltage', from: 0, to: 1 }, [400, 160], 5);
const frame: Frame = { width: 560, height: 450, x, y };

interface Label {
  readonly from: number;
  readonly to: number;
  readonly baseline: number;
}

function labelsOf(text: string): readonly Label[] {
  return [...text.matchAll(/<text[^>]* x="([^"]+)" y="([^"]+)">([^<]*)/g)].map(
    ([, from, baseline, said = '']) => ({
      from: Number(from),
      // The page keeps number and unit together by a space that is as wide as any.
      to: Number(from) + textWidth(said.replaceAll('\u00a0', ' ')),
      baseline: Number(baseline),
    }),
  );
}

describe('marks above a chart', () => {
  it('have labels that never meet, and that stay within the drawing and the room they asked for', () => {
    const mark = fc.record({
      at: fc.double({ min: 0, max: 8, noNaN: true }),
      label: fc.stringMatching(/^[a-z]{1,12} \d{1,3} A$/),
    });
    fc.assert(
      fc.property(fc.array(mark, { maxLength: 7 }), (marks) => {
        const labels = labelsOf(together(verticalMarks(marks, frame)).toString());
        expect(labels).toHaveLength(marks.length);
        const top = y.end - roomForMarks(marks, x, 560) - 6;
        for (const [index, one] of labels.entries()) {
          expect(one.from).toBeGreaterThanOrEqual(0);
          expect(one.to).toBeLessThanOrEqual(560.1);
          expect(one.baseline).toBeGreaterThanOrEqual(top);
          for (const other of labels.slice(index + 1)) {
            const apart = one.from >= other.to || other.from >= one.to;
            expect(apart || Math.abs(one.baseline - other.baseline) >= 16).toBe(true);
          }
        }
      }),
    );
  });

  it('of one place stand one above the other, beside their lines', () => {
    const marks = [
      { at: 4, label: 'rated 4 A' },
      { at: 4, label: 'recommended 4 A' },
    ];
    const labels = labelsOf(together(verticalMarks(marks, frame)).toString());
    expect(new Set(labels.map(({ baseline }) => baseline)).size).toBe(2);
    expect(labels.map(({ from }) => from)).toEqual([x.at(4) + 5, x.at(4) + 5]);
  });

  it('shade what they lie between, and never so little that it can not be seen', () => {
    const between = { from: 2, to: 3, only: true };
    const wide = together(
      markBands([{ at: 2.5, label: 'held 2 A, dropped 3 A', between }], frame),
    ).toString();
    expect(wide).toContain(`x="${x.at(2)}"`);
    expect(wide).toContain(`width="${Math.round((x.at(3) - x.at(2)) * 10) / 10}"`);
    expect(wide).toContain('<title>held 2\u00a0A, dropped 3\u00a0A</title>');
    const narrow = { at: 2, label: 'at 2 A', between: { from: 2, to: 2.0001, only: true } };
    expect(together(markBands([narrow], frame)).toString()).toContain('width="1.5"');
    expect(markBands([{ at: 2, label: 'at 2 A' }], frame)).toEqual([]);
  });
});
