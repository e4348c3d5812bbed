import { formatQuantity } from '../quantity/format-quantity.js';
import type { Amperes, Volts } from '../quantity/quantity.js';
import type { Bench, InstrumentPlace } from './bench.js';
import { formatAddress } from './connection-address.js';
import { headers } from './file-kind.js';
import { simulatedText, type TriedOn } from './new-simulation.js';
import { comment, written } from './written-yaml.js';

/** An instrument, and what whoever reads the file may want to know of it: who answered there, or that nobody did. */
export interface NewInstrument extends InstrumentPlace {
  readonly remark?: string;
}

export interface NewSource extends NewInstrument {
  readonly voltage: Volts;
  readonly current: Amperes;
}

/** What a bench file is made from. */
export interface NewBench extends Pick<Bench, 'name' | 'voltageFrom' | 'limits' | 'ambient'> {
  readonly instruments: {
    readonly load: NewInstrument;
    readonly meter?: NewInstrument;
    readonly thermometer?: NewInstrument;
    readonly source?: NewSource;
  };
  /** Where they are known. */
  readonly leads?: Bench['leads'];
  /** The module that is really there, where the instruments are simulated. */
  readonly tries?: TriedOn;
}

/** The text of a bench file that reads back to this bench, with a comment on each key. */
export function benchText(bench: NewBench): string {
  return [
    `railproof: ${headers.bench}\n`,
    comment('One work place: its instruments, its leads and its hard limits.'),
    '\n',
    comment('What the bench is called; it stands in every record made on it.'),
    `name: ${written(bench.name)}\n`,
    '\n',
    instrumentsText(bench),
    '\n',
    measuringText(bench),
    '\n',
    limitsText(bench),
    '\n',
    ambientText(bench),
    ...(bench.tries === undefined ? [] : ['\n', simulatedText(bench.tries)]),
  ].join('');
}

function instrumentsText({ instruments }: NewBench): string {
  const { load, meter, thermometer, source } = instruments;
  const fed = (place: NewSource): string[] => [
    `voltage: ${formatQuantity(place.voltage, 'voltage')}`,
    `current: ${formatQuantity(place.current, 'current')}`,
    'off-for: 5 s',
  ];
  return [
    comment(
      "Each instrument by its part in the work: the driver, which says how it is spoken to (a shipped one's name, " +
        'or the path of a file from here), and where it is.',
    ),
    'instruments:\n',
    placeText('load', load),
    ...(meter === undefined
      ? [comment('meter: { driver: meter-read-scpi, connection: "tcp://192.0.2.18:5025" }', '  ')]
      : [comment('Its probes at the output of the module itself.', '  '), placeText('meter', meter)]),
    ...(thermometer === undefined
      ? []
      : [
          comment('Its probe on the hottest place of the case.', '  '),
          placeText('thermometer', thermometer),
        ]),
    ...(source === undefined
      ? []
      : [
          comment(
            'Feeds modules that run from dc: with what, how much they may take together, and how long it is off ' +
              'to clear a latch.',
            '  ',
          ),
          placeText('source', source, fed(source)),
        ]),
  ].join('');
}

function placeText(post: string, place: NewInstrument, more: readonly string[] = []): string {
  const { driver, connection, channel, remark } = place;
  const entries = [
    `driver: ${written(driver)}`,
    `connection: ${written(formatAddress(connection))}`,
    ...(channel === undefined ? [] : [`channel: ${channel}`]),
    ...more,
  ];
  const said = remark === undefined || remark === '' ? '' : comment(remark, '  ');
  return `${said}  ${post}: { ${entries.join(', ')} }\n`;
}

function measuringText({ voltageFrom, leads }: NewBench): string {
  return [
    comment(
      "Where the voltage of the module is read: meter-at-module, so that the leads don't count, or load-terminals, " +
        'from which what the leads drop is reckoned off.',
    ),
    `voltage-from: ${voltageFrom}\n`,
    comment(
      'The leads from module to load, there and back, joints included, and how far off that may be. Measured with ' +
        'four leads, or from a known current through them and the voltage that it drops.',
    ),
    leads === undefined
      ? comment('leads: { resistance: 35 mΩ, uncertainty: 5 mΩ }')
      : `leads: { resistance: ${formatQuantity(leads.resistance, 'resistance')}, ` +
        `uncertainty: ${formatQuantity(leads.uncertainty, 'resistance')} }\n`,
  ].join('');
}

function limitsText({ limits }: NewBench): string {
  const { voltage, current, power, temperature } = limits;
  const entries = [
    `voltage: ${formatQuantity(voltage, 'voltage')}`,
    `current: ${formatQuantity(current, 'current')}`,
    `power: ${formatQuantity(power, 'power')}`,
    ...(temperature === undefined ? [] : [`temperature: ${formatQuantity(temperature, 'temperature')}`]),
  ];
  return (
    comment(
      'Yours: nothing that a procedure asks goes beyond them, and a reading beyond one stops the run. The least of ' +
        'what instruments, leads and the place can bear.' +
        (temperature === undefined
          ? ' With a thermometer also a temperature: the warmest a case may become.'
          : ' The temperature is the warmest that what the thermometer touches may become.'),
    ) + `limits: { ${entries.join(', ')} }\n`
  );
}

function ambientText({ ambient }: NewBench): string {
  return (
    comment(
      "The air around the module, half a metre away, and how far off that may be: a module's rise is above it. Left " +
        'out, the first looks at the cold module stand for it, less surely.',
    ) +
    (ambient === undefined
      ? comment('ambient: { temperature: 23 °C, uncertainty: 2 K }')
      : `ambient: { temperature: ${formatQuantity(ambient.temperature, 'temperature')}, ` +
        `uncertainty: ${formatQuantity(ambient.uncertainty, 'temperature-difference')} }\n`)
  );
}
