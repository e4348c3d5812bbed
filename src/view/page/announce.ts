import { place } from './dom.js';
import { printable } from '../../quantity/printable.js';

const alarms = place('alarm');
const news = place('status');

/** Said at once, whatever is being read: a question, a lost runner, a load of which nobody knows. */
export function alarm(text: string): void {
  say(alarms, text);
}

/** Said at the next pause. */
export function tell(text: string): void {
  say(news, text);
}

/** The same words a second time are no change unless something stood between. */
function say(region: HTMLElement, text: string): void {
  region.textContent = '';
  setTimeout(() => {
    region.textContent = printable(text);
  }, 50);
}
