import { type Circuit, modulesOf } from '../../arrangement/build.js';
import { type AnyBuild, outcomeOf } from '../build/any-build.js';
import { sentence } from '../build/prose.js';
import { partMarks } from '../diagram/part-marks.js';
import { element, type Markup } from '../page/markup.js';
import { bullets, section } from '../page/page.js';
import { table } from '../page/table.js';

/** What to get and what it must bear. Whoever must not build a thing gets no list of its parts. */
export function partsSection(build: AnyBuild): Markup | undefined {
  if (isRefused(build) || build.parts.length === 0) return undefined;
  return section(
    'Parts',
    provisional(build),
    table(
      'Marks are those of the circuit; ratings are the least to buy.',
      [
        { heading: 'Mark', as: 'name' },
        { heading: 'What', as: 'text' },
        { heading: 'Ratings', as: 'fixed' },
        { heading: 'Why', as: 'long' },
      ],
      build.parts.map(({ marks, what, ratings, why }) => [
        marks.join(', '),
        isDrawn(build, marks) ? what : [what, element('span', { class: 'soft' }, ' (not drawn)')],
        ratings.map((rating, index) => [index > 0 && element('br', {}), rating]),
        sentence(why),
      ]),
    ),
  );
}

/** Whether a part stands in the circuit; what is optional does not. */
function isDrawn(build: AnyBuild, marks: readonly string[]): boolean {
  const drawn = new Set(marksOf(build));
  return marks.every((mark) => drawn.has(mark));
}

function marksOf(build: AnyBuild): readonly string[] {
  if (build.kind === 'stages') {
    const all = build.modules.map(({ name }) => name);
    return build.arrangements.flatMap(({ circuit }) => marksIn(circuit, all));
  }
  return build.circuit === undefined ? [] : marksIn(build.circuit);
}

function marksIn(circuit: Circuit, all?: readonly string[]): readonly string[] {
  const { ballast, reverse, or } = partMarks(circuit, all);
  return [...modulesOf(circuit.form), ...ballast.values(), ...reverse.values(), ...or.values()];
}

export function cautionsSection({ cautions }: AnyBuild): Markup | undefined {
  return cautions.length === 0 ? undefined : section('Cautions', bullets(cautions.map(sentence)));
}

/** Nothing on the page of such a thing may look like something to build. */
export function isRefused(build: AnyBuild): boolean {
  return outcomeOf(build) === 'must-not-be-built';
}

/** Said wherever something is shown that is not to be built as things stand. */
export function provisional(build: AnyBuild): Markup | undefined {
  switch (outcomeOf(build)) {
    case 'cannot-tell':
      return element(
        'p',
        { class: 'warning' },
        element('strong', {}, 'Not to be built yet: '),
        'the records leave open whether it may be.',
      );
    case 'too-little':
      return element(
        'p',
        { class: 'warning' },
        element('strong', {}, 'Not for the load asked for: '),
        'it is more than is recommended.',
      );
    case 'may-be-built':
    case 'must-not-be-built':
      return undefined;
  }
}
