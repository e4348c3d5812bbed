import { lineHeight, textWidth } from '../chart/text-width.js';
import { type Piece, type Room, sizes } from './pieces.js';

/** From the middle of an upright part to what is written beside it. */
export const besideParts = 14;

/** What a piece takes up with all that is written at it. */
export function roomOf(piece: Piece): Room {
  switch (piece.kind) {
    case 'module':
    case 'stage':
      return around(piece, sizes[piece.kind].width / 2, sizes[piece.kind].height / 2);
    case 'resistor':
      return withText(around(piece, sizes.resistor.width / 2, sizes.resistor.height / 2), piece.x, [
        piece.mark,
        piece.value,
      ]);
    case 'diode':
      return withText(around(piece, sizes.diode.width / 2, sizes.diode.height / 2), piece.x, [piece.mark]);
    case 'terminal': {
      const room = around(piece, sizes.terminal.radius, lineHeight / 2);
      return { ...room, right: room.right + 6 + textWidth(piece.name) };
    }
    case 'earth':
      return { ...around(piece, sizes.earth.width / 2, 0), bottom: piece.y + sizes.earth.height };
    case 'junction':
      return around(piece, 3, 3);
    case 'wire': {
      const xs = piece.through.map(([x]) => x);
      const ys = piece.through.map(([, y]) => y);
      return {
        left: Math.min(...xs),
        top: Math.min(...ys),
        right: Math.max(...xs),
        bottom: Math.max(...ys),
      };
    }
  }
}

/** The room of several pieces together. */
export function roomOfAll(pieces: readonly Piece[]): Room {
  const rooms = pieces.map(roomOf);
  return {
    left: Math.min(...rooms.map(({ left }) => left)),
    top: Math.min(...rooms.map(({ top }) => top)),
    right: Math.max(...rooms.map(({ right }) => right)),
    bottom: Math.max(...rooms.map(({ bottom }) => bottom)),
  };
}

function around({ x, y }: { readonly x: number; readonly y: number }, across: number, along: number): Room {
  return { left: x - across, top: y - along, right: x + across, bottom: y + along };
}

function withText(room: Room, x: number, texts: readonly string[]): Room {
  return { ...room, right: x + besideParts + Math.max(...texts.map(textWidth)) };
}
