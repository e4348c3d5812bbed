import { spokenTime } from '../../quantity/spoken-time.js';
import { typedAs } from '../../quantity/typed-as.js';
import {
  leftBy,
  type Question,
  type ViewedCaution,
  type ViewedEnd,
  type ViewedLeft,
  type ViewState,
} from '../view-state.js';
import type { Line } from './silence.js';

/** What is said of the line beside the load, at all times. */
export function lineWords(line: Line): string {
  switch (line.kind) {
    case 'connecting':
      return 'connecting…';
    case 'live':
      return 'followed live';
    case 'lost':
      return `no word for ${wholeSeconds(line.seconds)}`;
    case 'working-out':
    case 'over':
      return 'the run is over';
  }
}

/** The alarm of a lost runner: what may be so, what is so, what to do. Its count stands in the heading only. */
export function lostWords(
  line: Line & { readonly kind: 'lost' },
  state: ViewState | undefined,
): readonly string[] {
  const left = state?.workingOut;
  if (left !== undefined) return [...lostAtWork(left), ...reasons[line.why], ...goesOn(line)];
  return [
    'The load may still be on. Look at the terminal.',
    ...(state !== undefined ? ['What stands below is old.'] : []),
    ...reasons[line.why],
    'A watchman at the runner tries to switch the load off when the runner is gone; do not rely on it. If in doubt cut the power by hand.',
    ...goesOn(line),
  ];
}

/** The bench was left before, which the runner told; what is missing can be worked out from the record again. */
function lostAtWork({ safety, record }: ViewedLeft): readonly string[] {
  return [
    ...safety
      .toSorted((one, other) => Number(one.confirmed) - Number(other.confirmed))
      .map(({ text }) => text),
    'That was told when the run was over. The program then worked out what the record shows, and no longer answers. Look at the terminal.',
    `What was read is kept, and can be worked out again: railproof analyse ${record}`,
  ];
}

function goesOn({ why }: Line & { readonly kind: 'lost' }): readonly string[] {
  return why === 'refused' ? [] : ['This page goes on trying, and shows what is so as soon as it hears.'];
}

const reasons: Readonly<Record<(Line & { kind: 'lost' })['why'], readonly string[]>> = {
  silent: [],
  full: ['Too many pages follow this run. Close one of them.'],
  unreachable: ['Nobody answers at this address: the program has ended, or the way to it is cut.'],
  refused: [
    'Who answers at this address does not know this page. Open the address again that the terminal shows; it opens one page once.',
  ],
};

export function lostHeading({ seconds }: { readonly seconds: number }): string {
  return `No word from the runner for ${wholeSeconds(seconds)}`;
}

function wholeSeconds(seconds: number): string {
  return spokenTime(Math.max(1, Math.floor(seconds)));
}

/** How old the figures are; `old` where nobody must take them for what is so now. */
export function ageWords(
  seconds: number | undefined,
  any: boolean,
  line: Line,
): { readonly text: string; readonly old: boolean } {
  if (line.kind === 'working-out' || line.kind === 'over')
    return { text: any ? '' : 'Nothing was read in the last step.', old: false };
  if (!any) return { text: 'Nothing was read in this step yet.', old: line.kind === 'lost' };
  const age = seconds === undefined ? 'some time ago' : `${spokenTime(Math.floor(seconds))} ago`;
  if (line.kind === 'lost') return { text: `Old: read ${age}, and nothing was heard since.`, old: true };
  if (seconds === undefined)
    return { text: 'Read before this page listened; how long ago is not known.', old: true };
  return seconds < 2 ? { text: 'Read just now.', old: false } : { text: `Read ${age}.`, old: seconds >= 10 };
}

/**
 * The load's input: while it runs by what was last read back; once it is over by what the runner could confirm, as
 * a load that no longer answers may be on whatever it said before.
 */
export function loadLeft(state: ViewState | undefined): 'on' | 'off' | 'unsure' | undefined {
  const end = state && leftBy(state)?.safety.find(({ what }) => what === 'load');
  if (end === undefined) return state?.input;
  return end.confirmed ? 'off' : 'unsure';
}

/** The same in words. */
export function loadWords(state: ViewState | undefined, line: Line): string {
  const input = loadLeft(state);
  if (input === 'unsure') return 'Load may still be on';
  if (input === undefined) return state && leftBy(state) ? 'Load not read' : 'Load not read yet';
  return line.kind === 'lost' ? `Load last read ${input}` : `Load ${input}`;
}

/** `1 min 5 s gone, about 2 min to go`; and in the end how long it took. */
export function timesWords(state: ViewState): string {
  const gone = spokenTime(state.elapsed);
  return leftBy(state) === undefined
    ? `${gone} gone, about ${spokenTime(state.remaining)} to go`
    : `The run took ${gone}.`;
}

export type StepStanding = 'done' | 'now' | 'to-come' | 'broken-off' | 'not-done';

/** Where a step stands, counted from 1. */
export function standingOf(
  number: number,
  state: Pick<ViewState, 'step' | 'workingOut' | 'ended' | 'run'>,
): StepStanding {
  const { step, run } = state;
  const left = leftBy(state);
  if (left?.how === 'completed' || number < step || number <= (run.done ?? 0)) return 'done';
  if (number === step) return left === undefined ? 'now' : 'broken-off';
  return left === undefined ? 'to-come' : 'not-done';
}

export const standingWords: Readonly<Record<StepStanding, string>> = {
  done: 'done',
  now: 'now',
  'to-come': 'to come',
  'broken-off': 'broken off',
  'not-done': 'not done',
};

/** `Step 2 of 3: 11 points from 0 A to 4 A`. */
export function stepWords(state: ViewState): string {
  const { step, run } = state;
  const left = leftBy(state);
  const count = run.steps.length;
  const now = run.steps[step - 1];
  if (left !== undefined)
    return left.how === 'completed' ? `All ${count} steps are done.` : endedIn(step, count);
  return now === undefined
    ? `Before the first of ${count} steps.`
    : `Step ${step} of ${count}: ${now.summary}`;
}

function endedIn(step: number, count: number): string {
  return step === 0 ? `Ended before the first of ${count} steps.` : `Ended in step ${step} of ${count}.`;
}

/** Of one that was acknowledged. */
export function cautionWords(by: NonNullable<ViewedCaution['by']>): string {
  switch (by) {
    case 'operator':
      return 'Acknowledged by the person at the bench.';
    case '--yes':
      return 'Acknowledged beforehand, with --yes.';
    case 'simulated-operator':
      return 'Acknowledged by the simulated operator.';
  }
}

/** What is to be typed; undefined where a button is enough. */
export function expectedWords({ answer }: Pick<Question, 'answer'>): string | undefined {
  if (answer === 'yes' || answer === 'done') return undefined;
  return answer === 'text' ? 'In your own words' : `In ${typedAs[answer]}`;
}

export interface EndShown {
  readonly heading: string;
  readonly look: 'good' | 'bad' | 'unsure' | 'plain';
}

/** How it came out, or how it ended while that is not known yet. A load of which nobody knows outweighs whatever was measured. */
export function endShown(left: ViewedLeft | ViewedEnd): EndShown {
  const { how, reason, safety } = left;
  const because = reason === null ? '' : `: ${reason}`;
  if (safety.some(({ confirmed }) => !confirmed)) return { heading: 'Look at the bench first', look: 'bad' };
  if (how === 'failed') return { heading: `Failed${because}`, look: 'bad' };
  if (how === 'stopped') {
    // Most reasons begin with that word themselves.
    const again = /^stopped (.+)$/s.exec(reason ?? '')?.[1];
    return { heading: again === undefined ? `Stopped${because}` : `Stopped ${again}`, look: 'unsure' };
  }
  return isWorkedOut(left) ? outcomes[left.outcome] : { heading: 'The run is over', look: 'plain' };
}

export function isWorkedOut(left: ViewedLeft | ViewedEnd): left is ViewedEnd {
  return 'outcome' in left;
}

/** Between how the bench was left and what the run came to, as long as the runner is heard or may be silent. */
export const busyWords = 'Working out what the record shows. After a long run that takes a while.';

const outcomes: Readonly<Record<ViewedEnd['outcome'], EndShown>> = {
  conforms: { heading: 'Conforms', look: 'good' },
  'does-not-conform': { heading: 'Does not conform', look: 'bad' },
  undecided: { heading: 'Undecided', look: 'unsure' },
  'not-judged': { heading: 'Completed; nothing was judged', look: 'plain' },
};

/** Of the window, so that whoever looks at another sees it there. */
export function titleWords(state: ViewState | undefined, line: Line): string {
  if (state === undefined) return line.kind === 'lost' ? 'No word from the runner' : 'Live view';
  const { module } = state.run;
  if (line.kind === 'lost') return `No word · ${module}`;
  const left = leftBy(state);
  if (left !== undefined) return `${endShown(left).heading} · ${module}`;
  if (state.question !== undefined) return `? ${state.question.heading} · ${module}`;
  return `${loadWords(state, line)} · ${module}`;
}
