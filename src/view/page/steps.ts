import { spokenTime } from '../../quantity/spoken-time.js';
import { leftBy, type ViewState } from '../view-state.js';
import { tell } from './announce.js';
import { drawn, made, place, write } from './dom.js';
import { standingOf, type StepStanding, standingWords, stepWords, timesWords } from './wording.js';

const marks: Readonly<Record<StepStanding, string>> = {
  done: 'M3 10L8 15L17 4',
  now: 'M5 3L16 10L5 17Z',
  'to-come': 'M10 4a6 6 0 1 0 .1 0Z',
  'broken-off': 'M4 4L16 16M16 4L4 16',
  'not-done': 'M4 10H16',
};

let told: string | undefined;

export function showSteps(state: ViewState): void {
  const words = stepWords(state);
  write(place('step-now'), words);
  write(place('times'), timesWords(state));
  const { run, step } = state;
  const left = leftBy(state);
  const standing = `${run.began} ${step} ${left?.how ?? ''}`;
  if (standing === told) return;
  if (told !== undefined && left === undefined) tell(words);
  told = standing;
  place('steps').replaceChildren(
    ...run.steps.map((each, index) => item(each, index + 1, standingOf(index + 1, state))),
  );
}

function item(
  { kind, summary, duration }: ViewState['run']['steps'][number],
  number: number,
  standing: StepStanding,
): HTMLElement {
  const about = standing === 'to-come' || standing === 'now' ? `, about ${spokenTime(duration)} in all` : '';
  const mark = drawn(
    'svg',
    { viewBox: '0 0 20 20', 'aria-hidden': 'true' },
    drawn('path', { d: marks[standing] }),
  );
  const words = made(
    'div',
    {},
    made(
      'span',
      { class: 'state' },
      `${number} · ${kind.replaceAll('-', ' ')} · `,
      made('strong', {}, standingWords[standing]),
      about,
    ),
    made('br'),
    summary,
  );
  return made('li', standing === 'now' ? { class: 'at', 'aria-current': 'step' } : {}, mark, words);
}
