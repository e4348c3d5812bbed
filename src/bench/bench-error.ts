import type { DriverPart } from '../instrument/driver-part.js';
import { exitCodes, RailproofError } from '../errors/railproof-error.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { Amperes, Volts } from '../quantity/quantity.js';

/** A reading went beyond a limit: the run stops and the bench is made safe. */
export class GuardTrippedError extends RailproofError {
  readonly code = 'GUARD_TRIPPED';
  readonly exitCode = exitCodes.stopped;
  readonly guard: string;

  constructor(guard: string, text: string, advice: string) {
    super(text, { advice });
    this.guard = guard;
  }
}

/** Something was not as it must be before anything is energised. */
export class PreFlightError extends RailproofError {
  readonly code = 'PRE_FLIGHT';
  readonly exitCode = exitCodes.stopped;
  /** What was found, in words. */
  readonly what: string;

  /** @param when other than before anything was switched on */
  constructor(what: string, advice: string, when = 'before anything was switched on') {
    super(`${when}: ${what}`, { advice });
    this.what = what;
  }
}

/** A step asked for more than the bench allows; the bench has refused. */
export class BeyondCeilingError extends RailproofError {
  readonly code = 'BEYOND_CEILING';
  readonly exitCode = exitCodes.stopped;
  readonly setBy: string;

  constructor(asked: string, ceiling: string, setBy: string) {
    super(`${asked} was asked for and ${setBy} allows ${ceiling}`, {
      advice:
        'lower what the procedure asks, or use a bench that allows it; --dry-run shows every ceiling and who sets it',
    });
    this.setBy = setBy;
  }
}

/**
 * The load's input is off and nobody here switched it off, while the module still gives its voltage: what no
 * longer flows is the load's doing, and says nothing of the module.
 */
export class LoadSwitchedOffError extends RailproofError {
  readonly code = 'LOAD_SWITCHED_OFF';
  readonly exitCode = exitCodes.stopped;
  readonly address: string;
  /** What the load had been set to. */
  readonly set: { readonly current?: Amperes; readonly voltage?: Volts };

  constructor(address: string, set: LoadSwitchedOffError['set']) {
    const at =
      set.voltage === undefined
        ? formatQuantity(set.current ?? 0, 'current', { significant: 4 })
        : formatQuantity(set.voltage, 'voltage', { significant: 4 });
    super(
      `the load at ${address} switched its input off by itself at ${at}: its own protection, or someone at its panel`,
      {
        advice:
          "no dropout was recorded there; look at the load's panel for what it protects itself against, and " +
          'ask for less than that, or begin again when nobody else uses it',
      },
    );
    this.address = address;
    this.set = set;
  }
}

/**
 * The load was on when it was last heard of, and is off now that it answers again. Nobody knows why, so nobody
 * here switches it on again.
 */
export class LoadWentOffError extends RailproofError {
  readonly code = 'LOAD_WENT_OFF';
  readonly exitCode = exitCodes.stopped;
  readonly address: string;

  constructor(address: string) {
    super(
      `the input of the load at ${address} was on when it was last heard of, and is off now that it answers again`,
      {
        advice:
          'it lost its power, protects itself, or someone switched it off at its panel: look there first; it is not switched on again by itself',
      },
    );
    this.address = address;
  }
}

/**
 * The source was on when it was last heard of, and is off now: what the module no longer gives is not the module's
 * doing, and nobody here feeds it again not knowing why.
 */
export class SourceWentOffError extends RailproofError {
  readonly code = 'SOURCE_WENT_OFF';
  readonly exitCode = exitCodes.stopped;
  readonly address: string;

  constructor(address: string) {
    super(`the output of the source at ${address} was on when it was last heard of, and is off now`, {
      advice:
        'it lost its power, protects itself, or someone switched it off at its panel: look there first. Nothing was made of what the module did meanwhile',
    });
    this.address = address;
  }
}

/** The source gives less than it was told: whatever limit shows then is the source's, and not the module's. */
export class SourceSagsError extends RailproofError {
  readonly code = 'SOURCE_SAGS';
  readonly exitCode = exitCodes.stopped;
  readonly address: string;
  readonly gives: Volts;
  readonly told: Volts;

  constructor(address: string, { gives, told }: { readonly gives: Volts; readonly told: Volts }) {
    const [given, asked] = [gives, told].map((volts) => formatQuantity(volts, 'voltage', { significant: 3 }));
    super(`the source at ${address} gives ${String(given)} and was told ${String(asked)}`, {
      advice:
        "it has come to its own limit before the module came to its: raise the source's current in the bench file, as far as the leads allow, or ask less of the module. Nothing was made of what the module did meanwhile",
    });
    this.address = address;
    this.gives = gives;
    this.told = told;
  }
}

/** The load, or the source, does not do what it was told. */
export class DisobeyedError extends RailproofError {
  readonly code = 'DISOBEYED';
  readonly exitCode = exitCodes.instrument;
  readonly address: string;

  /** What of its driver it was told by, where that is likely what is wrong. */
  readonly part: DriverPart | undefined;

  constructor(
    address: string,
    what: string,
    advice: string,
    who: 'load' | 'source' = 'load',
    told?: { readonly part: DriverPart; readonly complaint: unknown },
  ) {
    super(`the ${who} at ${address} ${what}`, { advice, cause: told?.complaint });
    this.address = address;
    this.part = told?.part;
  }
}
