import { element, type Markup, short } from '../page/markup.js';

type Place = readonly [x: number, y: number];

/** Of the head; and how far from the ends the arrow stays, where there is room, so that what stands there is seen. */
const headLength = 7;
const headWidth = 4.5;
const clear = 5;

/** From where something was to where it is now: the one mark by which a chart says that it moved. */
export function shiftArrow(from: Place, to: Place, says: string): Markup {
  const [start, tip] = shortened(from, to);
  const length = Math.hypot(tip[0] - start[0], tip[1] - start[1]);
  const [along, across] = length > 0 ? [(tip[0] - start[0]) / length, (tip[1] - start[1]) / length] : [1, 0];
  const at = (back: number, aside: number): string =>
    `${short(tip[0] - along * back - across * aside)} ${short(tip[1] - across * back + along * aside)}`;
  return element(
    'g',
    { class: 'shift' },
    element('title', {}, says),
    length > headLength &&
      element('path', { class: 'shaft', d: `M${short(start[0])} ${short(start[1])}L${at(headLength, 0)}` }),
    element('path', {
      class: 'head',
      d: `M${at(0, 0)}L${at(headLength, headWidth)}L${at(headLength, -headWidth)}Z`,
    }),
  );
}

function shortened(from: Place, to: Place): readonly [Place, Place] {
  const [x, y] = [to[0] - from[0], to[1] - from[1]];
  const length = Math.hypot(x, y);
  if (length < 2 * clear + headLength) return [from, to];
  const [dx, dy] = [(x / length) * clear, (y / length) * clear];
  return [
    [from[0] + dx, from[1] + dy],
    [to[0] - dx, to[1] - dy],
  ];
}
