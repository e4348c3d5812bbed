import { type Circuit, type Form } from '../../../src/arrangement/build.js';
import { partMarks } from '../../../src/report/diagram/part-marks.js';
import { type Piece, sizes, type Spot } from '../../../src/report/diagram/pieces.js';

/** Which pins are joined: sets of their names, in a settled order. */
export type Nets = readonly (readonly string[])[];

/** As it is drawn: an end of a wire joins whatever it lies on; wires that merely cross are not joined. */
export function netsOf(pieces: readonly Piece[]): Nets {
  const wires = pieces.flatMap((piece) => (piece.kind === 'wire' ? [piece.through] : []));
  const pins = pieces.flatMap(pinsOf);
  const joined = new Joined();
  wires.forEach((wire, index) => {
    for (const end of [wire[0], wire.at(-1)])
      wires.forEach((other, at) => {
        if (end !== undefined && liesOn(end, other)) joined.join(`wire ${index}`, `wire ${at}`);
      });
  });
  for (const { name, spot } of pins)
    wires.forEach((wire, index) => {
      if (liesOn(spot, wire)) joined.join(name, `wire ${index}`);
    });
  return joined.of(pins.map(({ name }) => name));
}

/** As the circuit says. */
export function expectedNets(circuit: Circuit): Nets {
  const joined = new Joined();
  const pins = ['+', '0 V'];
  const marks = partMarks(circuit);
  const branch = (form: Form): { bottom: string; top: string } => {
    if (form.kind === 'module') return module(form.name);
    const branches = form.of.map(branch);
    const first = branches[0] ?? { bottom: '', top: '' };
    for (const [index, { bottom, top }] of branches.entries()) {
      const before = branches[index - 1];
      if (before === undefined) continue;
      if (form.kind === 'stack') joined.join(before.top, bottom);
      else {
        joined.join(before.top, top);
        joined.join(before.bottom, bottom);
      }
    }
    return { bottom: first.bottom, top: branches.at(-1)?.top ?? '' };
  };
  const module = (name: string): { bottom: string; top: string } => {
    const [minus, plus] = [`${name}-`, `${name}+`];
    pins.push(minus, plus);
    const across = marks.reverse.get(name);
    if (across !== undefined) {
      pins.push(`${across} lower`, `${across} upper`);
      joined.join(minus, `${across} lower`);
      joined.join(plus, `${across} upper`);
    }
    const above = [marks.ballast.get(name), marks.or.get(name)].filter((mark) => mark !== undefined);
    const top = above.reduce((end, mark) => {
      pins.push(`${mark} lower`, `${mark} upper`);
      joined.join(end, `${mark} lower`);
      return `${mark} upper`;
    }, plus);
    return { bottom: minus, top };
  };
  const { bottom, top } = branch(circuit.form);
  joined.join(bottom, '0 V');
  joined.join(top, '+');
  return joined.of(pins);
}

function pinsOf(piece: Piece): readonly { readonly name: string; readonly spot: Spot }[] {
  switch (piece.kind) {
    case 'module': {
      const half = sizes.module.height / 2;
      return [
        { name: `${piece.name}+`, spot: [piece.x, piece.y - half] },
        { name: `${piece.name}-`, spot: [piece.x, piece.y + half] },
      ];
    }
    case 'resistor':
    case 'diode': {
      const half = sizes[piece.kind].height / 2;
      return [
        { name: `${piece.mark} lower`, spot: [piece.x, piece.y + half] },
        { name: `${piece.mark} upper`, spot: [piece.x, piece.y - half] },
      ];
    }
    case 'terminal':
      return [{ name: piece.name, spot: [piece.x - sizes.terminal.radius, piece.y] }];
    case 'wire':
    case 'junction':
    case 'stage':
    case 'earth':
      return [];
  }
}

function liesOn([x, y]: Spot, wire: readonly Spot[]): boolean {
  const near = (value: number, one: number, other: number): boolean =>
    value >= Math.min(one, other) - 1e-6 && value <= Math.max(one, other) + 1e-6;
  return wire.slice(1).some(([x1, y1], index) => {
    const [x0, y0] = wire[index] ?? [NaN, NaN];
    return near(x, x0, x1) && near(y, y0, y1);
  });
}

/** Sets that grow together. */
class Joined {
  readonly #above = new Map<string, string>();

  join(one: string, other: string): void {
    const [a, b] = [this.#root(one), this.#root(other)];
    if (a !== b) this.#above.set(a, b);
  }

  of(names: readonly string[]): Nets {
    const sets = new Map<string, string[]>();
    for (const name of names) {
      const root = this.#root(name);
      sets.set(root, [...(sets.get(root) ?? []), name]);
    }
    return [...sets.values()].map((set) => set.sort()).sort((a, b) => ((a[0] ?? '') < (b[0] ?? '') ? -1 : 1));
  }

  #root(name: string): string {
    const above = this.#above.get(name);
    return above === undefined ? name : this.#root(above);
  }
}
