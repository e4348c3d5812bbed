import { type Circuit, type Form, modulesOf } from '../../arrangement/build.js';
import type { ModuleProfile } from '../../arrangement/module-profile.js';
import { listed } from '../../quantity/listed.js';
import type { AnyBuild } from '../build/any-build.js';
import { formInWords } from '../build/form-text.js';
import { circuitDiagram } from '../diagram/circuit-diagram.js';
import type { Surroundings } from '../diagram/layout.js';
import { partMarks } from '../diagram/part-marks.js';
import { element, type Markup } from '../page/markup.js';
import { section } from '../page/page.js';
import { wide } from '../page/table.js';
import { isRefused, provisional } from './parts.js';
import { plateOf } from './records.js';

/** The circuit as it is to be wired; a thing that must not be built is not drawn. */
export function circuitSection(
  build: AnyBuild,
  circuit: Circuit,
  modules: readonly ModuleProfile[],
): Markup | undefined {
  if (isRefused(build)) return undefined;
  return section('Circuit', provisional(build), circuitFigure('circuit', 'Circuit', circuit, modules));
}

/** A circuit with the words below it that say the same. */
export function circuitFigure(
  id: string,
  title: string,
  circuit: Circuit,
  modules: readonly ModuleProfile[],
  within?: Pick<Surroundings, 'feeds' | 'all'>,
): Markup {
  const words = inWords(circuit, within?.all);
  const earthed = new Set(
    modules.filter(({ earth }) => earth?.relation === 'bonded').map(({ name }) => name),
  );
  const surroundings: Surroundings = {
    plate: (name) => {
      const module = modules.find((each) => each.name === name);
      return module === undefined ? '' : plateOf(module);
    },
    earthed,
    ...within,
  };
  return element(
    'figure',
    {},
    wide(title, circuitDiagram({ id, title, description: words }, circuit, surroundings)),
    element('figcaption', {}, words),
  );
}

function inWords(circuit: Circuit, all?: readonly string[]): string {
  const marks = partMarks(circuit, all);
  const { form } = circuit;
  const whole = form.kind === 'module' ? `${form.name} alone` : formInWords(form);
  return [
    whole,
    ...(marks.ballast.size > 0 ? [`ballasts ${range(marks.ballast)} in series with the outputs`] : []),
    ...(marks.reverse.size > 0 ? [`reverse diodes ${range(marks.reverse)} across the outputs`] : []),
    ...(marks.or.size > 0 ? [`diodes ${range(marks.or)} in series, so that nothing flows back`] : []),
  ]
    .join('; ')
    .concat(hasParts(circuit) ? numbering(form, all) : '.');
}

function numbering(form: Form, all?: readonly string[]): string {
  if (all !== undefined) return '; what stands at a module has the same number in every arrangement.';
  return modulesOf(form).length > 1 ? '; numbered in the order of the modules.' : '.';
}

function hasParts({ ballast, reverseDiodes, orDiodes }: Circuit): boolean {
  return ballast !== undefined || reverseDiodes || orDiodes;
}

/** `R1 and R2`, `R1 to R4`, `R1, R4 and R2`. */
function range(marks: ReadonlyMap<string, string>): string {
  const all = [...marks.values()];
  const [first = '', last = ''] = [all.at(0), all.at(-1)];
  const places = all.map((mark) => Number(mark.slice(1)));
  const isRow = places.every((place, index) => place === (places[0] ?? 0) + index);
  return all.length > 2 && isRow ? `${first} to ${last}` : listed(all);
}
