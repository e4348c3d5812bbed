import { describe, expect, it } from 'vitest';
import { type Circuit, type Form, modulesOf } from '../../../src/arrangement/build.js';
import { circuitDiagram } from '../../../src/report/diagram/circuit-diagram.js';
import { layout, type Surroundings } from '../../../src/report/diagram/layout.js';
import { partMarks } from '../../../src/report/diagram/part-marks.js';
import type { Piece, Room } from '../../../src/report/diagram/pieces.js';
import { roomOf } from '../../../src/report/diagram/room.js';
import fc from '../../property.js';
import { expectedNets, netsOf } from './nets.js';

/** Forms of any depth, each module once. */
const forms = fc
  .letrec<{ form: Shape }>((tie) => ({
    form: fc.oneof(
      { maxDepth: 4, depthSize: 'small' },
      fc.constant({ kind: 'module' } as const),
      fc.record({
        kind: fc.constantFrom('group' as const, 'stack' as const),
        of: fc.array(tie('form'), { minLength: 1, maxLength: 4 }),
      }),
    ),
  }))
  .form.map((shape) => named(shape, { next: 1 }));

type Shape =
  { readonly kind: 'module' } | { readonly kind: 'group' | 'stack'; readonly of: readonly Shape[] };

function named(shape: Shape, counter: { next: number }): Form {
  return shape.kind === 'module'
    ? { kind: 'module', name: `K${counter.next++}` }
    : { kind: shape.kind, of: shape.of.map((each) => named(each, counter)) };
}

const circuits = fc.record({
  form: forms,
  ballast: fc.constantFrom(undefined, { resistance: 0.051, tolerance: 0.05 }),
  reverseDiodes: fc.boolean(),
  orDiodes: fc.boolean(),
});

/** Every other module is earthed within, which takes the most room. */
function surroundings(circuit: Circuit, feeds: boolean): Surroundings {
  const earthed = new Set(modulesOf(circuit.form).filter((_, index) => index % 2 === 0));
  return { plate: () => '15 V, 4 A', earthed, ...(feeds ? { feeds: 'linear stage' } : {}) };
}

describe('a circuit diagram, of any depth', () => {
  it('draws every module and every part once', () => {
    fc.assert(
      fc.property(circuits, fc.boolean(), (circuit, feeds) => {
        const pieces = layout(circuit, surroundings(circuit, feeds));
        const names = pieces.flatMap((piece) => (piece.kind === 'module' ? [piece.name] : []));
        expect(names.sort()).toEqual([...modulesOf(circuit.form)].sort());
        const drawn = pieces.flatMap((piece) =>
          piece.kind === 'resistor' || piece.kind === 'diode' ? [piece.mark] : [],
        );
        const { ballast, reverse, or } = partMarks(circuit);
        expect(drawn.sort()).toEqual([...ballast.values(), ...reverse.values(), ...or.values()].sort());
      }),
    );
  });

  it('has no two things that overlap, their words included', () => {
    fc.assert(
      fc.property(circuits, fc.boolean(), (circuit, feeds) => {
        const things = layout(circuit, surroundings(circuit, feeds)).filter(
          ({ kind }) => kind !== 'wire' && kind !== 'junction',
        );
        const rooms = things.map(roomOf);
        for (const [index, one] of rooms.entries())
          for (const other of rooms.slice(index + 1)) expect(overlap(one, other)).toBe(false);
      }),
    );
  });

  it('leads no wire through a thing or its words', () => {
    fc.assert(
      fc.property(circuits, fc.boolean(), (circuit, feeds) => {
        const pieces = layout(circuit, surroundings(circuit, feeds));
        const rooms = pieces.filter(isThing).map((piece) => inner(roomOf(piece)));
        for (const run of pieces.flatMap(runsOf))
          for (const room of rooms) expect(overlap(run, room)).toBe(false);
      }),
    );
  });

  it('joins all plus and minus ends to the two terminals', () => {
    fc.assert(
      fc.property(circuits, (circuit) => {
        const pieces = layout(circuit, surroundings(circuit, false));
        expect(netsOf(pieces)).toEqual(expectedNets(circuit));
      }),
    );
  });

  it('lies within its view box', () => {
    fc.assert(
      fc.property(circuits, fc.boolean(), (circuit, feeds) => {
        const around = surroundings(circuit, feeds);
        const text = circuitDiagram({ id: 'c', title: 't', description: 'd' }, circuit, around).toString();
        const [x = NaN, y = NaN, width = NaN, height = NaN] = (/viewBox="([^"]*)"/.exec(text)?.[1] ?? '')
          .split(' ')
          .map(Number);
        for (const room of layout(circuit, around).map(roomOf)) {
          expect(room.left).toBeGreaterThanOrEqual(x);
          expect(room.top).toBeGreaterThanOrEqual(y);
          expect(room.right).toBeLessThanOrEqual(x + width);
          expect(room.bottom).toBeLessThanOrEqual(y + height);
        }
      }),
    );
  });

  it('shows earth only at what is earthed', () => {
    const circuit: Circuit = {
      form: { kind: 'group', of: ['K1', 'K2'].map((name) => ({ kind: 'module', name })) },
      ballast: undefined,
      reverseDiodes: false,
      orDiodes: false,
    };
    const earths = (earthed: ReadonlySet<string>): number =>
      layout(circuit, { earthed }).filter(({ kind }) => kind === 'earth').length;
    expect([earths(new Set()), earths(new Set(['K2']))]).toEqual([0, 1]);
  });

  it('numbers the parts of a module alike in every arrangement of the same modules', () => {
    const stack = (...names: string[]): Circuit => ({
      form: { kind: 'stack', of: names.map((name) => ({ kind: 'module', name })) },
      ballast: { resistance: 0.1, tolerance: 0.05 },
      reverseDiodes: true,
      orDiodes: true,
    });
    const { ballast, reverse, or } = partMarks(stack('K3', 'K2'), ['K1', 'K2', 'K3']);
    expect([ballast, reverse, or].map((marks) => [...marks])).toEqual(
      ['R3 R2', 'D3 D2', 'D6 D5'].map((both) => {
        const [third, second] = both.split(' ');
        return [
          ['K3', third],
          ['K2', second],
        ];
      }),
    );
  });

  it('numbers the parts in the order of the modules, diodes across the outputs before those in series', () => {
    const { ballast, reverse, or } = partMarks({
      form: { kind: 'stack', of: ['K2', 'K1'].map((name) => ({ kind: 'module', name })) },
      ballast: { resistance: 0.1, tolerance: 0.05 },
      reverseDiodes: true,
      orDiodes: true,
    });
    expect([...ballast]).toEqual([
      ['K2', 'R1'],
      ['K1', 'R2'],
    ]);
    expect([...reverse]).toEqual([
      ['K2', 'D1'],
      ['K1', 'D2'],
    ]);
    expect([...or]).toEqual([
      ['K2', 'D3'],
      ['K1', 'D4'],
    ]);
  });
});

function isThing({ kind }: Piece): boolean {
  return kind === 'module' || kind === 'stage' || kind === 'resistor' || kind === 'diode' || kind === 'earth';
}

function overlap(one: Room, other: Room): boolean {
  return (
    one.left < other.right - 1e-6 &&
    other.left < one.right - 1e-6 &&
    one.top < other.bottom - 1e-6 &&
    other.top < one.bottom - 1e-6
  );
}

/** Wires end at the edges of things. */
function inner({ left, top, right, bottom }: Room): Room {
  return { left: left + 0.5, top: top + 0.5, right: right - 0.5, bottom: bottom - 0.5 };
}

/** The straight runs of a wire, half as thick as it is drawn. */
function runsOf(piece: Piece): readonly Room[] {
  if (piece.kind !== 'wire') return [];
  return piece.through.slice(1).map(([x1, y1], index) => {
    const [x0, y0] = piece.through[index] ?? [NaN, NaN];
    return {
      left: Math.min(x0, x1) - 0.4,
      right: Math.max(x0, x1) + 0.4,
      top: Math.min(y0, y1) - 0.4,
      bottom: Math.max(y0, y1) + 0.4,
    };
  });
}
