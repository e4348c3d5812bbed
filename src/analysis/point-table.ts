import { type Phase, phases, type PointOutcome } from '../record/journal-event.js';
import { momentsWidth, RunningMoments } from '../statistics/running-moments.js';
import type { PointEvidence, Reach } from './point-evidence.js';

const outcomes: readonly PointOutcome[] = ['held', 'dropped', 'measured'];

/** Where in a row of numbers each part of a point stands. */
const place = {
  point: 0,
  looks: 1,
  phase: 2,
  outcome: 3,
  voltageBy: 4,
  t: 5,
  setCurrent: 6,
  setVoltage: 7,
  reach: 8,
  moduleVoltage: 12,
  loadVoltage: 12 + momentsWidth,
  meterVoltage: 12 + 2 * momentsWidth,
  current: 12 + 3 * momentsWidth,
  temperature: 12 + 4 * momentsWidth,
} as const;
const width = 12 + 5 * momentsWidth;
const rowsAtOnce = 128;

/** What few points have, beside their row of numbers. */
type Seldom = Pick<PointEvidence, 'taps' | 'resistance' | 'of' | 'samples'>;

const nothingSeldom: Seldom = {
  taps: new Map(),
  resistance: { values: new RunningMoments(), open: 0 },
  of: undefined,
  samples: [],
};

/**
 * Points as rows of numbers, 300 bytes each where a point as objects takes four times as much and a collector of
 * garbage that looks at each of them again and again. A point that is read here is what was put here.
 */
export class PointTable {
  readonly #blocks: Float64Array[] = [];
  readonly #seldom = new Map<number, Seldom>();
  #length = 0;

  get length(): number {
    return this.#length;
  }

  add(point: PointEvidence): void {
    if (this.#length === this.#blocks.length * rowsAtOnce) {
      this.#blocks.push(new Float64Array(rowsAtOnce * width));
    }
    this.#length += 1;
    this.put(this.#length - 1, point);
  }

  /** In the place of another. */
  put(index: number, point: PointEvidence): void {
    const block = this.#blockOf(index);
    const row = rowOf(index);
    block[row + place.point] = point.point;
    block[row + place.looks] = point.looks;
    block[row + place.phase] = phases.indexOf(point.phase);
    block[row + place.outcome] = point.outcome === undefined ? -1 : outcomes.indexOf(point.outcome);
    block[row + place.voltageBy] = point.voltageBy === 'meter' ? 0 : 1;
    block[row + place.t] = point.t;
    block[row + place.setCurrent] = point.set.current ?? Number.NaN;
    block[row + place.setVoltage] = point.set.voltage ?? Number.NaN;
    if (point.reach !== undefined) {
      block.set([...point.reach.moduleVoltage, ...point.reach.temperature], row + place.reach);
    }
    point.moduleVoltage.writeTo(block, row + place.moduleVoltage);
    point.loadVoltage.writeTo(block, row + place.loadVoltage);
    point.meterVoltage.writeTo(block, row + place.meterVoltage);
    point.current.writeTo(block, row + place.current);
    point.temperature.writeTo(block, row + place.temperature);
    this.#keepSeldom(index, isSeldom(point) ? seldomOf(point) : undefined);
  }

  /** To the place of another; the one that was moved is still where it was, too. */
  move(from: number, to: number): void {
    if (from === to) return;
    const row = rowOf(from);
    this.#blockOf(to).set(this.#blockOf(from).subarray(row, row + width), rowOf(to));
    this.#keepSeldom(to, this.#seldom.get(from));
  }

  at(index: number): PointEvidence {
    return new KeptPoint(this, index);
  }

  /** Without those from there on; their room is kept for those that come. */
  cutOffAt(length: number): void {
    for (let index = length; index < this.#length; index += 1) this.#seldom.delete(index);
    this.#length = length;
  }

  number(index: number, at: number): number {
    return this.#blockOf(index)[rowOf(index) + at] as number;
  }

  moments(index: number, at: number): RunningMoments {
    return RunningMoments.readFrom(this.#blockOf(index), rowOf(index) + at);
  }

  seldom(index: number): Seldom {
    return this.#seldom.get(index) ?? nothingSeldom;
  }

  #blockOf(index: number): Float64Array {
    return this.#blocks[Math.floor(index / rowsAtOnce)] as Float64Array;
  }

  #keepSeldom(index: number, seldom: Seldom | undefined): void {
    if (seldom === undefined) this.#seldom.delete(index);
    else this.#seldom.set(index, seldom);
  }
}

/** Where a row begins in its block. */
function rowOf(index: number): number {
  return (index % rowsAtOnce) * width;
}

function isSeldom({ taps, resistance, of, samples }: PointEvidence): boolean {
  return (
    taps.size > 0 ||
    resistance.values.count > 0 ||
    resistance.open > 0 ||
    of !== undefined ||
    samples.length > 0
  );
}

function seldomOf({ taps, resistance, of, samples }: PointEvidence): Seldom {
  return { taps, resistance, of, samples };
}

/** A point of a table, read when it is asked for. */
class KeptPoint implements PointEvidence {
  readonly #table: PointTable;
  readonly #index: number;

  constructor(table: PointTable, index: number) {
    this.#table = table;
    this.#index = index;
  }

  get point(): number {
    return this.#number(place.point);
  }
  get looks(): number {
    return this.#number(place.looks);
  }
  get reach(): Reach | undefined {
    if (this.looks === 1) return undefined;
    const at = (next: number): number => this.#number(place.reach + next);
    return { moduleVoltage: [at(0), at(1)], temperature: [at(2), at(3)] };
  }
  get phase(): Phase {
    return phases[this.#number(place.phase)] as Phase;
  }
  get outcome(): PointOutcome | undefined {
    return outcomes[this.#number(place.outcome)];
  }
  get voltageBy(): PointEvidence['voltageBy'] {
    return this.#number(place.voltageBy) === 0 ? 'meter' : 'load';
  }
  get t(): number {
    return this.#number(place.t);
  }
  get set(): PointEvidence['set'] {
    const [current, voltage] = [this.#number(place.setCurrent), this.#number(place.setVoltage)];
    return {
      ...(Number.isNaN(current) ? {} : { current }),
      ...(Number.isNaN(voltage) ? {} : { voltage }),
    };
  }
  get moduleVoltage(): RunningMoments {
    return this.#moments(place.moduleVoltage);
  }
  get loadVoltage(): RunningMoments {
    return this.#moments(place.loadVoltage);
  }
  get meterVoltage(): RunningMoments {
    return this.#moments(place.meterVoltage);
  }
  get current(): RunningMoments {
    return this.#moments(place.current);
  }
  get temperature(): RunningMoments {
    return this.#moments(place.temperature);
  }
  get taps(): PointEvidence['taps'] {
    return this.#table.seldom(this.#index).taps;
  }
  get resistance(): PointEvidence['resistance'] {
    return this.#table.seldom(this.#index).resistance;
  }
  get of(): string | undefined {
    return this.#table.seldom(this.#index).of;
  }
  get samples(): PointEvidence['samples'] {
    return this.#table.seldom(this.#index).samples;
  }

  #number(at: number): number {
    return this.#table.number(this.#index, at);
  }

  #moments(at: number): RunningMoments {
    return this.#table.moments(this.#index, at);
  }
}
