import { railVoltsAtMost } from '../../arrangement/rails.js';
import type { Rail, ReverseDiode, SeriesBuild } from '../../arrangement/series-build.js';
import { roundedDown } from '../../quantity/rounded-down.js';
import { alignTable } from '../align.js';
import { printableData } from '../printable.js';
import type { Style } from '../style.js';
import { brief, briefDigits, loadInWords, namesOf } from './brief.js';
import { between, estimateCells, estimateInWords, valueAt } from './estimate-text.js';
import { headingText } from './heading-text.js';
import { cautionsText, partsText } from './parts-text.js';
import { bullets, prose, section, sentence, text } from './prose.js';
import { concernsText, sourcesText } from './records-text.js';
import { standingText } from './standing-text.js';

/** Modules one upon the other, for a terminal or a text file: the answer first, then what it rests on. */
export function seriesAsText(worked: SeriesBuild, style: Style): string {
  const build = printableData(worked);
  return text([
    headingText(`${namesOf(build)} in series, the lowest first`, build.modules, style),
    answer(build, style),
    stringText(build, style),
    railsText(build, style),
    diodesText(build, style),
    bondsText(build, style),
    partsText(build, style),
    cautionsText(
      build,
      style,
      build.bonds.map((bond) => bond.sentence),
    ),
    concernsText(build, style),
    sourcesText(build.modules, style),
  ]);
}

function answer(build: SeriesBuild, style: Style): string {
  const { recommended, load, voltageAtLoad, standing } = build;
  const feeds = `${namesOf(build)} in a stack feed up to ${roundedDown(recommended.current, 'current')} continuously`;
  const at = `at ${loadInWords(load)} they give ${estimateInWords(voltageAtLoad, 'voltage')}`;
  const first = standingText(
    build,
    { what: `${feeds}; ${at}`, tooLittle: `${feeds}, and ${loadInWords(load)} is asked for` },
    style,
  );
  const more =
    standing.kind === 'may-be-built'
      ? [`No more because of ${recommended.setBy}`, weakest(build), touch(build)]
      : [];
  return [first, ...more.map((each) => prose(sentence(each)))].join('\n');
}

function weakest({ weakest: { module, sure, then } }: SeriesBuild): string {
  const first = sure ? `${module} is the weakest` : `${module} is most likely the weakest`;
  return `${first}. ${then}`;
}

function touch({ beyondTouchable, openVoltage }: SeriesBuild): string {
  const most = `with no load it can be ${railVoltsAtMost(openVoltage.high)} from end to end`;
  return beyondTouchable
    ? `NOT SAFE TO TOUCH: ${most}, and above 60 V DC (ES1 of IEC 62368-1) nobody may be able to`
    : `${most}, which is below 60 V DC (ES1 of IEC 62368-1)`;
}

function stringText(build: SeriesBuild, style: Style): string {
  const { openVoltage, voltageAtLoad, usable, recommended, load, standing } = build;
  const may = standing.kind === 'may-be-built' ? 'recommended' : 'by these numbers alone';
  const rows = [
    ['no load', ...estimateCells(openVoltage, 'voltage')],
    [`at ${loadInWords(load)}`, ...estimateCells(voltageAtLoad, 'voltage')],
    ['usable', ...estimateCells(usable, 'current')],
    [may, roundedDown(recommended.current, 'current'), 'continuously'],
  ];
  return [
    section('The string', alignTable(rows, ['left', 'right', 'left']), style, 'value and its 95 % limits'),
    curveText(build, style),
  ]
    .filter((part) => part !== '')
    .join('\n\n');
}

/** A quarter and half of the load, and the most that was worked out. */
function curveText({ curve, load }: SeriesBuild, style: Style): string {
  const most = curve.currents.at(-1);
  if (most === undefined) return '';
  const places = [...[0.25, 0.5].map((part) => part * load.current).filter((at) => at < most), most];
  const at = (line: readonly number[], place: number): number => valueAt(curve.currents, line, place);
  const rows = [
    ['load, A', ...places.map(briefDigits)],
    [
      'voltage, V',
      ...places.map((place) => between(at(curve.voltage.low, place), at(curve.voltage.high, place))),
    ],
  ];
  const sides = ['left', ...places.map(() => 'right' as const)] as const;
  return section(
    'At other loads',
    alignTable(rows, sides),
    style,
    '95 % limits; the last is all that it holds',
  );
}

const verdicts: Readonly<Record<Rail['verdict'], string>> = {
  within: 'within',
  beyond: 'BEYOND',
  unknown: 'UNKNOWN',
  'not-needed': '',
};

function railsText({ rails }: SeriesBuild, style: Style): string {
  const head = ['', '0 V stands at', 'its plus at', 'output bears', ''];
  const rows = rails.map(({ module, float, top, isolation, verdict }) => [
    module,
    brief(float.value, 'voltage'),
    brief(top.value, 'voltage'),
    isolation === 'unknown' ? 'unknown' : brief(isolation, 'voltage'),
    verdicts[verdict],
  ]);
  return section(
    'How high each floats',
    alignTable([head, ...rows], ['left', 'right', 'right', 'right', 'left']),
    style,
    'no load, the lowest 0 V earthed',
  );
}

function diodesText({ diodes }: SeriesBuild, style: Style): string {
  const head = ['', '', 'buy at least', 'must carry', 'must block', 'heat'];
  const rows = diodes.map((diode, index) => [
    `D${index + 1}`,
    `across ${diode.module}`,
    `${brief(diode.rating.current, 'current')}, ${brief(diode.rating.voltage, 'voltage')}`,
    pushed(diode),
    brief(diode.voltage, 'voltage'),
    brief(diode.heat, 'power'),
  ]);
  return section(
    'Reverse diodes',
    rows.length === 0 ? [] : alignTable([head, ...rows], ['left', 'left', 'left', 'right', 'right', 'right']),
    style,
    'one across each output, against the day on which it fails',
  );
}

function pushed({ current, bound }: ReverseDiode): string {
  return `${bound === 'least' ? '≥ ' : ''}${brief(current, 'current')}`;
}

function bondsText({ bonds }: SeriesBuild, style: Style): string {
  const lines = bonds.map((bond) => bond.sentence);
  return section('What an earth bond would do', bullets(lines), style, "the string's 0 V earthed too");
}
