import { element, type Markup } from '../page/markup.js';
import { section } from '../page/page.js';
import { isWhole, type Result } from '../result.js';
import { code } from '../page/facts.js';

/** Room for two people to sign by hand, beside what they sign for. */
export function signatureSection(result: Result): Markup {
  const { run, fingerprints, header } = result;
  return section(
    'Signed',
    element(
      'p',
      {},
      'Record ',
      code(run),
      fingerprints.lastSeal !== undefined && [', last seal ', code(`${fingerprints.lastSeal.slice(0, 16)}…`)],
      '. ',
      header.bench.simulated && 'The bench was simulated: a signature here releases no module. ',
      !isWhole(result) &&
        'The test is not whole: a signature here says that this was read, and releases nothing.',
    ),
    element('dl', { class: 'sign' }, lines('Measured by'), lines('Checked by')),
  );
}

function lines(who: string): readonly Markup[] {
  return [who, 'Signature', 'Date'].map((word) =>
    element('div', {}, element('dt', {}, word), element('dd', {}, '\u00a0')),
  );
}
