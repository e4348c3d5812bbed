import type { ViewedEnd, ViewedLeft } from '../view-state.js';
import { alarm, tell } from './announce.js';
import { drawn, made, place, show, whenChanged, write } from './dom.js';
import type { Line } from './silence.js';
import { busyWords, type EndShown, endShown, isWorkedOut } from './wording.js';

const signs: Readonly<Record<EndShown['look'], { readonly outline: string; readonly mark: string }>> = {
  good: { outline: 'M4 30a26 26 0 1 0 52 0a26 26 0 1 0 -52 0z', mark: 'M18 31L27 40L43 21' },
  bad: { outline: 'M19 4H41L56 19V41L41 56H19L4 41V19Z', mark: 'M16 30H44' },
  unsure: { outline: 'M30 5L57 54H3Z', mark: 'M23 29a7 7 0 1 1 9.5 6.5c-2 .8 -2.5 2 -2.5 4M30 46v1' },
  plain: { outline: 'M8 8H52V52H8Z', mark: 'M16 30H44' },
};

/** How the bench was left, as soon as that is known, and then what the run came to. */
export function showEnding(left: ViewedLeft | ViewedEnd | undefined, line: Line): void {
  lay(left);
  show(place('ending-busy'), line.kind === 'working-out');
  write(place('ending-busy'), busyWords);
}

const lay: (left: ViewedLeft | ViewedEnd | undefined) => void = whenChanged((left) => {
  const section = place('ending');
  show(section, left !== undefined);
  if (left === undefined) return;
  const { how } = left;
  const { heading, look } = endShown(left);
  section.className = `ending ${look}`;
  const { outline, mark } = signs[look];
  place('ending-sign').replaceChildren(
    drawn('path', { class: 'outline', d: outline }),
    drawn('path', { class: 'mark', d: mark }),
  );
  write(place('ending-heading'), heading);
  place('ending-text').replaceChildren(...words(left));
  const unsafe = left.safety.filter(({ confirmed }) => !confirmed);
  if (unsafe.length > 0) {
    alarm(unsafe.map(({ text }) => text).join(' '));
    tell('The run is over.');
  } else {
    const safe = left.safety.map(({ text }) => text);
    const over = how === 'completed' && !isWorkedOut(left) ? heading : `The run is over: ${heading}`;
    tell([`${over}.`, ...safe, ...(isWorkedOut(left) ? [] : [busyWords])].join(' '));
  }
});

/** What a person must see to first, then what it came to, then where it is kept. */
function words(left: ViewedLeft | ViewedEnd): readonly HTMLElement[] {
  const { how, reason, safety, record } = left;
  const unsafe = safety.filter(({ confirmed }) => !confirmed);
  const safe = safety.filter(({ confirmed }) => confirmed);
  return [
    ...unsafe.map(({ text }) => made('div', { class: 'safety unsafe' }, ...paragraphs(text))),
    ...(unsafe.length > 0 && how !== 'completed'
      ? [
          made(
            'p',
            {},
            `The run ${how === 'failed' ? 'failed' : 'was stopped'}${reason === null ? '' : `: ${reason}`}.`,
          ),
        ]
      : []),
    ...safe.map(({ text }) => made('p', { class: 'safety' }, text)),
    ...(isWorkedOut(left) ? left.answer : []).flatMap(paragraphs),
    ...(isWorkedOut(left) && left.report !== null ? [kept('Report', left.report)] : []),
    ...(record === '' ? [] : [kept('Record', record)]),
  ];
}

function paragraphs(text: string): readonly HTMLElement[] {
  return text.split('\n').map((line) => made('p', {}, line));
}

/** A page of the run's own may not reach for files: where it is stands as text. */
function kept(what: string, path: string): HTMLElement {
  return made('p', {}, `${what}: `, made('span', { class: 'folder' }, path));
}
