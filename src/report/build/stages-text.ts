import type { Movement, MovementVerdict, StagedBuild } from '../../arrangement/staged-build.js';
import { type Sequence, sequences } from '../../arrangement/stages-wish.js';
import { roundedDown } from '../../quantity/rounded-down.js';
import { alignTable } from '../align.js';
import { printableData } from '../printable.js';
import type { Style } from '../style.js';
import { brief, briefDigits } from './brief.js';
import { dissipationText } from './dissipation-text.js';
import { estimateCells } from './estimate-text.js';
import { formInSigns } from './form-text.js';
import { headingText } from './heading-text.js';
import { leastAndMost, leastAndMostInWords } from './least-and-most.js';
import { cautionsText, partsText } from './parts-text.js';
import { prose, section, stopped, text } from './prose.js';
import { concernsText, sourcesText } from './records-text.js';
import { setBy } from './set-by.js';
import { spanOf, stretchesOf } from './stretches.js';
import { standingText } from './standing-text.js';

/** A staged supply, for a terminal or a text file: the answer first, then what it rests on. */
export function stagesAsText(worked: StagedBuild, style: Style): string {
  const build = printableData(worked);
  return text([
    headingText(`${build.wish.name}: ${build.wish.title}`, build.modules, style),
    answer(build, style),
    guaranteedText(build, style),
    arrangementsText(build, style),
    switchOversText(build, style),
    movementsText(build, style),
    dissipationText(build, style),
    partsText(build, style),
    cautionsText(build, style),
    concernsText(build, style),
    sourcesText(build.modules, style),
  ]);
}

function answer(build: StagedBuild, style: Style): string {
  const { wish } = build;
  const found = leastAndMost(build);
  const range = `from ${brief(wish.output.from, 'voltage')} to ${brief(wish.output.to, 'voltage')}`;
  if (found === undefined)
    return standingText(build, { what: `${wish.name} gives ${range}`, tooLittle: '' }, style);
  const what = `${wish.name} gives ${range} and feeds at least ${roundedDown(found.least.current, 'current')} at each of them; ${leastAndMostInWords(found)}`;
  return standingText(build, { what, tooLittle: what }, style);
}

function guaranteedText(build: StagedBuild, style: Style): string {
  const stretches = stretchesOf(build.guaranteed, ({ rising }) => rising);
  const rows = stretches.map(({ from, to, least, most, of }) => [
    from === to ? briefDigits(from) : `${briefDigits(from)} to ${briefDigits(to)}`,
    spanOf({ least, most }),
    of.arrangement,
    setBy[of.setBy],
  ]);
  const head = ['output, V', 'at least', 'from', 'set by'];
  return section(
    build.standing.kind === 'may-be-built'
      ? 'What it is guaranteed to feed'
      : 'By these numbers alone it would feed',
    alignTable([head, ...rows], ['left', 'left', 'left', 'left']),
    style,
    'output rising; coming down it may be less',
  );
}

function arrangementsText({ arrangements }: StagedBuild, style: Style): string {
  const head = ['', '', 'no load', 'full current', 'at most'];
  const rows = arrangements.map(({ name, circuit, openVoltage, fullVoltage, current }) => [
    name,
    formInSigns(circuit.form),
    estimateCells(openVoltage, 'voltage')[0],
    estimateCells(fullVoltage, 'voltage')[0],
    roundedDown(current, 'current'),
  ]);
  const more = arrangements.flatMap(({ name, closed, setBy: by }) => [
    prose(closed.length === 0 ? 'no contact closed.' : `closed are ${closed.join(', ')}.`, `${name}: `),
    prose(stopped(`no more because of ${by}`), `${name}: `),
  ]);
  return section(
    'Arrangements',
    [...alignTable([head, ...rows], ['left', 'left', 'right', 'right', 'right']), ...more],
    style,
    '∥ side by side, + in a stack, the lowest first',
  );
}

function switchOversText({ switchOvers }: StagedBuild, style: Style): string {
  const head = ['', 'up at', 'back at', 'input jumps by, no load', 'full load'];
  const rows = switchOvers.map(({ lower, upper, up, down, swing }) => [
    `${lower} → ${upper}`,
    brief(up, 'voltage'),
    brief(down, 'voltage'),
    brief(swing.noLoad, 'voltage'),
    brief(swing.fullLoad, 'voltage'),
  ]);
  return section(
    'Switch-overs',
    rows.length === 0 ? [] : alignTable([head, ...rows], ['left', 'right', 'right', 'right', 'right']),
    style,
    'by the output voltage',
  );
}

/** What the contacts pass through while they move; the order that the builder chose decides. */
function movementsText({ switchOvers, wish }: StagedBuild, style: Style): string {
  const lines = switchOvers.flatMap((over) => [
    movementInWords(`${over.lower} → ${over.upper}`, over.goingUp, wish.sequence),
    movementInWords(`${over.upper} → ${over.lower}`, over.comingDown, wish.sequence),
  ]);
  return section(
    'While the contacts move',
    lines.map((line) => prose(line, '- ')),
    style,
    `driven ${inWords[wish.sequence]}`,
  );
}

const inWords: Readonly<Record<Sequence, string>> = {
  'any-order': 'in any order',
  'break-before-make': 'break before make',
  'make-before-break': 'make before break',
};

/** Of the other ways of driving them, those by which it would come out otherwise. */
function movementInWords(what: string, { moving, bySequence }: Movement, sequence: Sequence): string {
  const decisive = bySequence[sequence];
  const otherwise = sequences
    .filter((each) => bySequence[each].kind !== decisive.kind)
    .map((each) => inWords[each]);
  const besides =
    otherwise.length === 0
      ? ''
      : ` Driven ${otherwise.join(' or ')} it would be ${decisive.kind === 'clear' ? 'FORBIDDEN' : 'clear'}.`;
  return `${what} (${moving.join(', ')}): ${verdictInWords(decisive)}${besides}`;
}

function verdictInWords(verdict: MovementVerdict): string {
  if (verdict.kind === 'forbidden')
    return `FORBIDDEN when ${verdict.order.join(', then ')}: ${stopped(verdict.connection.sentence)}`;
  const states = verdict.states === 1 ? 'the one state' : `all ${verdict.states} states`;
  return `clear in ${states}${verdict.interrupts ? '; the feed is interrupted for a moment' : ''}.`;
}
