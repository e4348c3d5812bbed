import type { ParallelWish } from '../arrangement/parallel-build.js';
import { exitCodes, RailproofError } from '../errors/railproof-error.js';
import { QuantityError, readQuantity } from '../quantity/parse-quantity.js';
import type { Dimension } from '../quantity/quantity.js';
import { shown } from '../quantity/shown-text.js';

/** Options that do not go together, or that say nothing that could be built. */
export class BuildUsageError extends RailproofError {
  readonly code = 'BUILD_USAGE';
  readonly exitCode = exitCodes.usage;

  constructor(problem: string, advice: string) {
    super(problem, { advice });
  }
}

/** What `combine` and `select` may be told of the ballasts. */
export interface BallastOptions {
  readonly ballast?: string;
  readonly imbalance?: string;
  readonly resistorTolerance?: string;
}

/**
 * How far apart the shares may be where nobody says otherwise, and how far off a resistor is. By 5 % of tolerance
 * alone two modules that are quite alike may be 10 % apart, so that no ballast would ever do.
 */
const usual = { imbalance: 0.1, tolerance: 0.01 } as const;

/** @throws BuildUsageError */
export function ballastWish(options: BallastOptions): Pick<ParallelWish, 'ballast' | 'tolerance'> {
  const { ballast, imbalance, resistorTolerance } = options;
  if (ballast !== undefined && imbalance !== undefined) {
    throw new BuildUsageError(
      '--ballast and --imbalance are two wishes: a ballast is given, or chosen for an imbalance',
      'give one of them',
    );
  }
  const tolerance = resistorTolerance === undefined ? usual.tolerance : toleranceOf(resistorTolerance);
  if (ballast !== undefined) {
    return { ballast: { kind: 'given', resistance: resistanceOf(ballast) }, tolerance };
  }
  const most = imbalance === undefined ? usual.imbalance : imbalanceOf(imbalance);
  return { ballast: { kind: 'for-imbalance', most }, tolerance };
}

function resistanceOf(text: string): number {
  const resistance = quantityOf('--ballast', text, 'resistance');
  if (resistance > 0) return resistance;
  throw new BuildUsageError(
    `--ballast is ${shown(text)}, which is no resistor`,
    'give a resistance above 0 Ω, or --imbalance to have one chosen; what happens without any is told either way',
  );
}

function imbalanceOf(text: string): number {
  const most = quantityOf('--imbalance', text, 'ratio');
  if (most > 0 && most < 1) return most;
  throw new BuildUsageError(
    `--imbalance is ${shown(text)}, which no ${most <= 0 ? 'two modules keep to' : 'ballast is needed for'}`,
    'give a share above 0 % and below 100 %, such as 10 %',
  );
}

function toleranceOf(text: string): number {
  const tolerance = quantityOf('--resistor-tolerance', text, 'ratio');
  if (tolerance >= 0 && tolerance <= 0.5) return tolerance;
  throw new BuildUsageError(
    `--resistor-tolerance is ${shown(text)}, which no resistor is sold with`,
    'give a share from 0 % to 50 %, such as 1 %',
  );
}

/** @throws BuildUsageError */
export function loadOf(text: string | undefined): number | undefined {
  if (text === undefined) return undefined;
  const load = quantityOf('--load', text, 'current');
  if (load > 0) return load;
  throw new BuildUsageError(`--load is ${shown(text)}, which is no load`, 'give a current above 0 A');
}

/** A whole number from 1 on. @throws BuildUsageError */
export function countOf(option: string, text: string): number {
  if (/^[1-9]\d{0,2}$/.test(text)) return Number(text);
  throw new BuildUsageError(`${option} is ${shown(text)}`, 'give a whole number from 1 to 999');
}

function quantityOf(option: string, text: string, dimension: Dimension): number {
  try {
    return readQuantity(text, dimension);
  } catch (error) {
    if (!(error instanceof QuantityError)) throw error;
    throw new BuildUsageError(
      `${option}: ${error.message}`,
      `give it in quotes: ${option} "${examples[dimension] ?? ''}"`,
    );
  }
}

const examples: Partial<Readonly<Record<Dimension, string>>> = {
  resistance: '51 mΩ',
  ratio: '10 %',
  current: '6 A',
};
