import { applied, leftBy, type ViewMessage, type ViewState } from '../view-state.js';
import { showAbout } from './about.js';
import { type Connection, follow, now } from './connection.js';
import { showCurve } from './curve.js';
import { place, write } from './dom.js';
import { showEnding } from './ending.js';
import { showFigures } from './figures.js';
import { showLoad } from './load.js';
import { showLost } from './lost.js';
import { showCautions, showNotices } from './notes.js';
import { showQuestion } from './question.js';
import { lineOf, type Stage } from './silence.js';
import { showSteps } from './steps.js';
import { showStop } from './stop.js';
import { titleWords } from './wording.js';

let state: ViewState | undefined;
/** When the figures last came; undefined while only those of before this page listened are known. */
let readAt: number | undefined;
const connection: Connection = follow(heard, shown, stage);

function heard(message: ViewMessage): void {
  if (message.kind === 'everything') state = message.state;
  else if (state !== undefined) state = applied(state, message);
  if (message.kind === 'figures') readAt = now();
  if (message.kind === 'everything' || message.kind === 'step') readAt = undefined;
  if (stage() === 'over') connection.close();
  shown();
}

function stage(): Stage {
  if (state?.ended !== undefined) return 'over';
  return state?.workingOut === undefined ? 'under-way' : 'working-out';
}

/** All of the page follows from the state and from how long ago it was heard. */
function shown(): void {
  const line = lineOf({ ...connection.hearing(), stage: stage() }, now());
  document.title = `${titleWords(state, line)} · railproof`;
  showLost(line, state);
  showLoad(state, line);
  if (state === undefined) return;
  showRun(state);
  showEnding(leftBy(state), line);
  showStop(state, line);
  showAbout(state, line);
  showQuestion(state);
  showFigures(state, readAt === undefined ? undefined : now() - readAt, line);
  showCurve(state);
  showSteps(state);
  showCautions(state);
  showNotices(state.notices);
}

function showRun({ run }: ViewState): void {
  const { procedure, bench, simulated, module, title, rated } = run;
  write(place('kind'), `Live view · ${procedure} at ${bench}${simulated ? ' · simulated' : ''}`);
  write(place('module'), module);
  write(place('what'), `${title}. Nameplate: ${rated.voltage}\u00a0V, ${rated.current}\u00a0A.`);
}
