import { formatQuantity } from '../quantity/format-quantity.js';
import { headers } from './file-kind.js';
import type { Module } from './module.js';
import { comment, written } from './written-yaml.js';

/** The text of a module file that reads back to this module, with a comment on each key. */
export function moduleText(module: Module): string {
  const { name, description, rated, protectionClass, input, outputIsolation, changes } = module;
  const { ambient } = rated;
  const label = [
    `voltage: ${formatQuantity(rated.voltage, 'voltage')}`,
    `current: ${formatQuantity(rated.current, 'current')}`,
    ...(ambient === undefined ? [] : [`ambient: ${formatQuantity(ambient, 'temperature')}`]),
  ];
  return [
    `railproof: ${headers.module}\n`,
    comment('A supply under test, as its label and its owner know it.'),
    '\n',
    comment('What it is called, as on its sticker; its records are filed under this.'),
    `name: ${written(name)}\n`,
    comment('What it is and where it came from.'),
    `description: ${written(description)}\n`,
    comment(
      'What the label says of the output, and, where it says so, the warmest air it may stand in (ambient: 40 °C).',
    ),
    `rated: { ${label.join(', ')} }\n`,
    comment('IEC 61140: I has a pin or a terminal for earth, II has a square within a square and none.'),
    `protection-class: ${protectionClass}\n`,
    comment('What it runs from: mains, or dc.'),
    `input: ${input}\n`,
    comment(
      'The voltage that its output is known to withstand to earth, from its papers or an insulation test; unknown ' +
        'is the honest answer for most. A stack relies on it.',
    ),
    `output-isolation: ${outputIsolation === 'unknown' ? 'unknown' : formatQuantity(outputIsolation, 'voltage')}\n`,
    comment('What was done to it, oldest first; what has to do with earth brings its caution with it.'),
    ...(changes.length === 0
      ? [comment('changes: [{ date: 2026-11-14, what: link from output to earth removed }]'), 'changes: []\n']
      : [
          'changes:\n',
          ...changes.map(({ date, what }) => `  - { date: ${date}, what: ${written(what)} }\n`),
        ]),
  ].join('');
}
