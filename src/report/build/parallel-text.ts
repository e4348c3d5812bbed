import type { ParallelBuild } from '../../arrangement/parallel-build.js';
import { formatQuantity } from '../../quantity/format-quantity.js';
import type { Dimension } from '../../quantity/quantity.js';
import { roundedDown } from '../../quantity/rounded-down.js';
import { alignTable } from '../align.js';
import { printableData } from '../printable.js';
import type { Style } from '../style.js';
import { chance, loadInWords, namesOf } from './brief.js';
import { ballastText, imbalanceWithout } from './ballast-text.js';
import { estimateCells, estimateInWords } from './estimate-text.js';
import { headingText } from './heading-text.js';
import { bullets, prose, section, sentence, text } from './prose.js';
import { cautionsText, partsText } from './parts-text.js';
import { concernsText, sourcesText } from './records-text.js';
import { sharesText } from './shares-text.js';
import { standingText } from './standing-text.js';

/** Modules side by side, for a terminal or a text file: the answer first, then what it rests on. */
export function parallelAsText(worked: ParallelBuild, style: Style): string {
  const build = printableData(worked);
  return text([
    headingText(`${namesOf(build)} in parallel`, build.modules, style),
    answer(build, style),
    groupText(build, style),
    ballastText(build, style),
    sharesText(build, style),
    withoutBallastText(build, style),
    failuresText(build, style),
    partsText(build, style),
    cautionsText(build, style),
    concernsText(build, style),
    sourcesText(build.modules, style),
  ]);
}

function answer(build: ParallelBuild, style: Style): string {
  const first = standingText(build, { what: what(build), tooLittle: tooLittle(build) }, style);
  const { standing } = build;
  const more = standing.kind === 'may-be-built' ? [setBy(build), inTurn(build), notTheSum(build)] : [];
  return [first, ...more.filter((said) => said !== '').map((said) => prose(sentence(said)))].join('\n');
}

function what(build: ParallelBuild): string {
  return `${sideBySide(build)} feed up to ${roundedDown(build.recommended.current, 'current')} continuously`;
}

function tooLittle(build: ParallelBuild): string {
  return `${what(build)}, and ${loadInWords(build.load)} is asked for`;
}

function sideBySide(build: ParallelBuild): string {
  const { ballast } = build;
  const through =
    ballast.kind === 'resistor' ? ` through ${formatQuantity(ballast.resistance, 'resistance')} each` : '';
  return `${namesOf(build)} side by side${through}`;
}

function setBy({ recommended }: ParallelBuild): string {
  return `No more because of ${recommended.setBy}`;
}

/** Who meets the limit first, and what comes of it. */
function inTurn({ firstToSaturate: { module, load, probability, then } }: ParallelBuild): string {
  const sure = probability > 0.95 ? '' : `, with a probability of ${chance(probability)}`;
  return `${module} reaches its limit first, at a load of ${estimateInWords(load, 'current')}${sure}. ${then}`;
}

/** That nobody takes the sum of labels for the group. */
function notTheSum({ sumOfSingles, recommended }: ParallelBuild): string {
  if (sumOfSingles.recommended <= recommended.current * 1.005) return '';
  return `It is not the ${roundedDown(sumOfSingles.recommended, 'current')} that they could feed one by one, added up`;
}

function groupText(build: ParallelBuild, style: Style): string {
  const { atLoad, load, usable, firstToSaturate, standing } = build;
  const at = `at ${loadInWords(load)}`;
  const may = standing.kind === 'may-be-built' ? 'recommended' : 'by these numbers alone';
  const [imbalance, worst] = estimateCells(atLoad.imbalance, 'ratio');
  const row = (name: string, estimate: typeof usable, dimension: Dimension): string[] => [
    name,
    ...estimateCells(estimate, dimension),
  ];
  const rows = [
    row('usable', usable, 'current'),
    [may, roundedDown(build.recommended.current, 'current'), 'continuously'],
    row(`first at its limit: ${firstToSaturate.module}`, firstToSaturate.load, 'current'),
    row(`voltage ${at}`, atLoad.busVoltage, 'voltage'),
    [`imbalance ${at}`, imbalance, worst === '' ? '' : `${worst}, every tolerance at its worst`],
  ];
  return section(
    'The group',
    alignTable(rows, ['left', 'right', 'left']),
    style,
    'value and its 95 % limits',
  );
}

function withoutBallastText(build: ParallelBuild, style: Style): string {
  if (build.ballast.kind === 'none') return '';
  const lines = [imbalanceWithout(build), ...build.withoutBallast.story];
  return section('Without ballast', bullets(lines), style);
}

const rests = {
  'carries-it': 'the rest carries the load',
  overloaded: 'THE REST IS OVERLOADED',
  fails: 'THE REST FAILS',
} as const;

/** What is to be said of each alike is said once, at the end. */
function failuresText(build: ParallelBuild, style: Style): string {
  const { failures } = build;
  const [first] = failures;
  const ofAll = (first?.sentences ?? []).filter((said) =>
    failures.every(({ sentences }) => sentences.includes(said)),
  );
  const lines = failures.flatMap(({ module, recommended, usable, rest, sentences }) => [
    prose(
      `Without ${module} ${rests[rest]}: it is good for ${roundedDown(recommended, 'current')} continuously and holds ${roundedDown(usable, 'current')}.`,
    ),
    ...bullets(sentences.filter((said) => !ofAll.includes(said))),
  ]);
  return section(
    'When one fails or is switched off',
    [...lines, ...ofAll.map((said) => prose(sentence(said)))],
    style,
    `at ${loadInWords(build.load)}`,
  );
}
