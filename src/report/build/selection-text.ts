import type { Assignment, Selection } from '../../arrangement/selection.js';
import { formatQuantity } from '../../quantity/format-quantity.js';
import { listed } from '../../quantity/listed.js';
import { roundedDown } from '../../quantity/rounded-down.js';
import { alignTable } from '../align.js';
import { printableData } from '../printable.js';
import type { Style } from '../style.js';
import { brief } from './brief.js';
import { headingText } from './heading-text.js';
import { cautionsText, partsText } from './parts-text.js';
import { bullets, prose, section, sentence, text } from './prose.js';
import { concernsText, sourcesText } from './records-text.js';
import { standingText } from './standing-text.js';
import { chosenOf, firstDrawn, inSigns, wished } from './supply-signs.js';

/** Which modules of a drawer to put together, for a terminal or a text file. */
export function selectionAsText(worked: Selection, style: Style): string {
  const selection = printableData(worked);
  const { best, next } = selection;
  const chosen = chosenOf(selection);
  const only = firstDrawn(selection);
  return text([
    headingText(title(selection), chosen, style),
    answer(selection, style),
    best === undefined ? '' : assignmentText('Best', best, style),
    next === undefined ? '' : assignmentText('Next best', next, style),
    restText(selection, style),
    only === undefined ? '' : prose(sentence(only)),
    partsText(selection, style),
    cautionsText(selection, style),
    concernsText(selection, style),
    sourcesText(chosen, style),
  ]);
}

function title({ wish }: Selection): string {
  const supplies = wish.supplies === 1 ? 'One supply' : `${wish.supplies} supplies`;
  return `${supplies} out of a drawer: ${wished(wish)}`;
}

function answer(selection: Selection, style: Style): string {
  const { best, margin, standing } = selection;
  const what = best === undefined ? '' : feeds(best);
  const first = standingText(selection, { what, tooLittle: what }, style);
  const more =
    standing.kind === 'may-be-built' && margin !== undefined ? [prose(sentence(margin.sentence))] : [];
  return [first, ...more].join('\n');
}

function feeds({ supplies, recommended }: Assignment): string {
  const each = supplies.length === 1 ? 'feeds' : 'each feed';
  return `${listed(supplies.map(inSigns))} ${each} up to ${roundedDown(recommended, 'current')} continuously`;
}

function assignmentText(
  name: string,
  { supplies, recommended, imbalance, ballast }: Assignment,
  style: Style,
): string {
  const shares = supplies.some(({ groups }) => groups.some(({ modules }) => modules.length > 1));
  const head = ['', 'continuously', shares ? 'worst imbalance' : ''];
  const rows = supplies.map((supply) => [
    inSigns(supply),
    roundedDown(supply.recommended, 'current'),
    supply.groups.some(({ modules }) => modules.length > 1)
      ? inPercent(Math.max(...supply.groups.map((group) => group.imbalance)))
      : '',
  ]);
  const weakest =
    supplies.length === 1
      ? []
      : [['weakest of them', roundedDown(recommended, 'current'), imbalance > 0 ? inPercent(imbalance) : '']];
  const through = ballast === undefined ? '' : `through ${formatQuantity(ballast, 'resistance')} each; `;
  return section(
    name,
    alignTable([head, ...rows, ...weakest], ['left', 'right', 'right']),
    style,
    `${through}∥ side by side, + in a stack, the lowest first`,
  );
}

function restText({ unused, leftOut, considered }: Selection, style: Style): string {
  const lines = [
    ...(unused.length === 0 ? [] : [`Left over: ${listed(unused)}`]),
    ...leftOutInWords(leftOut),
    ...(considered > 1 ? [`${considered} assignments were compared`] : []),
  ];
  return section('The rest of the drawer', bullets(lines), style);
}

/** Those left out for the same reason together. */
function leftOutInWords(leftOut: Selection['leftOut']): readonly string[] {
  const alike = new Map<string, string[]>();
  for (const { module, why } of leftOut) alike.set(why, [...(alike.get(why) ?? []), module]);
  return [...alike].map(([why, names]) =>
    names.length === 1
      ? `${listed(names)} was left out: ${why}`
      : `Each of ${listed(names)} was left out: ${why}`,
  );
}

function inPercent(ratio: number): string {
  return brief(Number(ratio.toPrecision(2)), 'ratio');
}
