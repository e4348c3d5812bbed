import { printable } from '../../quantity/printable.js';
import { place } from './dom.js';

/** Said at once, whatever is being read: a question, a lost runner, a load of which nobody knows. */
export const alarm = speaking(place('alarm'));

/** Said at the next pause. */
export const tell = speaking(place('status'));

/**
 * What comes together is said together, none instead of another; lines are run together, as nobody hears where one
 * ends. The same words a second time are no change unless something stood between.
 */
function speaking(region: HTMLElement): (text: string) => void {
  let texts: readonly string[] = [];
  return (text) => {
    if (texts.length === 0) {
      region.textContent = '';
      setTimeout(() => {
        region.textContent = printable(texts.join(' ').replaceAll('\n', ' '));
        texts = [];
      }, 50);
    }
    texts = [...texts, text];
  };
}
