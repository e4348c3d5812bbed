import { clockTime } from '../../quantity/spoken-time.js';
import { leftBy, type ViewedCaution, type ViewedNotice, type ViewState } from '../view-state.js';
import { made, place, show, whenChanged } from './dom.js';
import { cautionWords } from './wording.js';

export function showCautions(state: ViewState): void {
  if (leftBy(state) === undefined) cautionsAsked(state.cautions);
  else cautionsLeft(state.cautions);
}

const cautionsAsked = cautionsShown('Waits to be acknowledged.');
const cautionsLeft = cautionsShown('Was not acknowledged.');

/** @param open what is said of one that nobody acknowledged. */
function cautionsShown(open: string): (cautions: ViewState['cautions']) => void {
  return whenChanged((cautions) => {
    show(place('cautions-section'), cautions.length > 0);
    place('cautions').replaceChildren(...cautions.map((each) => caution(each, open)));
  });
}

function caution({ name, text, by }: ViewedCaution, open: string): HTMLElement {
  const lines = text.split('\n');
  return made(
    'li',
    {},
    made('strong', {}, name.charAt(0).toUpperCase() + name.slice(1).replaceAll('-', ' ')),
    ...(lines.length > 1 ? [made('ol', {}, ...lines.map((line) => made('li', {}, line)))] : lines),
    made('span', { class: by === undefined ? 'by waits' : 'by' }, by === undefined ? open : cautionWords(by)),
  );
}

const shown = new Map<string, HTMLElement>();

/** New ones are put at the end, so that a reader is told of those alone; what the state lets go goes here too. */
export const showNotices: (notices: ViewState['notices']) => void = whenChanged((notices) => {
  show(place('notices-section'), notices.length > 0);
  const keys = new Set(notices.map(keyOf));
  for (const [key, item] of shown) {
    if (keys.has(key)) continue;
    item.remove();
    shown.delete(key);
  }
  for (const notice of notices) {
    if (shown.has(keyOf(notice))) continue;
    const item = made('li', {}, made('time', {}, `at ${clockTime(notice.t)}`), notice.text);
    shown.set(keyOf(notice), item);
    place('notices').append(item);
  }
});

function keyOf({ t, text }: ViewedNotice): string {
  return `${t} ${text}`;
}
