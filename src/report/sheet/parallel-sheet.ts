import type { Estimate } from '../../arrangement/build.js';
import type { ModuleLost, ParallelBuild } from '../../arrangement/parallel-build.js';
import { listed } from '../../quantity/listed.js';
import type { Dimension } from '../../quantity/quantity.js';
import { roundedDown } from '../../quantity/rounded-down.js';
import { ballastOrigin, imbalanceWithout } from '../build/ballast-text.js';
import { brief, chance, loadInWords, namesOf } from '../build/brief.js';
import { estimateCells, estimateInWords } from '../build/estimate-text.js';
import { sentence } from '../build/prose.js';
import { element, type Markup } from '../page/markup.js';
import { bullets, section, type Sheet } from '../page/page.js';
import { table } from '../page/table.js';
import { banner } from './banner.js';
import { circuitSection } from './circuit.js';
import { currentsChart, sharesChart, voltageChart } from './parallel-charts.js';
import { numberRow, type NumberRow, numbersSection } from './numbers.js';
import { cautionsSection, isRefused, partsSection } from './parts.js';
import { concernsSection, modulesSection, sourcesSection } from './records.js';

/** Modules side by side. */
export function parallelSheet(build: ParallelBuild): Sheet {
  return {
    kind: 'Build sheet · modules side by side',
    title: `${namesOf(build)} in parallel`,
    answer: banner(build, answer(build)),
    sections: [
      numbers(build),
      circuitSection(build, build.circuit, build.modules),
      partsSection(build),
      sharing(build),
      withoutBallast(build),
      failures(build),
      cautionsSection(build),
      concernsSection(build.concerns),
      modulesSection(build.modules),
      sourcesSection(build.modules),
    ],
  };
}

function answer(build: ParallelBuild): readonly string[] {
  const { standing, recommended, load, firstToSaturate: first } = build;
  if (standing.kind !== 'may-be-built') return [];
  const asked =
    load.from === 'asked-for' && load.current > recommended.current
      ? [`${loadInWords(load)} is asked for`]
      : [];
  return [
    `Together they feed up to ${roundedDown(recommended.current, 'current')} continuously`,
    ...asked,
    `What sets it: ${recommended.setBy}. ${first.module} reaches its limit first, at ${estimateInWords(first.load, 'current')}`,
  ];
}

function numbers(build: ParallelBuild): Markup {
  const { atLoad, load, usable, recommended, sumOfSingles, firstToSaturate: first } = build;
  const at = `at ${loadInWords(load)}`;
  return numbersSection('group', isRefused(build) ? undefined : recommended, [
    numberRow('Usable', usable, 'current', notTheSum(sumOfSingles.usable)),
    numberRow(
      `${first.module} at its limit`,
      first.load,
      'current',
      `First of them with ${chance(first.probability)}. ${sentence(first.then)}`,
    ),
    numberRow(`Voltage ${at}`, atLoad.busVoltage, 'voltage'),
    numberRow(
      `Imbalance ${at}`,
      atLoad.imbalance,
      'ratio',
      'The upper limit takes every tolerance at its worst.',
    ),
    ...ballastRows(build),
  ]);
}

/** That nobody takes the sum of labels for the group. */
function notTheSum(sum: number): string {
  return `One by one, added up, they would hold ${roundedDown(sum, 'current')}; the group does not.`;
}

function ballastRows({ ballast, wish }: ParallelBuild): readonly NumberRow[] {
  switch (ballast.kind) {
    case 'none':
      return [['Ballast', 'none', '', 'Joined directly they share as wished.']];
    case 'impossible':
      return [['Ballast', 'none will do', '', sentence(ballast.why)]];
    case 'resistor': {
      const { resistance, tolerance, dissipation, dissipationAtLimit, rating, voltageCost } = ballast;
      const heat = `${brief(dissipation, 'power')} of heat at most in use, ${brief(dissipationAtLimit, 'power')} with its module at its limit`;
      return [
        [
          'Ballast, each',
          `${brief(resistance, 'resistance')} ± ${brief(tolerance, 'ratio')}`,
          '',
          sentence(ballastOrigin(wish)),
        ],
        ['Ballast to buy', rating === undefined ? 'none will do' : brief(rating, 'power'), '', `${heat}.`],
        ['Voltage it costs', brief(voltageCost, 'voltage'), '', 'Across each ballast at full load.'],
      ];
    }
  }
}

function sharing(build: ParallelBuild): Markup {
  const { modules, atLoad, load } = build;
  const from = load.from === 'asked-for' ? 'the load asked for' : 'the recommended load';
  const columns = [
    { heading: 'Module', as: 'name' },
    { heading: 'Current', as: 'number' },
    { heading: '95 %', as: 'fixed' },
    { heading: 'Share', as: 'number' },
    { heading: '95 %', as: 'fixed' },
  ] as const;
  return section(
    'How they share the load',
    table(
      `At ${loadInWords(load)}, ${from}.`,
      columns,
      modules.map(({ name }, index) => [
        name,
        ...cellsOf(atLoad.currents[index], 'current'),
        ...cellsOf(atLoad.shares[index], 'ratio'),
      ]),
    ),
    element('h3', {}, 'Share of each module'),
    sharesChart(build),
    element('h3', {}, 'Current of each module'),
    currentsChart(build),
    element('h3', {}, 'Voltage of the group'),
    voltageChart(build),
  );
}

function cellsOf(estimate: Estimate | undefined, dimension: Dimension): readonly string[] {
  return estimate === undefined ? ['', ''] : estimateCells(estimate, dimension);
}

function withoutBallast(build: ParallelBuild): Markup | undefined {
  const { ballast, withoutBallast: without } = build;
  if (ballast.kind === 'none') return undefined;
  const hog = without.hog === undefined ? '' : `; ${without.hog} carries most`;
  return section(
    'Without ballast',
    bullets([
      `${imbalanceWithout(build)}${hog}.`,
      `The group would fail as a whole at ${brief(without.failsAt, 'current')}.`,
      ...without.story.map(sentence),
    ]),
  );
}

const rests: Readonly<Record<ModuleLost['rest'], { readonly words: string; readonly look: string }>> = {
  'carries-it': { words: 'carry the load', look: 'good' },
  overloaded: { words: 'are overloaded', look: 'unsure' },
  fails: { words: 'fail', look: 'bad' },
};

function failures({ failures: each, load }: ParallelBuild): Markup | undefined {
  if (each.length === 0) return undefined;
  return section(
    'When one fails or is switched off',
    table(
      `What the others can do then; the load is ${loadInWords(load)}.`,
      [
        { heading: 'Without', as: 'name' },
        { heading: 'The others' },
        { heading: 'Continuously', as: 'number' },
        { heading: 'At most', as: 'number' },
      ],
      each.map(({ module, rest, recommended, usable }) => [
        module,
        element('span', { class: `state ${rests[rest].look}` }, rests[rest].words),
        roundedDown(recommended, 'current'),
        roundedDown(usable, 'current'),
      ]),
    ),
    alike(each).map(({ modules, sentences }) => [
      element('h3', {}, listed(modules)),
      bullets(sentences.map(sentence)),
    ]),
  );
}

/** What is said of several is said once. */
function alike(
  each: readonly ModuleLost[],
): readonly { readonly modules: readonly string[]; readonly sentences: readonly string[] }[] {
  const said = new Map<string, { modules: string[]; sentences: readonly string[] }>();
  for (const { module, sentences } of each) {
    if (sentences.length === 0) continue;
    const key = JSON.stringify(sentences);
    const before = said.get(key);
    if (before === undefined) said.set(key, { modules: [module], sentences });
    else before.modules.push(module);
  }
  return [...said.values()];
}
