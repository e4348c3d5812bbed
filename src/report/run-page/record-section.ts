import type { Integrity } from '../../record/journal-check.js';
import { capitalised } from '../../quantity/capitalised.js';
import { element, type Markup } from '../page/markup.js';
import { section } from '../page/page.js';
import { table } from '../page/table.js';
import { journalInWords } from '../record-words.js';
import type { Result } from '../result.js';
import { counted } from './in-words.js';
import { code, facts, hash } from '../page/facts.js';

/** By what it can be told later that the record is still the one that this page is of. */
export function recordSection({ run, header, evidence, integrity, fingerprints }: Result): Markup {
  return section(
    'The record',
    facts([
      ['Folder', code(run)],
      ['Seals', `${capitalised(journalInWords(integrity))}${sizeInWords(integrity)}`],
      integrity.kind === 'damaged' ? ['Damage', `line ${integrity.line}: ${integrity.problem}`] : undefined,
      ['Readings', counted(evidence.readings, 'reading')],
      ['Last seal', fingerprints.lastSeal === undefined ? 'none' : hash(fingerprints.lastSeal)],
      ['run.json', hash(fingerprints.header)],
    ]),
    element(
      'p',
      { class: 'soft' },
      'A seal is the SHA-256 of all lines before it, so a torn, reordered or edited journal shows; the first line seals ' +
        'run.json. No key is in it: whoever signs this report vouches for the last seal. ',
      code('railproof analyse --strict'),
      ' works all of this out again from the record, or says what is not whole.',
    ),
    table(
      'What the run was made from, as it was then; the texts themselves stand in run.json.',
      [
        { heading: 'File', as: 'name' },
        { heading: 'Path', as: 'text' },
        { heading: 'SHA-256', as: 'long' },
      ],
      header.files.map(({ kind, path, sha256 }) => [kind, code(path), hash(sha256)]),
    ),
  );
}

function sizeInWords(integrity: Integrity): string {
  return integrity.kind === 'whole' ? `; ${counted(integrity.lines, 'line')}` : '';
}
