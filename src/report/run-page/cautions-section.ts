import { listed } from '../../quantity/listed.js';
import { cautionText } from '../../record/caution-texts.js';
import type { Acknowledgement } from '../../record/journal-event.js';
import { type Content, element, type Markup } from '../page/markup.js';
import { bullets, section } from '../page/page.js';
import type { Result } from '../result.js';

/** What had to be minded, who took note of it, and what no measurement decides. */
export function cautionsSection({ header, evidence }: Result): Markup {
  return section(
    'Cautions',
    bullets([
      ...header.procedure.cautions.map((name): Content => {
        const by = evidence.cautions.flatMap((caution) => (caution.name === name ? [caution.by] : []));
        return [
          element('strong', {}, name),
          `: ${cautionText(name) ?? 'another version knows what is to be minded.'} `,
          element('span', { class: 'soft' }, acknowledged([...new Set(by)])),
        ];
      }),
      'Local codes and a licensed person decide what may be joined to the mains and to earth, and how. This report is ' +
        'a measurement on one bench, on one day: no approval, and no test of insulation, of faults or of fire.',
      'It holds for what was tested as it was then. Whoever opens, mends or changes it tests it again.',
    ]),
  );
}

const who: Readonly<Record<Acknowledgement, string>> = {
  operator: 'the operator, at the bench',
  '--yes': 'whoever started the run, beforehand (--yes)',
  'simulated-operator': 'the simulated operator',
};

function acknowledged(by: readonly Acknowledgement[]): string {
  return by.length === 0
    ? 'Nobody acknowledged it in this record.'
    : `Acknowledged by ${listed(by.map((each) => who[each]))}.`;
}
