import type { Assignment, Selection } from '../../arrangement/selection.js';
import { formatQuantity } from '../../quantity/format-quantity.js';
import { listed } from '../../quantity/listed.js';
import { roundedDown } from '../../quantity/rounded-down.js';
import { brief } from '../build/brief.js';
import { sentence } from '../build/prose.js';
import { chosenOf, firstDrawn, inSigns, wished } from '../build/supply-signs.js';
import { barChart } from '../chart/bar-chart.js';
import { element, type Markup } from '../page/markup.js';
import { bullets, section, type Sheet } from '../page/page.js';
import { table } from '../page/table.js';
import { banner } from './banner.js';
import { circuitSection } from './circuit.js';
import { figure } from '../page/figure.js';
import { cautionsSection, partsSection } from './parts.js';
import { concernsSection, modulesSection, sourcesSection } from './records.js';

/** Which modules of a drawer to put together. */
export function selectionSheet(build: Selection): Sheet {
  const { best, next, circuit } = build;
  const only = firstDrawn(build);
  return {
    kind: 'Build sheet · a choice out of a drawer',
    title: `${build.wish.supplies === 1 ? 'One supply' : `${build.wish.supplies} supplies`}: ${wished(build.wish)}`,
    answer: banner(build, answer(build)),
    sections: [
      best &&
        section(
          'Best and next best',
          comparison(best, next),
          assignment('The best.', best),
          next && assignment('The next best.', next),
          only && element('p', {}, sentence(only)),
        ),
      circuit && circuitSection(build, circuit, build.modules),
      partsSection(build),
      rest(build),
      cautionsSection(build),
      concernsSection(build.concerns),
      modulesSection(build.modules),
      sourcesSection(chosenOf(build)),
    ],
  };
}

function answer({ best, margin, standing }: Selection): readonly string[] {
  if (best === undefined || standing.kind !== 'may-be-built') return [];
  const each = best.supplies.length === 1 ? 'feeds' : 'each feed';
  return [
    `${listed(best.supplies.map(inSigns))} ${each} up to ${roundedDown(best.recommended, 'current')} continuously`,
    ...(margin === undefined ? [] : [margin.sentence]),
  ];
}

/** The current of each supply of the best and of the next best, side by side. */
function comparison(best: Assignment, next: Assignment | undefined): Markup {
  const title = 'What each supply feeds continuously';
  const bars = [
    ...best.supplies.map((supply) => ({ supply, of: 'best', look: 0 })),
    ...(next?.supplies ?? []).map((supply) => ({ supply, of: 'next best', look: 1 })),
  ].map(({ supply, of, look }) => ({
    name: `${of}: ${inSigns(supply)}`,
    says: roundedDown(supply.recommended, 'current'),
    from: 0,
    to: supply.recommended,
    look,
  }));
  return figure(
    title,
    barChart({
      id: 'supplies',
      title,
      description: bars
        .map(({ name, says }) => `${name}, ${says}`)
        .join('; ')
        .concat('.'),
      x: { label: 'Recommended', dimension: 'current' },
      bars,
    }),
    '∥ side by side, + in a stack, the lowest first.',
  );
}

function assignment(
  caption: string,
  { supplies, recommended, imbalance, ballast }: Assignment,
): Markup | undefined {
  const through =
    ballast === undefined ? '' : ` ${formatQuantity(ballast, 'resistance')} in series with each module.`;
  const rows = supplies.flatMap((supply, index) =>
    supply.groups.map((group, place) => [
      supplies.length === 1 ? `group ${place + 1}` : `supply ${index + 1}, group ${place + 1}`,
      group.modules.join(' ∥ '),
      roundedDown(group.recommended, 'current'),
      group.modules.length > 1 ? percent(group.imbalance) : '',
    ]),
  );
  const shares = supplies.some(({ groups }) => groups.some(({ modules }) => modules.length > 1));
  return table(
    `${caption}${through}`,
    [
      { heading: 'Place, the lowest first', as: 'name' },
      { heading: 'Modules' },
      { heading: 'Continuously', as: 'number' },
      ...(shares ? [{ heading: 'Imbalance', as: 'number' } as const] : []),
    ],
    [
      ...rows,
      ['weakest of all', '', roundedDown(recommended, 'current'), imbalance > 0 ? percent(imbalance) : ''],
    ].map((row) => (shares ? row : row.slice(0, -1))),
  );
}

function rest({ unused, leftOut, considered }: Selection): Markup | undefined {
  const lines = [
    ...(unused.length === 0 ? [] : [`Left over: ${listed(unused)}.`]),
    ...leftOut.map(({ module, why }) => sentence(`${module} was left out: ${why}`)),
    ...(considered > 1 ? [`${considered} assignments were compared.`] : []),
  ];
  return lines.length === 0 ? undefined : section('The rest of the drawer', bullets(lines));
}

function percent(ratio: number): string {
  return brief(Number(ratio.toPrecision(2)), 'ratio');
}
