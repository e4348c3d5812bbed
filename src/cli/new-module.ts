import { line, name, quantity, quantityOrWord } from '../files/building-blocks.js';
import { ambientOnLabel, changeDate } from '../files/module-schema.js';
import type { Module } from '../files/module.js';
import { readBy } from './answer-readers.js';
import { type Questions, UnfitAnswerError } from './questions.js';

/** What a label says, asked of whoever holds the module. Nothing of it is guessed. @throws NothingWrittenError */
export async function askModule(questions: Questions, today: string, called?: string): Promise<Module> {
  const moduleName = await questions.ask({
    ask: 'What is the module called?',
    why: 'Short, as you would write it on a sticker: K1. Its records are filed under it.',
    ...(called === undefined ? {} : { usual: { value: called, words: called } }),
    read: readBy(name('', ['K1'])),
  });
  const description = await questions.ask({
    ask: 'What is it, and where did it come from?',
    why: 'In your own words, for whoever reads the record in ten years: 15 V brick from a retired label printer.',
    usual: { value: '', words: 'nothing is written down' },
    read: readBy(line('')),
  });
  const rated = await askLabel(questions);
  const input = await askInput(questions);
  const protectionClass = await askProtection(questions, input);
  const outputIsolation = await questions.ask({
    ask: 'What voltage is its output known to withstand to earth?',
    why:
      'Only where its papers say so, or an insulation test at its test voltage has shown it: 500 V. An ohmmeter ' +
      'does not show it. A stack is judged by it.',
    usual: { value: 'unknown' as const, words: 'unknown, which is the honest answer for most' },
    read: readBy(quantityOrWord('voltage', ['unknown'] as const, '', { above: 0 })),
  });
  const changes = await askChanges(questions, today);
  return { name: moduleName, description, rated, protectionClass, input, outputIsolation, changes };
}

async function askLabel(questions: Questions): Promise<Module['rated']> {
  const voltage = await questions.ask({
    ask: 'Which output voltage does the label state?',
    why: 'With its unit: 15 V. Every share of the nameplate refers to it, so it is never guessed: no label, no file.',
    read: readBy(quantity('voltage', '', { above: 0 })),
  });
  const current = await questions.ask({
    ask: 'Which output current does the label state?',
    why: 'With its unit: 4 A. It says how hard the module is worked; where the label gives watts only, divide by the volts.',
    read: readBy(quantity('current', '', { above: 0 })),
  });
  const ambient = await questions.ask({
    ask: 'In how warm air may it stand, by its label?',
    why: 'With its unit: 40 degC. A report sets it beside the air it was tested in.',
    usual: { value: undefined, words: 'the label does not say' },
    read: readBy(ambientOnLabel),
  });
  return { voltage, current, ...(ambient === undefined ? {} : { ambient }) };
}

function askInput(questions: Questions): Promise<Module['input']> {
  return questions.choose(
    {
      ask: 'What does it run from?',
      why: 'What runs from the mains brings the caution for mains with it; what runs from dc may be fed by a source of the bench.',
    },
    [
      { word: 'mains', means: 'a plug in a socket', value: 'mains' as const },
      { word: 'dc', means: 'a dc supply, a battery', value: 'dc' as const },
    ],
  );
}

function askProtection(questions: Questions, input: Module['input']): Promise<Module['protectionClass']> {
  const [earthed, not] =
    input === 'mains'
      ? ['its plug or inlet has a pin for earth', 'no pin for earth; on the label a square within a square']
      : [
          'something of it is to be tied to protective earth',
          'nothing of it is to be tied to protective earth',
        ];
  return questions.choose(
    {
      ask: 'Which protection class is it of?',
      why:
        'By IEC 61140. Look at the plug and at the label, not at the case. It says how the output is measured to ' +
        'earth, and which cautions hold.',
    },
    [
      { word: 'I', means: earthed, value: 'I' as const },
      { word: 'II', means: not, value: 'II' as const },
    ],
  );
}

async function askChanges(questions: Questions, today: string): Promise<Module['changes']> {
  const changes: Module['changes'][number][] = [];
  for (;;) {
    const what = await questions.ask({
      ask: changes.length === 0 ? 'Was anything changed in it? What?' : 'Anything else?',
      why:
        changes.length === 0
          ? 'One change at a time: link from output to earth removed. What has to do with earth brings its caution with it, and a record made before the change says so.'
          : 'The next change, the older ones as well.',
      usual: { value: undefined, words: changes.length === 0 ? 'nothing was changed' : 'that is all' },
      read: readBy(line('').min(1)),
    });
    if (what === undefined) return changes.toSorted((one, other) => one.date.localeCompare(other.date));
    const date = await questions.ask({
      ask: 'On which day?',
      why: 'Year first: 2026-11-14. By it a record is known to be from before or after.',
      usual: { value: today, words: `today, ${today}` },
      read: (answer) => {
        const day = readBy(changeDate)(answer);
        // An older record would pass for one from before what was done since.
        if (day > today) throw new UnfitAnswerError(`${day} is still to come; today is ${today}`);
        return day;
      },
    });
    changes.push({ date, what });
  }
}
