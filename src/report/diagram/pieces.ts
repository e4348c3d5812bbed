/** What a circuit diagram is made of, in units of the drawing, y downwards. */
export type Piece =
  /** A module: its plus at the middle of its upper side, its minus at the middle of the lower one. */
  | {
      readonly kind: 'module';
      readonly name: string;
      readonly plate: string;
      readonly x: number;
      readonly y: number;
    }
  /** Something that is only named, between what is left and right of it. */
  | { readonly kind: 'stage'; readonly name: string; readonly x: number; readonly y: number }
  /** Upright; the place is its middle. */
  | {
      readonly kind: 'resistor';
      readonly mark: string;
      readonly value: string;
      readonly x: number;
      readonly y: number;
    }
  /** Upright, conducting upwards; the place is its middle. */
  | { readonly kind: 'diode'; readonly mark: string; readonly x: number; readonly y: number }
  | { readonly kind: 'wire'; readonly through: readonly Spot[] }
  | { readonly kind: 'junction'; readonly x: number; readonly y: number }
  | { readonly kind: 'terminal'; readonly name: string; readonly x: number; readonly y: number }
  | { readonly kind: 'earth'; readonly x: number; readonly y: number };

export type Spot = readonly [x: number, y: number];

/** A rectangle by its edges. */
export interface Room {
  readonly left: number;
  readonly top: number;
  readonly right: number;
  readonly bottom: number;
}

export const sizes = {
  module: { width: 104, height: 74 },
  stage: { width: 116, height: 44 },
  resistor: { width: 13, height: 36 },
  diode: { width: 18, height: 18 },
  terminal: { radius: 4 },
  earth: { width: 22, height: 12 },
} as const;

/** The same piece elsewhere. */
export function moved(piece: Piece, dx: number, dy: number): Piece {
  return piece.kind === 'wire'
    ? { ...piece, through: piece.through.map(([x, y]): Spot => [x + dx, y + dy]) }
    : { ...piece, x: piece.x + dx, y: piece.y + dy };
}
