import { leftBy, type ViewState } from '../view-state.js';
import { place, show, write } from './dom.js';
import type { Line } from './silence.js';

/** The last lines of the page: what Stop does while there is something to stop, and what the page is good for. */
export function showAbout(state: ViewState, line: Line): void {
  show(place('about-stop'), leftBy(state) === undefined);
  if (line.kind === 'over')
    write(
      place('about-page'),
      'The run is over: this page can’t be loaded again, and shows this until it is closed.',
    );
}
