import { asGiven } from '../../analysis/in-words.js';
import type { Dimension } from '../../quantity/quantity.js';
import type { RunHeader } from '../../record/run-header.js';
import { element, type Markup } from '../page/markup.js';
import { section } from '../page/page.js';
import type { Result } from '../result.js';
import { code, type Fact, facts } from '../page/facts.js';

/** What measured: the instruments as they named themselves, and what was between them and the module. */
export function benchSection({ header }: Result): Markup {
  const { bench, instruments, modules } = header;
  return section(
    'The bench',
    facts(instruments.map((instrument): Fact => [instrument.role, instrumentInWords(instrument)])),
    element('h3', {}, 'Between them and the module'),
    facts([
      ['Leads', `${resistanceInWords(bench.leads)}, there and back`],
      ['Voltage', voltageFrom[bench.voltageFrom]],
      ...ballastsIn(bench, modules),
      bench.ambient === undefined
        ? undefined
        : [
            'Surroundings',
            `${asGiven(bench.ambient.temperature, 'temperature')} ± ${asGiven(bench.ambient.uncertainty, 'temperature-difference')}, as the bench file says`,
          ],
    ]),
  );
}

type Instrument = RunHeader['instruments'][number];

/** As it named itself; by which driver and where it was spoken to; and what that driver's file promises. */
function instrumentInWords({ identity, driver, address, accuracy }: Instrument): Markup {
  const promised = promisesIn(accuracy);
  return element(
    'span',
    {},
    identity,
    element('br', {}),
    `driver ${driver} at `,
    code(address),
    promised.length > 0 && [element('br', {}), `wrong at most by: ${promised.join(', ')}`],
  );
}

const voltageFrom: Readonly<Record<RunHeader['bench']['voltageFrom'], string>> = {
  'meter-at-module': 'read by the meter at the terminals of the module',
  'load-terminals': 'read by the load; what the leads take is added by calculation',
};

function resistanceInWords(given: RunHeader['bench']['leads']): string {
  return `${asGiven(given.resistance, 'resistance')} ± ${asGiven(given.uncertainty, 'resistance')}`;
}

function ballastsIn(
  { places = [] }: RunHeader['bench'],
  modules: RunHeader['modules'],
): readonly (Fact | undefined)[] {
  return places.map(({ ballast }, index) =>
    ballast === undefined
      ? undefined
      : [`Ballast of ${modules[index]?.name ?? ''}`, resistanceInWords(ballast)],
  );
}

/** Of the fixed part of a promise; what another version promises of is not known here. */
const dimensions: Readonly<Record<string, Dimension>> = {
  voltage: 'voltage',
  current: 'current',
  resistance: 'resistance',
  temperature: 'temperature-difference',
};

function promisesIn(accuracy: Instrument['accuracy']): readonly string[] {
  return Object.entries(accuracy).flatMap(([reading, { ofReading, fixed }]) => {
    const dimension = Object.hasOwn(dimensions, reading) ? dimensions[reading] : undefined;
    if (dimension === undefined) return [];
    return [`${reading} ${asGiven(ofReading, 'ratio')} of the reading + ${asGiven(fixed, dimension)}`];
  });
}
