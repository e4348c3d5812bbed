import { asGiven } from '../../analysis/in-words.js';
import type { Dimension } from '../../quantity/quantity.js';
import type { RunHeader } from '../../record/run-header.js';
import { element, type Markup } from '../page/markup.js';
import { section } from '../page/page.js';
import { table } from '../page/table.js';
import type { Result } from '../result.js';
import { code, type Fact, facts } from './facts.js';

/** What measured: the instruments as they named themselves, and what was between them and the module. */
export function benchSection({ header }: Result): Markup {
  const { bench, instruments, modules } = header;
  return section(
    'The bench',
    table(
      'Instruments as they named themselves, and the error that their driver files promise at most.',
      [
        { heading: 'Post', as: 'name' },
        { heading: 'Identity', as: 'long' },
        { heading: 'Driver', as: 'text' },
        { heading: 'Address', as: 'text' },
        { heading: 'Promised', as: 'text' },
      ],
      instruments.map(({ role, identity, driver, address, accuracy }) => [
        role,
        identity,
        driver,
        code(address),
        promisesIn(accuracy).map((text, index) => [index > 0 && element('br', {}), text]),
      ]),
    ),
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

const voltageFrom: Readonly<Record<RunHeader['bench']['voltageFrom'], string>> = {
  'meter-at-module': 'of the module: read by the meter at its terminals',
  'load-terminals': 'of the module: read by the load, what the leads take added by calculation',
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

function promisesIn(accuracy: RunHeader['instruments'][number]['accuracy']): readonly string[] {
  return Object.entries(accuracy).flatMap(([reading, { ofReading, fixed }]) => {
    const dimension = Object.hasOwn(dimensions, reading) ? dimensions[reading] : undefined;
    if (dimension === undefined) return [];
    return [`${reading} ±(${asGiven(ofReading, 'ratio')} + ${asGiven(fixed, dimension)})`];
  });
}
