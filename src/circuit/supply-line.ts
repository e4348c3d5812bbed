import { UnfitDataError } from '../statistics/unfit-data-error.js';
import type { Corner } from './module-curve.js';

/**
 * What a supply gives, as far as it may be worked: its voltage over its current, straight from corner to
 * corner, from no load to its limit. The current rises from corner to corner and the voltage never does, nor
 * does it pass 0 V. Nothing flows back. Volts, amperes.
 */
export interface SupplyLine {
  readonly corners: readonly [open: Corner, ...rest: Corner[]];
}

/** A module's regulated line V = V0 − R·I up to its limit, ballast and wiring being part of R. */
export function lineOf({
  voltage,
  resistance,
  limit,
}: {
  readonly voltage: number;
  readonly resistance: number;
  readonly limit: number;
}): SupplyLine {
  const most = resistance * limit > voltage ? voltage / resistance : limit;
  return {
    corners: [
      { voltage, current: 0 },
      { voltage: Math.max(0, voltage - resistance * most), current: most },
    ],
  };
}

/** The same supply behind something that takes so much of its voltage at every current, as a diode does. */
export function behindDrop(line: SupplyLine, drop: number): SupplyLine {
  const lowered = ({ voltage, current }: Corner): Corner => ({
    voltage: Math.max(0, voltage - drop),
    current,
  });
  const [open, ...rest] = line.corners;
  return { corners: [lowered(open), ...rest.map(lowered)] };
}

/** What it can be asked for at most. */
export function limitOf(line: SupplyLine): number {
  return lastOf(line).current;
}

export function openVoltageOf(line: SupplyLine): number {
  return line.corners[0].voltage;
}

/** At its limit. */
export function endVoltageOf(line: SupplyLine): number {
  return lastOf(line).voltage;
}

/**
 * @param current from 0 to the line's limit.
 * @throws UnfitDataError beyond its limit, where nothing is known of it.
 */
export function voltageOf(line: SupplyLine, current: number): number {
  const limit = limitOf(line);
  if (!(current >= 0 && current <= limit * (1 + arithmetic))) {
    throw new UnfitDataError('voltageOf', `${current} A is asked of a line that ends at ${limit} A`);
  }
  const after = line.corners.findIndex((corner) => corner.current >= current);
  const high = line.corners[after - 1];
  const low = after < 0 ? lastOf(line) : line.corners[after];
  if (low === undefined || high === undefined || after < 0) return (low ?? line.corners[0]).voltage;
  return (
    high.voltage + ((low.voltage - high.voltage) * (current - high.current)) / (low.current - high.current)
  );
}

/**
 * What a supply gives into a bus of that voltage: nothing where the bus stands higher than itself, its limit
 * where the bus is pulled below what it holds there, and the least that it may be where its voltage is the same
 * at several currents.
 */
export function currentAt(line: SupplyLine, bus: number): number {
  const after = line.corners.findIndex(({ voltage }) => voltage <= bus);
  if (after < 0) return limitOf(line);
  const high = line.corners[after - 1];
  const low = line.corners[after];
  if (high === undefined || low === undefined) return 0;
  return high.current + ((high.voltage - bus) / (high.voltage - low.voltage)) * (low.current - high.current);
}

/** What each of several supplies gives into the bus that they share, in their order. */
export function currentsAt(lines: readonly SupplyLine[], bus: number): readonly number[] {
  return lines.map((line) => currentAt(line, bus));
}

/** One upon the other: the voltages add up, and the line ends with the least limit. */
export function inStack(lines: readonly [SupplyLine, ...SupplyLine[]]): SupplyLine {
  const end = Math.min(...lines.map(limitOf));
  const currents = rising(lines.flatMap(({ corners }) => corners.map(({ current }) => current))).filter(
    (current) => current > 0 && current < end,
  );
  const at = (current: number): Corner => ({
    voltage: lines.reduce((sum, line) => sum + voltageOf(line, current), 0),
    current,
  });
  return { corners: [at(0), ...currents.map(at), at(end)] };
}

/**
 * Side by side on one bus: the currents add up, and the line ends where the first of them comes to its limit.
 * One whose voltage is below the bus gives nothing until the bus has come down to it.
 */
export function inGroup(lines: readonly [SupplyLine, ...SupplyLine[]]): SupplyLine {
  const top = Math.max(...lines.map(openVoltageOf));
  const bottom = Math.max(...lines.map(endVoltageOf));
  const buses = rising(lines.flatMap(({ corners }) => corners.map(({ voltage }) => voltage)))
    .filter((voltage) => voltage < top && voltage > bottom)
    .reverse();
  const rest = [top, ...buses, bottom].flatMap((bus): Corner[] => {
    const least = currentsAt(lines, bus).reduce((sum, current) => sum + current, 0);
    const level = lines.reduce((sum, line) => sum + levelAt(line, bus), 0);
    const first = { voltage: bus, current: least };
    return level > 0 ? [first, { voltage: bus, current: least + level }] : [first];
  });
  const corners = rest.filter(
    ({ current }, index) => index === 0 || current > (rest[index - 1]?.current ?? 0),
  );
  return { corners: [{ voltage: top, current: 0 }, ...corners.filter(({ current }) => current > 0)] };
}

/** How far its current may go on at one and the same voltage. */
function levelAt(line: SupplyLine, bus: number): number {
  const level = line.corners.filter(({ voltage }) => voltage === bus);
  return (level.at(-1)?.current ?? 0) - (level[0]?.current ?? 0);
}

/** A current that is beyond the end by no more than arithmetic loses is at the end. */
const arithmetic = 1e-9;

function lastOf({ corners }: SupplyLine): Corner {
  return corners.at(-1) ?? corners[0];
}

function rising(numbers: readonly number[]): number[] {
  return [...new Set(numbers)].sort((one, other) => one - other);
}
