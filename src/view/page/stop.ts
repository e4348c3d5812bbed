import { leftBy, type ViewState } from '../view-state.js';
import { alarm, tell } from './announce.js';
import { now, send } from './connection.js';
import { place, show, write } from './dom.js';
import type { Line } from './silence.js';

/** Within which Esc must come a second time. Once alone is a habit; twice at once is meant. */
const twiceWithin = 1;

const button = place('stop');
const trouble = place('trouble');
let asked = false;
let armed: number | undefined;
let over = false;

/** Stops at once: whoever stops by mistake has lost a run, whoever is asked back may lose more. */
async function stop(): Promise<void> {
  if (asked || over) return;
  asked = true;
  shape('Making the bench safe…', '');
  tell('Making the bench safe.');
  const { sent, words } = await send('/stop', {});
  if (sent === 'taken') return;
  asked = false;
  shape('Stop', 'or Esc twice');
  const why = words === '' ? '' : ` It said: ${words}`;
  const text = `The wish to stop did not reach the runner.${why} Press Ctrl-C at the terminal, or cut the power by hand.`;
  write(trouble, text);
  show(trouble, true);
  alarm(text);
}

export function showStop(state: ViewState, line: Line): void {
  over = leftBy(state) !== undefined;
  if (over && document.activeElement === button) place('ending-heading').focus();
  show(button, !over);
  // Of a runner that is not heard nobody knows whether it heard: the button may be pressed again.
  if (line.kind === 'lost') asked = false;
  if (line.kind === 'live' && state.stopping) asked = true;
  if (over || asked) show(trouble, false);
  if (asked) shape('Making the bench safe…', '');
  else if (armed === undefined) shape('Stop', 'or Esc twice');
}

function shape(word: string, how: string): void {
  write(place('stop-word'), word);
  write(place('stop-how'), how);
  button.setAttribute('aria-disabled', String(asked));
}

button.addEventListener('click', () => void stop());
document.addEventListener('keydown', (event) => {
  if (event.key !== 'Escape' || event.repeat || asked || over) return;
  event.preventDefault();
  if (armed !== undefined && now() - armed <= twiceWithin) {
    armed = undefined;
    void stop();
    return;
  }
  armed = now();
  shape('Stop', 'Esc once more');
  setTimeout(
    () => {
      if (armed === undefined || now() - armed < twiceWithin) return;
      armed = undefined;
      if (!asked) shape('Stop', 'or Esc twice');
    },
    twiceWithin * 1000 + 20,
  );
});
