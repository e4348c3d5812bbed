import { readFileSync, readdirSync } from 'node:fs';
import { driverOfChannel } from '../../../src/files/driver-channel.js';
import type { Driver } from '../../../src/files/driver.js';
import { parseDriver } from '../../../src/files/read-driver.js';
import type { Command } from './command.js';
import { channelsTree, type LoadBody, loadBody, loadTree, remoteFirst, shortTree } from './load-tree.js';
import { meterBody, type MeterFunction, meterTree, thermometerTree } from './meter-tree.js';
import type { ReplyForm } from './response.js';
import { scannerTree } from './scanner-tree.js';
import { sourceBody, sourceTree } from './source-tree.js';
import { StandardInstrument } from './standard-instrument.js';

/** The instrument of the standards that a shipped driver is for, with what there is to be read on it. */
export interface Family {
  readonly driver: Driver;
  readonly instrument: StandardInstrument;
  /** Makes it so that this number is what will be measured. */
  readonly measures: (reading: string, value: number) => void;
  /** What it was told, by operation: the number or the state that it has now. */
  readonly has: (operation: string) => unknown;
  /** What it is set to, of a meter. */
  readonly function?: { set: (to: MeterFunction) => void };
  readonly closed?: Set<number>;
}

type Interior = Omit<Family, 'driver' | 'instrument'> & { readonly commands: readonly Command[] };

/** The bench names the second channel. */
export const channel = 2;

const ofCurrentAndVoltage = {
  current: 'CURRent',
  voltage: 'VOLTage',
  power: 'POWer',
} as const;

function ofLoad(body: LoadBody, commands: readonly Command[]): Interior {
  return {
    commands,
    measures: (reading, value) => {
      body.measured[ofCurrentAndVoltage[reading as 'current']] = value;
    },
    has: (operation) => {
      const [, kind = '', what = ''] = /^(set|protect)-(.*)$/.exec(operation) ?? [];
      const node = ofCurrentAndVoltage[what as 'current' | 'voltage'];
      if (kind === 'set') return body.levels[node];
      if (kind === 'protect') return body.protections[node];
      return operation.endsWith('-mode') ? body.mode : body.input;
    },
  };
}

function ofMeter(): Interior {
  const body = meterBody();
  return {
    commands: meterTree(body),
    measures: (reading, value) => {
      body.measured[reading === 'voltage' ? 'VOLTage[:DC]' : 'RESistance'] = value;
    },
    has: () => body.function,
    function: {
      set: (to) => {
        body.function = to;
      },
    },
  };
}

const interiors: Readonly<Record<string, () => Interior>> = {
  'load-input-scpi': () => {
    const body = loadBody();
    return ofLoad(
      body,
      loadTree(() => body),
    );
  },
  'load-source-scpi': () => {
    const body = loadBody();
    return ofLoad(
      body,
      loadTree(() => body),
    );
  },
  'load-remote-scpi': () => {
    const body = loadBody();
    return ofLoad(body, remoteFirst(loadTree(() => body)));
  },
  'load-channel-scpi': () => {
    const bodies = [loadBody(), loadBody(), loadBody(), loadBody()];
    const tree = channelsTree(bodies);
    return ofLoad(bodies[channel - 1] ?? loadBody(), tree);
  },
  'load-short-scpi': () => {
    const body = loadBody();
    return ofLoad(body, shortTree(body));
  },
  'meter-read-scpi': ofMeter,
  'meter-query-scpi': ofMeter,
  'meter-function-scpi': ofMeter,
  'scanner-route-scpi': () => {
    const closed = new Set<number>();
    return {
      commands: scannerTree([101, 102, 103, 104], closed),
      measures: () => undefined,
      has: () => [...closed],
      closed,
    };
  },
  'thermometer-query-scpi': () => {
    let celsius = 23;
    return {
      commands: thermometerTree(() => celsius),
      measures: (_, value) => {
        celsius = value;
      },
      has: () => undefined,
    };
  },
  'source-output-scpi': () => {
    const body = sourceBody();
    return {
      commands: sourceTree(body),
      measures: (reading, value) => {
        body.measured[ofCurrentAndVoltage[reading as 'current' | 'voltage'] as 'CURRent'] = value;
      },
      has: (operation) =>
        operation.startsWith('set-')
          ? body.levels[operation === 'set-current' ? 'CURRent' : 'VOLTage']
          : body.output,
    };
  },
};

const folder = new URL('../../../drivers/', import.meta.url);

/** All that are shipped. */
export const familyNames = readdirSync(folder)
  .filter((file) => file.endsWith('.yaml'))
  .map((file) => file.replace('.yaml', ''));

const drivers = new Map<string, Driver>();

function shippedDriver(name: string): Driver {
  const known =
    drivers.get(name) ??
    parseDriver(readFileSync(new URL(`${name}.yaml`, folder), 'utf8'), `drivers/${name}.yaml`);
  drivers.set(name, known);
  return known;
}

/** A fresh instrument for a shipped driver, which has just got its power. */
export function family(name: string, form?: ReplyForm): Family {
  const interior = interiors[name];
  if (interior === undefined) throw new Error(`nothing here is spoken to as ${name} has it`);
  const { commands, ...rest } = interior();
  const instrument = new StandardInstrument({
    identity: 'NURSERY,BENCH,K1,1.0',
    commands,
    ...(form && { form }),
  });
  return { driver: driverOfChannel(shippedDriver(name), channel), instrument, ...rest };
}
