import { name, quantity } from '../files/building-blocks.js';
import type { NewBench } from '../files/new-bench.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { Amperes, Volts } from '../quantity/quantity.js';
import type { ModuleLimit } from '../files/simulation-section.js';
import { readBy } from './answer-readers.js';
import type { Option, Questions } from './questions.js';

const simulated = { kind: 'simulated' } as const;
const limits = { voltage: 60, current: 40, power: 200, temperature: 90 } as const;

const styles: readonly Option<ModuleLimit['style']>[] = [
  { word: 'constant-current', means: 'holds its current while the voltage falls', value: 'constant-current' },
  { word: 'foldback', means: 'gives less and less as the voltage falls', value: 'foldback' },
  { word: 'constant-power', means: 'gives more current as the voltage falls', value: 'constant-power' },
  { word: 'hiccup', means: 'switches off, and tries again every so often', value: 'hiccup' },
  { word: 'latch-off', means: 'switches off, and stays off until its input is cycled', value: 'latch-off' },
];

/** Of which the shipped procedures may ask twice, at a voltage a little above the label's. */
function mostCurrent(voltage: Volts): Amperes {
  return Math.min(15, Math.floor((10 * limits.power) / (2 * 1.05 * voltage)) / 10);
}

/** A bench on which everything is made up, and a module to try things on. @throws NothingWrittenError */
export async function askSimulated(questions: Questions): Promise<Omit<NewBench, 'name'>> {
  const moduleName = await questions.ask({
    ask: 'What is the module on it called?',
    why: 'As in its module file.',
    usual: { value: 'K1', words: 'K1' },
    read: readBy(name('', ['K1'])),
  });
  const voltage = await questions.ask({
    ask: 'Which voltage does its label state?',
    why: 'What is really there is made up from it: 1 % above.',
    usual: { value: 15, words: '15 V' },
    read: readBy(quantity('voltage', '', { above: 0, most: 45 })),
  });
  const most = mostCurrent(voltage);
  const usual = Math.min(4, most);
  const current = await questions.ask({
    ask: 'Which current does its label state?',
    why:
      'Really it holds 130 % of it while cold, for the run to find out. The load made up takes ' +
      `${formatQuantity(limits.power, 'power')}, and a run may ask for twice the label, so at ` +
      `${formatQuantity(voltage, 'voltage')} this may be ${formatQuantity(most, 'current')} at most.`,
    usual: { value: usual, words: formatQuantity(usual, 'current') },
    read: readBy(quantity('current', '', { above: 0, most })),
  });
  const style = await questions.choose(
    { ask: 'How does it behave at its limit?', why: 'A run tells these apart.' },
    styles,
    'hiccup',
  );
  return {
    instruments: {
      load: { driver: 'load-input-scpi', connection: simulated },
      meter: { driver: 'meter-read-scpi', connection: simulated },
      thermometer: { driver: 'thermometer-query-scpi', connection: simulated },
    },
    leads: { resistance: 0.035, uncertainty: 0.005 },
    voltageFrom: 'meter-at-module',
    limits,
    ambient: { temperature: 23, uncertainty: 1 },
    tries: { name: moduleName, voltage, current, style },
  };
}
