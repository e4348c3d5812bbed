import { describe, expect, it } from 'vitest';
import { buildStages } from '../../src/arrangement/build-stages.js';
import { partMarks } from '../../src/report/diagram/part-marks.js';
import { formDiodesOf } from '../../src/arrangement/reverse-diodes.js';
import { bricks, valveBench } from './staged.js';
import { changes } from './switched.js';

describe('the parts of a staged supply', () => {
  it('have no mark twice where the file names a diode or a contact as ours are numbered', () => {
    const { contacts, standing, parts } = {
      ...buildStages(
        bricks(),
        valveBench({
          wires: [
            ['W1-', 'in-'],
            ['W2+', 'W3-'],
          ],
          contacts: [
            changes('R1', ['W1+', 'W2+', 'link']),
            changes('S2', ['W2-', 'W1-', 'link']),
            changes('S3', ['in+', 'W2+', 'top']),
          ],
          diodes: [{ name: 'D1', from: 'W3+', to: 'top', forwardVoltage: 0.5 }],
          arrangements: valveBench().arrangements.map((each) => ({
            ...each,
            driven: each.driven.map((name) => (name === 'S1' ? 'R1' : name)),
          })),
        }),
      ),
      contacts: ['R1', 'S2', 'S3'],
    };
    expect(standing).toEqual({ kind: 'may-be-built' });
    const marks = parts.flatMap((part) => part.marks);
    expect(new Set(marks).size).toBe(marks.length);
    // Ours stay as they are drawn.
    for (const ours of ['R1', 'R2', 'R3', 'D1', 'D2', 'D3']) expect(marks).toContain(ours);
    for (const name of contacts) expect(marks.some((mark) => mark.startsWith(name))).toBe(true);
    expect(marks).toContain('D1 of the switching');
    expect(marks).toContain('R1 of the switching');
    expect(marks).toContain('S2');
  });

  it('have at each module the mark that every arrangement is drawn with, and what its diode must bear', () => {
    const uneven = bricks({
      W1: { recommended: 4, usable: 8, dropout: 9 },
      W3: { recommended: 1.2, usable: 1.5, dropout: 1.6 },
    }).reverse();
    const { arrangements, parts } = buildStages(uneven, valveBench());
    const names = uneven.map(({ name }) => name);
    expect(names).toEqual(['W3', 'W2', 'W1']);
    const current = (mark: string): number =>
      Number(
        /([\d.]+) A/.exec(parts.find(({ marks }) => marks.includes(mark))?.ratings.join(' ') ?? '')?.[1],
      );
    const bought = arrangements.flatMap(({ circuit }) => {
      const marks = partMarks(circuit, names).reverse;
      return formDiodesOf(circuit.form, uneven).map(({ module, rating }) => {
        const asked = current(marks.get(module) ?? 'none');
        expect(asked).toBeGreaterThanOrEqual(rating.current);
        return `${module} ${marks.get(module) ?? ''} ${asked}`;
      });
    });
    // Not one weight for all, or a wrong mark would not be seen.
    expect(new Set(bought.map((each) => each.split(' ')[2])).size).toBeGreaterThan(1);
    expect(new Set(bought)).toHaveLength(3);
  });

  it('ask for no heat sink that lets the case get hotter than it may', () => {
    const hottest = 87;
    const resistances = [20, 27, 33, 41, 52, 60].map((full) => {
      const build = buildStages(
        bricks(),
        valveBench({
          linearStage: {
            dropOut: 2,
            current: 5,
            dissipation: { kind: 'by-case', full, fullTo: 25, noneAt: 150, case: hottest },
          },
        }),
      );
      const rating = build.parts.at(-1)?.ratings.find((each) => each.includes('K/W')) ?? '';
      const asked = Number(/^at most ([\d.]+) K\/W/.exec(rating)?.[1]);
      return { asked, most: (hottest - 40) / build.mostDissipation };
    });
    for (const { asked, most } of resistances) {
      expect(asked).toBeLessThanOrEqual(most);
      expect(asked).toBeGreaterThan(0.99 * most);
    }
  });
});
