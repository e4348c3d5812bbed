import { exitCodes, RailproofError } from '../errors/railproof-error.js';

/** What is wished can't be worked out, whatever the records say: no modules, a ballast of 0 Ω. */
export class UnfitWishError extends RailproofError {
  readonly code = 'UNFIT_WISH';
  readonly exitCode = exitCodes.usage;

  constructor(problem: string, advice: string) {
    super(problem, { advice });
  }
}

/** A module about which the records don't say enough, or don't say it alike. */
export interface UnfitModule {
  readonly module: string;
  readonly why: string;
  /** What to do about it. */
  readonly advice: string;
}

/** The records don't support what is wished; all modules that are in the way are named. */
export class UnfitRecordsError extends RailproofError {
  readonly code = 'UNFIT_RECORDS';
  readonly exitCode = exitCodes.badFile;
  readonly unfit: readonly UnfitModule[];

  constructor(unfit: readonly UnfitModule[]) {
    super(unfit.map(({ module, why }) => `${module}: ${why}`).join('\n'), {
      advice: [...new Set(unfit.map(({ advice }) => advice))].join('\n'),
    });
    this.unfit = unfit;
  }
}
