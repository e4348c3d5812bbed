import type { ViewState } from '../view-state.js';
import { alarm, tell } from './announce.js';
import { made, place, show, whenChanged, write } from './dom.js';
import type { Line } from './silence.js';
import { lostHeading, lostWords } from './wording.js';

let lost = false;

/** The banner of a lost runner. It is said aloud once; the seconds are counted for the eye alone. */
export function showLost(line: Line, state: ViewState | undefined): void {
  show(place('lost'), line.kind === 'lost');
  if (line.kind === 'lost') {
    const words = lostWords(line, state);
    write(place('lost-heading'), lostHeading(line));
    lay(words.join('\n'));
    if (!lost) alarm(['No word from the runner.', ...words].join(' '));
  } else if (lost) {
    tell(line.kind === 'over' ? 'The run is over.' : 'The runner is heard again.');
  }
  lost = line.kind === 'lost';
}

const lay = whenChanged((words: string) => {
  place('lost-text').replaceChildren(...words.split('\n').map((each) => made('p', {}, each)));
});
