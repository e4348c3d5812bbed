import { exitCodes, RailproofError } from '../errors/railproof-error.js';

/** No simulated instrument speaks the way this driver does. */
export class NotUnderstoodBySimulationError extends RailproofError {
  readonly code = 'SIMULATION_NOT_UNDERSTOOD';
  readonly exitCode = exitCodes.badFile;
  readonly driver: string;
  readonly unknownMessage: string;
  readonly dialects: readonly string[];

  constructor(facts: { driver: string; unknownMessage: string; dialects: readonly string[] }) {
    super(
      `no simulated instrument understands the driver ${facts.driver}: "${facts.unknownMessage}" means nothing to ${listed(facts.dialects)}`,
      { advice: 'Simulate with one of the shipped drivers, or name the dialect: "simulated:<dialect>".' },
    );
    this.driver = facts.driver;
    this.unknownMessage = facts.unknownMessage;
    this.dialects = facts.dialects;
  }
}

/** `simulated:<dialect>` names one that there isn't, or one of another role. */
export class UnknownDialectError extends RailproofError {
  readonly code = 'SIMULATION_UNKNOWN_DIALECT';
  readonly exitCode = exitCodes.badFile;
  readonly dialect: string;
  readonly dialects: readonly string[];

  constructor(facts: { dialect: string; role: string; dialects: readonly string[] }) {
    super(
      `there is no simulated ${facts.role} that speaks "${facts.dialect}"; there ${facts.dialects.length === 1 ? 'is' : 'are'} ${listed(facts.dialects)}`,
      { advice: 'Write "simulated:" alone to have one chosen that understands the driver.' },
    );
    this.dialect = facts.dialect;
    this.dialects = facts.dialects;
  }
}

/** The simulation section asks for what cannot be simulated. */
export class CannotSimulateError extends RailproofError {
  readonly code = 'SIMULATION_IMPOSSIBLE';
  readonly exitCode = exitCodes.badFile;
  readonly what: string;

  constructor(facts: { what: string; advice: string }) {
    super(`cannot simulate ${facts.what}`, { advice: facts.advice });
    this.what = facts.what;
  }
}

/** The simulated operator was asked for an act that he doesn't know. */
export class UnknownActError extends RailproofError {
  readonly code = 'SIMULATION_UNKNOWN_ACT';
  readonly exitCode = exitCodes.badFile;
  readonly act: string;
  readonly known: readonly string[];

  constructor(facts: { act: string; known: readonly string[] }) {
    super(`the simulated operator does not know how to "${facts.act}"`, {
      advice: `Known acts: ${listed(facts.known)}.`,
    });
    this.act = facts.act;
    this.known = facts.known;
  }
}

/** A simulated instrument could not be put on its line. */
export class CannotServeError extends RailproofError {
  readonly code = 'SIMULATION_CANNOT_SERVE';
  readonly exitCode = exitCodes.inputOutput;
  readonly where: string;
  readonly reason: string;

  constructor(facts: { where: string; reason: string; advice: string; cause?: unknown }) {
    super(`cannot serve at ${facts.where}: ${facts.reason}`, { advice: facts.advice, cause: facts.cause });
    this.where = facts.where;
    this.reason = facts.reason;
  }
}

function listed(names: readonly string[]): string {
  return names.length === 0 ? 'none' : names.join(', ');
}
