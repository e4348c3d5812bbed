import { feedInWords } from '../bench/source.js';
import type { Bench, BenchDrivers } from '../files/bench.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { UnderTest } from '../steps/under-test.js';

/** Whether the bench's source, where it has one, can feed what is under test, and may. */
export function* sourceProblems(
  { circuit, modules }: UnderTest,
  { instruments: { source: feed } }: Bench,
  { source: driver }: BenchDrivers,
): Generator<string> {
  if (feed === undefined || driver === undefined) return;
  const where = 'instruments.source';
  const mains = modules.filter(({ input }) => input === 'mains').map((module) => module.name);
  if (mains.length > 0) {
    const them = mains.length === 1 ? 'is' : 'are';
    yield `${where}: would feed nothing: ${mains.join(', ')} ${them} fed from the mains; take the source out of the bench file, or name a module whose input is dc`;
  }
  if (circuit === 'series') {
    yield `${where}: would tie the inputs of a stack together, and shorts every module in it whose output is not isolated from its input; feed each module of a stack from a supply of its own, by hand`;
  }
  const { voltage, current, power } = driver.ratings;
  if (voltage !== undefined && feed.voltage > voltage) {
    yield `${where}.voltage: ${formatQuantity(feed.voltage, 'voltage')} is more than ${driver.name} is rated for (${formatQuantity(voltage, 'voltage')})`;
  }
  if (current !== undefined && feed.current > current) {
    yield `${where}.current: ${formatQuantity(feed.current, 'current')} is more than ${driver.name} is rated for (${formatQuantity(current, 'current')})`;
  }
  const watts = feed.voltage * feed.current;
  const said = formatQuantity(watts, 'power', { significant: 4 });
  if (power !== undefined && watts > power) {
    yield `${where}: ${feedInWords(feed)}, is ${said}, more than ${driver.name} is rated for (${formatQuantity(power, 'power')})`;
  }
  for (const operation of ['set-voltage', 'set-current']) {
    if (!Object.hasOwn(driver.operations, operation))
      yield `${where}: the driver ${driver.name} does not say how to do ${operation}`;
  }
}
