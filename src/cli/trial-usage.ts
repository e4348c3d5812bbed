import { exitCodes, RailproofError } from '../errors/railproof-error.js';

/** Options of `railproof drivers` that do not go together, or not with this driver. */
export class TrialUsageError extends RailproofError {
  readonly code = 'TRIAL_USAGE';
  readonly exitCode = exitCodes.usage;

  constructor(message: string) {
    super(message, {
      advice: 'for example: railproof drivers --try load-input-scpi --connection tcp://127.0.0.1:5025',
    });
  }
}
