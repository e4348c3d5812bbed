import { type Circuit, modulesOf } from '../../arrangement/build.js';
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
  feeds?: string,
): Markup {
  const words = inWords(circuit);
  const earthed = new Set(
    modules.filter(({ earth }) => earth?.relation === 'bonded').map(({ name }) => name),
  );
  const surroundings: Surroundings = {
    plate: (name) => {
      const module = modules.find((each) => each.name === name);
      return module === undefined ? '' : plateOf(module);
    },
    earthed,
    ...(feeds === undefined ? {} : { feeds }),
  };
  return element(
    'figure',
    {},
    wide(title, circuitDiagram({ id, title, description: words }, circuit, surroundings)),
    element('figcaption', {}, words),
  );
}

function inWords(circuit: Circuit): string {
  const marks = partMarks(circuit);
  const { form } = circuit;
  const whole = form.kind === 'module' ? `${form.name} alone` : formInWords(form);
  return [
    whole,
    ...(marks.ballast.size > 0 ? [`ballasts ${range(marks.ballast)} in series with the outputs`] : []),
    ...(marks.reverse.size > 0 ? [`reverse diodes ${range(marks.reverse)} across the outputs`] : []),
    ...(marks.or.size > 0 ? [`diodes ${range(marks.or)} in series, so that nothing flows back`] : []),
  ]
    .join('; ')
    .concat(
      modulesOf(form).length > 1 && hasParts(circuit) ? '; numbered in the order of the modules.' : '.',
    );
}

function hasParts({ ballast, reverseDiodes, orDiodes }: Circuit): boolean {
  return ballast !== undefined || reverseDiodes || orDiodes;
}

/** `R1 and R2`, `R1 to R4`. */
function range(marks: ReadonlyMap<string, string>): string {
  const all = [...marks.values()];
  return all.length < 3 ? listed(all) : `${all[0] ?? ''} to ${all.at(-1) ?? ''}`;
}
