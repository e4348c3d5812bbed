import type { ViewState } from '../view-state.js';
import { drawn, place, whenChanged, write } from './dom.js';
import type { Line } from './silence.js';
import { lineWords, loadLeft, loadWords } from './wording.js';

type Contact = 'closed' | 'open' | 'unknown';

const blades: Readonly<Record<Contact, string>> = {
  closed: 'M14 12H34',
  open: 'M14 12L33 2',
  unknown: 'M14 12L16 9M20 7L22 6M26 5L28 4',
};

/** The contact that the load's input is, as IEC 60617 draws one: closed, open, or dashed where nobody knows. */
const draw = whenChanged((contact: Contact) => {
  place('contact').replaceChildren(
    drawn('path', { d: 'M2 12H12M36 12H46' }),
    drawn('path', { d: blades[contact] }),
    ...[13, 35].map((cx) => drawn('circle', { cx: String(cx), cy: '12', r: '2.6' })),
  );
});

export function showLoad(state: ViewState | undefined, line: Line): void {
  write(place('load-word'), loadWords(state, line));
  write(place('line'), lineWords(line));
  place('load').classList.toggle('silent', line.kind === 'lost');
  const known = line.kind === 'connecting' || line.kind === 'lost' ? undefined : loadLeft(state);
  place('load').classList.toggle('on', known === 'on');
  draw(known === undefined || known === 'unsure' ? 'unknown' : known === 'on' ? 'closed' : 'open');
}
