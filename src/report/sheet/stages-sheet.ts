import type { StagedBuild } from '../../arrangement/staged-build.js';
import { roundedDown } from '../../quantity/rounded-down.js';
import { brief } from '../build/brief.js';
import { estimateCells } from '../build/estimate-text.js';
import { formInSigns } from '../build/form-text.js';
import { leastAndMost, leastAndMostInWords } from '../build/least-and-most.js';
import { sentence } from '../build/prose.js';
import { element, type Markup } from '../page/markup.js';
import { section, type Sheet } from '../page/page.js';
import { table } from '../page/table.js';
import { banner } from './banner.js';
import { circuitFigure } from './circuit.js';
import { contactsTable, movements } from './contacts.js';
import { cautionsSection, isRefused, partsSection, provisional } from './parts.js';
import { concernsSection, modulesSection, sourcesSection } from './records.js';
import { dissipationMap, guaranteedChart } from './stages-charts.js';
import { setBy } from '../build/set-by.js';
import { spanOf, stretchesOf } from '../build/stretches.js';

/** A supply whose input follows its output. */
export function stagesSheet(build: StagedBuild): Sheet {
  return {
    kind: 'Build sheet · a staged supply',
    title: `${build.wish.name}: ${build.wish.title}`,
    answer: banner(build, answer(build)),
    sections: [
      guaranteed(build),
      arrangements(build),
      partsSection(build),
      switching(build),
      heat(build),
      cautionsSection(build),
      concernsSection(build.concerns),
      modulesSection(build.modules),
      sourcesSection(build.modules),
    ],
  };
}

function answer(build: StagedBuild): readonly string[] {
  const { standing, wish } = build;
  const found = leastAndMost(build);
  if (standing.kind !== 'may-be-built' || found === undefined) return [];
  return [
    `From ${brief(wish.output.from, 'voltage')} to ${brief(wish.output.to, 'voltage')} it feeds at least ${roundedDown(found.least.current, 'current')} anywhere`,
    leastAndMostInWords(found),
  ];
}

function guaranteed(build: StagedBuild): Markup {
  return section(
    build.standing.kind === 'may-be-built'
      ? 'What it is guaranteed to feed'
      : 'By these numbers alone it would feed',
    guaranteedChart(build),
    table(
      'As the output rises.',
      [
        { heading: 'Output', as: 'name' },
        { heading: 'At least', as: 'fixed' },
        { heading: 'Arrangement' },
        { heading: 'Set by', as: 'long' },
      ],
      stretchesOf(build.guaranteed, ({ rising }) => rising).map(({ from, to, least, most, of }) => [
        from === to ? brief(from, 'voltage') : `${brief(from, 'voltage')} to ${brief(to, 'voltage')}`,
        spanOf({ least, most }),
        of.arrangement,
        setBy[of.setBy],
      ]),
    ),
  );
}

function arrangements(build: StagedBuild): Markup {
  const { arrangements: each, modules } = build;
  return section(
    'Arrangements',
    table(
      'What feeds the linear stage; ∥ side by side, + in a stack, the lowest first.',
      [
        { heading: 'Name', as: 'name' },
        { heading: 'Form', as: 'fixed' },
        { heading: 'No load', as: 'number' },
        { heading: 'Full load', as: 'number' },
        { heading: 'At most', as: 'number' },
        { heading: 'Set by', as: 'long' },
      ],
      each.map(({ name, circuit, openVoltage, fullVoltage, current, setBy: by }) => [
        name,
        formInSigns(circuit.form),
        estimateCells(openVoltage, 'voltage')[0],
        estimateCells(fullVoltage, 'voltage')[0],
        roundedDown(current, 'current'),
        sentence(by),
      ]),
    ),
    !isRefused(build) && [
      provisional(build),
      each.map(({ name, circuit }, index) => [
        element('h3', {}, `Circuit: ${name}`),
        circuitFigure(`circuit-${index + 1}`, `Circuit: ${name}`, circuit, modules, {
          feeds: 'linear stage',
          all: modules.map(({ name: module }) => module),
        }),
      ]),
    ],
  );
}

function switching(build: StagedBuild): Markup {
  const { switchOvers } = build;
  return section(
    'Switching',
    contactsTable(build),
    table(
      'Switch-overs, by the output voltage.',
      [
        { heading: 'Between', as: 'name' },
        { heading: 'Up at', as: 'number' },
        { heading: 'Back at', as: 'number' },
        { heading: 'Input jumps by, no load', as: 'number' },
        { heading: 'Full load', as: 'number' },
      ],
      switchOvers.map(({ lower, upper, up, down, swing }) => [
        `${lower} → ${upper}`,
        brief(up, 'voltage'),
        brief(down, 'voltage'),
        brief(swing.noLoad, 'voltage'),
        brief(swing.fullLoad, 'voltage'),
      ]),
    ),
    movements(build),
  );
}

function heat(build: StagedBuild): Markup {
  return section('Heat in the linear stage', dissipationMap(build));
}
