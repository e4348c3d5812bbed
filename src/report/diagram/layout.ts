import type { Circuit, Form } from '../../arrangement/build.js';
import { formatQuantity } from '../../quantity/format-quantity.js';
import { type PartMarks, partMarks } from './part-marks.js';
import { moved, type Piece, sizes, type Spot } from './pieces.js';
import { roomOfAll } from './room.js';

/** What stands beside the circuit itself. */
export interface Surroundings {
  /** What a module's label says, a few words. */
  readonly plate?: (module: string) => string;
  /** Modules whose 0 V is tied to earth within them. */
  readonly earthed?: ReadonlySet<string>;
  /** What the circuit feeds, where it is not the output itself. */
  readonly feeds?: string;
  /** The modules of every arrangement, where this is one of several: their parts keep their numbers. */
  readonly all?: readonly string[];
}

/** A part of the circuit: its lower end at the origin, its upper one straight above. */
interface Branch {
  readonly pieces: readonly Piece[];
  readonly height: number;
}

const lead = 16;
const gap = 28;

/** All pieces of a circuit: plus at the top, 0 V at the bottom, both brought out to the right. */
export function layout(circuit: Circuit, surroundings: Surroundings = {}): readonly Piece[] {
  const marks = partMarks(circuit, surroundings.all);
  const { pieces, height } = branchOf(circuit.form, (name) => column(name, circuit, marks, surroundings));
  return [...pieces, ...output(roomOfAll(pieces).right, height, surroundings)];
}

function branchOf(form: Form, module: (name: string) => Branch): Branch {
  switch (form.kind) {
    case 'module':
      return module(form.name);
    case 'stack':
      return stacked(form.of.map((each) => branchOf(each, module)));
    case 'group':
      return sideBySide(form.of.map((each) => branchOf(each, module)));
  }
}

/** The lowest first, each on the one before. */
function stacked(branches: readonly Branch[]): Branch {
  return branches.reduce<Branch>(
    (below, branch) => ({
      pieces: [...below.pieces, ...shifted(branch.pieces, 0, -below.height)],
      height: below.height + branch.height,
    }),
    { pieces: [], height: 0 },
  );
}

/** Between two rails, which are joined to what is below and above in their middle. */
function sideBySide(branches: readonly Branch[]): Branch {
  const [only] = branches;
  if (only !== undefined && branches.length === 1) return only;
  const tallest = Math.max(...branches.map(({ height }) => height));
  const places = placesOf(branches);
  const upper = -lead - tallest;
  return {
    height: tallest + 2 * lead,
    pieces: [
      ...branches.flatMap(({ pieces, height }, index) => {
        const x = places[index] ?? 0;
        return [
          ...shifted(pieces, x, -lead),
          ...(height < tallest ? [wire([x, -lead - height], [x, upper])] : []),
        ];
      }),
      ...rail(-lead, 0, places),
      ...rail(upper, upper - lead, places),
    ],
  };
}

/** Where the branches stand, so that none touches its neighbour and the middle of the rails is at 0. */
function placesOf(branches: readonly Branch[]): readonly number[] {
  const places: number[] = [];
  let free = 0;
  for (const { pieces } of branches) {
    const { left, right } = roomOfAll(pieces);
    places.push(free - left);
    free += right - left + gap;
  }
  const middle = ((places[0] ?? 0) + (places.at(-1) ?? 0)) / 2;
  return places.map((place) => place - middle);
}

/** A rail through all places, and the lead from its middle to `outer`. */
function rail(y: number, outer: number, places: readonly number[]): readonly Piece[] {
  const inner = places.slice(1, -1).filter((place) => Math.abs(place) > 0.5);
  return [
    wire([places[0] ?? 0, y], [places.at(-1) ?? 0, y]),
    wire([0, y], [0, outer]),
    ...[0, ...inner].map((x): Piece => ({ kind: 'junction', x, y })),
  ];
}

/** A module with what belongs to it: across its output, and above it in series. */
function column(name: string, circuit: Circuit, marks: PartMarks, surroundings: Surroundings): Branch {
  const isEarthed = surroundings.earthed?.has(name) ?? false;
  // All alike, so that modules side by side stand in one line.
  const below = (surroundings.earthed?.size ?? 0) > 0 ? lead + 18 : lead;
  const { height, width } = sizes.module;
  const plus = -below - height;
  const plate = surroundings.plate?.(name) ?? '';
  const series = inSeries(name, circuit, marks, plus - lead);
  return {
    pieces: [
      wire([0, 0], [0, -below]),
      { kind: 'module', name, plate, x: 0, y: plus + height / 2 },
      wire([0, plus], [0, plus - lead]),
      ...(isEarthed ? toEarth(-below + 8, -width / 2 - 16) : []),
      ...acrossOutput(marks.reverse.get(name), -lead / 2, plus - lead / 2, width / 2 + 18),
      ...series.pieces,
    ],
    height: below + height + lead + series.height,
  };
}

function toEarth(y: number, x: number): readonly Piece[] {
  return [wire([0, y], [x, y], [x, y + 6]), { kind: 'earth', x, y: y + 6 }, { kind: 'junction', x: 0, y }];
}

/** A diode against reversal: it conducts from the 0 V to the plus of its module. */
function acrossOutput(mark: string | undefined, from: number, to: number, x: number): readonly Piece[] {
  if (mark === undefined) return [];
  const middle = (from + to) / 2;
  const half = sizes.diode.height / 2;
  return [
    wire([0, from], [x, from], [x, middle + half]),
    { kind: 'diode', mark, x, y: middle },
    wire([x, middle - half], [x, to], [0, to]),
    { kind: 'junction', x: 0, y: from },
    { kind: 'junction', x: 0, y: to },
  ];
}

/** From `start` upwards: the ballast, then the diode that lets nothing back. */
function inSeries(name: string, { ballast }: Circuit, marks: PartMarks, start: number): Branch {
  const resistor = marks.ballast.get(name);
  const diode = marks.or.get(name);
  const parts: ((y: number) => Piece)[] = [
    ...(resistor === undefined || ballast === undefined
      ? []
      : [
          (y: number): Piece => ({
            kind: 'resistor',
            mark: resistor,
            value: formatQuantity(ballast.resistance, 'resistance'),
            x: 0,
            y,
          }),
        ]),
    ...(diode === undefined ? [] : [(y: number): Piece => ({ kind: 'diode', mark: diode, x: 0, y })]),
  ];
  return parts.reduce<Branch>(
    (below, part) => {
      const bottom = start - below.height;
      const at = part(0);
      const size = at.kind === 'resistor' ? sizes.resistor.height : sizes.diode.height;
      return {
        pieces: [
          ...below.pieces,
          wire([0, bottom], [0, bottom - lead / 2]),
          moved(at, 0, bottom - lead / 2 - size / 2),
          wire([0, bottom - lead / 2 - size], [0, bottom - lead - size]),
        ],
        height: below.height + size + lead,
      };
    },
    { pieces: [], height: 0 },
  );
}

/** Both ends of the circuit brought to the right of all of it, through what it feeds. */
function output(right: number, height: number, { feeds }: Surroundings): readonly Piece[] {
  const top = -height - lead;
  const stage = right + gap + sizes.stage.width / 2;
  const edge = feeds === undefined ? right + gap : stage + sizes.stage.width / 2 + gap;
  return [
    wire([0, 0], [0, lead], [edge, lead]),
    { kind: 'terminal', name: '0 V', x: edge + sizes.terminal.radius, y: lead },
    { kind: 'terminal', name: '+', x: edge + sizes.terminal.radius, y: top },
    ...(feeds === undefined
      ? [wire([0, -height], [0, top], [edge, top])]
      : [
          wire([0, -height], [0, top], [stage - sizes.stage.width / 2, top]),
          { kind: 'stage', name: feeds, x: stage, y: top } as const,
          wire([stage + sizes.stage.width / 2, top], [edge, top]),
          wire([stage, top + sizes.stage.height / 2], [stage, lead]),
          { kind: 'junction', x: stage, y: lead } as const,
        ]),
  ];
}

function wire(...through: readonly Spot[]): Piece {
  return { kind: 'wire', through };
}

function shifted(pieces: readonly Piece[], dx: number, dy: number): readonly Piece[] {
  return pieces.map((piece) => moved(piece, dx, dy));
}
