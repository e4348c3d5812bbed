import { leftBy, type Question, type ViewState } from '../view-state.js';
import { alarm, tell } from './announce.js';
import { send, type Sent } from './connection.js';
import { made, place, show, write } from './dom.js';
import { expectedWords } from './wording.js';

const section = place('question');
const heading = place('question-heading');
const text = place('question-text');
const form = place('question-form');
const refused = place('question-error');
const answered = place('answered');

let open: Question | undefined;
/** The question to which an answer is on its way from here, and the one that was answered here. */
let awaited: number | undefined;
let ours: number | undefined;
/** The last that was taken away; `stopped` where that was no answer. */
let gone: { readonly question: Question; readonly stopped: boolean } | undefined;
/** What was last typed here, and to what; the runner asks the same again where it did not understand. */
let typedHere: { readonly heading: string; readonly step: number; readonly text: string } | undefined;
/** The step in which the open question is asked. */
let askedIn = 0;
let sending = false;
/** The step in which the last question was answered; with it goes what was said of that. */
let answeredIn = 0;

/** What is asked stays as it is, with all that was typed, until another is asked. */
export function showQuestion(state: ViewState): void {
  const { question, stopping, step } = state;
  const isOver = leftBy(state) !== undefined;
  if (step !== answeredIn) show(answered, false);
  if (question?.id === open?.id) return;
  const before = open;
  const wasHere = section.contains(document.activeElement);
  open = question;
  askedIn = step;
  sending = false;
  show(section, question !== undefined);
  if (before !== undefined) {
    answeredIn = step;
    gone = { question: before, stopped: stopping || isOver };
    // Whose answer was taken is not known yet where one is on its way.
    if (awaited !== before.id) tellOfAnswer(gone);
  }
  if (question === undefined) {
    if (wasHere && !isOver) place('module').focus();
    return;
  }
  // Another step may ask under the same name, and what was read for the one is no answer to the other.
  const isAgain = typedHere?.heading === question.heading && typedHere.step === step;
  lay(question);
  if (before === undefined) show(answered, false);
  if (isAgain) correct(question, typedHere?.text ?? '');
  else attend(question, wasHere);
  typedHere = undefined;
}

function tellOfAnswer({ question, stopped }: NonNullable<typeof gone>): void {
  const { id, heading: asked } = question;
  const how = stopped ? 'taken away, as the run ends' : 'answered at the terminal, or on another page';
  const words = `“${asked}” was ${how}.`;
  show(answered, ours !== id && !stopped);
  write(answered, words);
  tell(ours === id ? 'The answer was sent.' : words);
}

/**
 * The keyboard is led to the heading, never to a button, so that a key on its way answers nothing; and only where it
 * is not busy elsewhere. A reader is told either way.
 */
function attend({ heading: asked }: Question, wasHere: boolean): void {
  const { activeElement } = document;
  const free =
    activeElement === null || activeElement === document.body || /^H[12]$/.test(activeElement.tagName);
  if (wasHere || free) heading.focus();
  else alarm(`The runner asks: ${asked}`);
}

/** Of an answer that was not understood the person goes on where it was typed; the next letter replaces it. */
function correct({ text: why }: Question, before: string): void {
  const box = input();
  if (box === null) return;
  box.value = before;
  box.setAttribute('aria-invalid', 'true');
  box.focus();
  box.select();
  // The reason is longer than what stood there, and in a low window would come to stand behind the strip.
  text.scrollIntoView({ block: 'nearest' });
  alarm(why);
}

function lay(question: Question): void {
  write(heading, question.heading);
  const lines = question.text.split('\n').filter((line) => line.trim() !== '');
  // Wiring is gone through in its order; what else has several lines is told in them.
  text.replaceChildren(
    ...(question.answer === 'yes' && lines.length > 1
      ? [made('ol', {}, ...lines.map((line) => made('li', {}, line)))]
      : lines.map((line) => made('p', {}, line))),
  );
  show(refused, false);
  form.replaceChildren(...controls(question));
}

function controls({ answer }: Question): readonly HTMLElement[] {
  if (answer === 'yes') return [button('Yes, go on', 'yes', 'go'), button('No, stop here', 'no')];
  if (answer === 'done') return [button('Done, go on', 'done', 'go')];
  return [field(expectedWords({ answer }) ?? ''), button('Send', undefined, 'go')];
}

function button(words: string, value: string | undefined, look = ''): HTMLElement {
  return made('button', { type: 'submit', class: look, ...(value !== undefined && { value }) }, words);
}

function field(expected: string): HTMLElement {
  return made(
    'div',
    { class: 'field' },
    made('label', { for: 'typed' }, 'Your answer'),
    made('p', { class: 'hint', id: 'expected' }, expected),
    made('input', {
      ...{ id: 'typed', name: 'typed', type: 'text', maxlength: '400', required: '' },
      ...{
        autocomplete: 'off',
        autocapitalize: 'off',
        spellcheck: 'false',
        'aria-describedby': 'expected question-error',
      },
    }),
  );
}

form.addEventListener('submit', (event) => {
  event.preventDefault();
  if (open === undefined || sending) return;
  const { submitter } = event;
  const pressed = submitter instanceof HTMLButtonElement ? submitter.value : '';
  void answer(open, pressed === '' ? typed().trim() : pressed);
});

function typed(): string {
  return input()?.value ?? '';
}

function input(): HTMLInputElement | null {
  return form.querySelector('input');
}

async function answer(question: Question, given: string): Promise<void> {
  sending = true;
  awaited = question.id;
  typedHere = input() === null ? undefined : { heading: question.heading, step: askedIn, text: given };
  const { sent, words } = await send('/answer', { question: question.id, answer: given });
  if (awaited === question.id) awaited = undefined;
  if (sent === 'taken') ours = question.id;
  if (open?.id !== question.id) {
    if (gone?.question.id === question.id) tellOfAnswer(gone);
    return;
  }
  sending = false;
  if (sent === 'taken') return;
  typedHere = undefined;
  refuse(refusal(sent, words, expectedWords(question)));
}

function refusal(sent: Exclude<Sent, 'taken'>, words: string, expected: string | undefined): string {
  switch (sent) {
    case 'not-open':
      return 'This is no longer asked: it was answered at the terminal, or on another page.';
    case 'not-taken':
      return words !== ''
        ? words
        : `That could not be taken.${expected === undefined ? '' : ` ${expected}.`}`;
    case 'unreachable':
      return 'The answer did not reach the runner. Answer at the terminal, or try again.';
  }
}

function refuse(words: string): void {
  write(refused, words);
  show(refused, true);
  alarm(words);
  const box = input();
  box?.setAttribute('aria-invalid', 'true');
  box?.focus();
}
