import type { Rail, SeriesBuild } from '../../arrangement/series-build.js';
import { roundedDown } from '../../quantity/rounded-down.js';
import { brief, loadInWords, namesOf } from '../build/brief.js';
import { estimateCells, estimateInWords } from '../build/estimate-text.js';
import { sentence } from '../build/prose.js';
import { element, type Markup } from '../page/markup.js';
import { bullets, section, type Sheet } from '../page/page.js';
import { table } from '../page/table.js';
import { banner } from './banner.js';
import { circuitSection } from './circuit.js';
import { numberRow, numbersSection } from './numbers.js';
import { cautionsSection, isRefused, partsSection } from './parts.js';
import { concernsSection, modulesSection, sourcesSection } from './records.js';
import { curveChart, railsChart } from './series-charts.js';

/** Modules one upon the other. */
export function seriesSheet(build: SeriesBuild): Sheet {
  return {
    kind: 'Build sheet · modules one upon the other',
    title: `${namesOf(build)} in series`,
    answer: banner(build, answer(build)),
    sections: [
      numbers(build),
      circuitSection(build, build.circuit, build.modules),
      partsSection(build),
      section('Voltage over the load', curveChart(build)),
      rails(build),
      failures(build),
      bonds(build),
      cautionsSection(build),
      concernsSection(build.concerns),
      modulesSection(build.modules),
      sourcesSection(build.modules),
    ],
  };
}

function answer({
  standing,
  recommended,
  load,
  voltageAtLoad,
  beyondTouchable,
}: SeriesBuild): readonly string[] {
  if (standing.kind !== 'may-be-built') return [];
  const asked =
    load.from === 'asked-for' && load.current > recommended.current
      ? [`${loadInWords(load)} is asked for`]
      : [];
  return [
    `The string feeds up to ${roundedDown(recommended.current, 'current')} continuously, at ${estimateInWords(voltageAtLoad, 'voltage')}`,
    ...asked,
    `What sets it: ${recommended.setBy}`,
    ...(beyondTouchable ? ['It can be above 60 V DC: not safe to touch (ES1 of IEC 62368-1)'] : []),
  ];
}

function numbers(build: SeriesBuild): Markup {
  const { openVoltage, voltageAtLoad, usable, recommended, load, weakest } = build;
  const who = weakest.sure
    ? `${weakest.module} is the weakest.`
    : `${weakest.module} is most likely the weakest.`;
  return numbersSection('string', isRefused(build) ? undefined : recommended, [
    numberRow('Usable', usable, 'current', who),
    numberRow('Voltage at no load', openVoltage, 'voltage', touch(build)),
    numberRow(`Voltage at ${loadInWords(load)}`, voltageAtLoad, 'voltage'),
  ]);
}

function touch({ beyondTouchable }: SeriesBuild): string {
  return beyondTouchable
    ? 'It can be above 60 V DC, the limit of ES1 (IEC 62368-1): nobody may be able to touch it.'
    : 'Below 60 V DC, the limit of ES1 (IEC 62368-1).';
}

const verdicts: Readonly<Record<Rail['verdict'], { readonly words: string; readonly look: string }>> = {
  within: { words: 'within', look: 'good' },
  beyond: { words: 'beyond it', look: 'bad' },
  unknown: { words: 'unknown', look: 'unsure' },
  'not-needed': { words: 'not needed', look: '' },
};

function rails(build: SeriesBuild): Markup {
  return section(
    'How high each floats',
    railsChart(build),
    table(
      "No load, the string's 0 V being earthed.",
      [
        { heading: 'Module', as: 'name' },
        { heading: '0 V at', as: 'number' },
        { heading: '+ at', as: 'number' },
        { heading: 'Isolation to earth', as: 'number' },
        { heading: 'It is' },
      ],
      build.rails.map(({ module, float, top, isolation, verdict }) => [
        module,
        estimateCells(float, 'voltage')[0],
        estimateCells(top, 'voltage')[0],
        isolation === 'unknown' ? 'unknown' : brief(isolation, 'voltage'),
        element('span', { class: `state ${verdicts[verdict].look}` }, verdicts[verdict].words),
      ]),
    ),
  );
}

/** When more is asked than it gives, and what the reverse diodes are for. */
function failures({ diodes, weakest }: SeriesBuild): Markup {
  return section(
    'When one fails or gives way',
    element('p', {}, sentence(weakest.then)),
    table(
      'Across each output a diode, through which the others push when it fails.',
      [
        { heading: 'Across', as: 'name' },
        { heading: 'Must carry', as: 'number' },
        { heading: 'Must block', as: 'number' },
        { heading: 'Heat', as: 'number' },
        { heading: 'To buy', as: 'fixed' },
      ],
      diodes.map(({ module, current, bound, voltage, heat, rating }) => [
        module,
        `${bound === 'least' ? '≥ ' : ''}${brief(current, 'current')}`,
        brief(voltage, 'voltage'),
        brief(heat, 'power'),
        `${brief(rating.current, 'current')}, ${brief(rating.voltage, 'voltage')}`,
      ]),
    ),
  );
}

function bonds({ bonds: cases }: SeriesBuild): Markup | undefined {
  if (cases.length === 0) return undefined;
  return section(
    'What an earth bond would do',
    element('p', {}, "A bond from a module's 0 V to earth, the string's 0 V being earthed too."),
    bullets(cases.map((bond) => sentence(bond.sentence))),
  );
}
