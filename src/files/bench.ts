import type { Amperes, Celsius, Kelvins, Ohms, Seconds, Volts, Watts } from '../quantity/quantity.js';
import type { Driver, Role } from './driver.js';
import type { Simulation } from './simulation-section.js';

/** A bench file: the instruments, leads and hard limits of one work place. */
export interface Bench {
  readonly name: string;
  readonly instruments: {
    readonly load: InstrumentPlace;
    readonly meter?: InstrumentPlace;
    readonly scanner?: InstrumentPlace;
    readonly thermometer?: InstrumentPlace;
    readonly source?: SourcePlace;
  };
  /** There and back; used when nothing senses at the module. 0 ± 0 where the file gives none. */
  readonly leads: { readonly resistance: Ohms; readonly uncertainty: Ohms };
  readonly voltageFrom: 'meter-at-module' | 'load-terminals';
  /** Never exceeded, whatever a procedure asks. */
  readonly limits: {
    readonly voltage: Volts;
    readonly current: Amperes;
    readonly power: Watts;
    /** Of what the thermometer touches. */
    readonly temperature?: Celsius;
  };
  /** The surroundings of the module, for its rise above them. */
  readonly ambient?: { readonly temperature: Celsius; readonly uncertainty: Kelvins };
  /** How the modules of a group or of a stack are told apart. */
  readonly group?: Group;
  /** What is really there, on a bench with simulated instruments. */
  readonly simulation?: Simulation;
  /** Recorded answers in place of the person at the bench, where every instrument is replayed. */
  readonly operator?: ReplayAddress;
}

/** The places of a circuit of several modules, in the order of the circuit, and how a voltage is read at each. */
export interface Group {
  /** A scanner puts the meter across each place; or each place has a meter; or the operator moves the one there is. */
  readonly measuredBy: 'scanner' | 'meters' | 'operator';
  /** The scanner's channel that puts the meter across the output of the whole. */
  readonly outputChannel?: number;
  readonly places: readonly GroupPlace[];
}

export interface GroupPlace {
  /** In series with the module: its measured value, and how far off that may be (half-width). */
  readonly ballast?: { readonly resistance: Ohms; readonly uncertainty: Ohms };
  /** The scanner's channel that puts the meter across the ballast (parallel) or the module's output (series). */
  readonly channel?: number;
  /** A meter of its own across the same. */
  readonly meter?: InstrumentPlace;
}

/** The driver of each instrument of a bench; `places` are those of the places' own meters, a place each. */
export interface BenchDrivers {
  readonly load: Driver;
  readonly meter?: Driver | undefined;
  readonly scanner?: Driver | undefined;
  readonly thermometer?: Driver | undefined;
  readonly source?: Driver | undefined;
  readonly places?: readonly (Driver | undefined)[] | undefined;
}

/** The part that an instrument has on a bench: `meter-2` is the own meter of the second place. */
export type Post = 'load' | 'meter' | 'scanner' | 'thermometer' | 'source' | `meter-${number}`;

/** Every instrument of a bench with its post, the load first. */
export function postsOf({
  instruments,
  group,
}: Pick<Bench, 'instruments' | 'group'>): readonly (readonly [Post, InstrumentPlace])[] {
  const { load, meter, scanner, thermometer, source } = instruments;
  const others = [
    ['meter', meter],
    ['scanner', scanner],
    ['thermometer', thermometer],
    ['source', source],
    ...(group?.places ?? []).map((place, index) => [`meter-${index + 1}`, place.meter] as const),
  ] as const;
  return [
    ['load', load],
    ...others.flatMap(([post, place]): [Post, InstrumentPlace][] =>
      place === undefined ? [] : [[post, place]],
    ),
  ];
}

export function isPost(text: string): text is Post {
  return /^(?:load|scanner|thermometer|source|meter(?:-[1-9]\d?)?)$/.test(text);
}

/** The role that a driver must have for a post. */
export function roleOf(post: Post): Role {
  return post === 'load' || post === 'scanner' || post === 'thermometer' || post === 'source'
    ? post
    : 'meter';
}

/** Where a bench file names the instrument at a post. */
export function placeOf(post: Post): readonly (string | number)[] {
  if (post === 'load' || roleOf(post) !== 'meter' || post === 'meter') return ['instruments', post];
  return ['group', 'places', Number(post.slice('meter-'.length)) - 1, 'meter'];
}

/** The driver at a post; undefined where the bench has none there. */
export function driverAt(drivers: BenchDrivers, post: Post): Driver | undefined {
  if (
    post === 'load' ||
    post === 'meter' ||
    post === 'scanner' ||
    post === 'thermometer' ||
    post === 'source'
  ) {
    return drivers[post];
  }
  return drivers.places?.[Number(post.slice('meter-'.length)) - 1];
}

export interface InstrumentPlace {
  /** The name of a shipped driver, or a path relative to the bench file. */
  readonly driver: string;
  readonly connection: ConnectionAddress;
  /** Of an instrument with several. */
  readonly channel?: number;
}

/** The dc source that feeds the inputs of the modules. */
export interface SourcePlace extends InstrumentPlace {
  /** What the modules are fed with, and the most that they may take. */
  readonly voltage: Volts;
  readonly current: Amperes;
  /** How long it is off to clear a latch. */
  readonly offFor: Seconds;
}

export type ConnectionAddress =
  | { readonly kind: 'tcp'; readonly host: string; readonly port: number }
  /** What it does not say of the line the driver says, or it is as usual. */
  | ({ readonly kind: 'serial'; readonly path: string } & Partial<SerialSettings>)
  | ReplayAddress
  /** `simulated:` picks the dialect that understands the driver; `simulated:<dialect>` names one. */
  | { readonly kind: 'simulated'; readonly dialect?: string };

/** A recording, by its file. */
export interface ReplayAddress {
  readonly kind: 'replay';
  readonly file: string;
}

export interface SerialSettings {
  readonly baud: number;
  readonly data: 7 | 8;
  readonly parity: 'none' | 'even' | 'odd';
  readonly stop: 1 | 2;
  readonly flow: 'none' | 'hardware' | 'software';
  /** The control lines while the port is open; as the system leaves them where nothing is said. */
  readonly dtr?: 'on' | 'off';
  readonly rts?: 'on' | 'off';
}
