import type { Integrity } from '../record/journal-check.js';

/** Never 100 % and never 0 %: nothing measured is that sure. */
export function probabilityInWords(probability: number): string {
  if (probability > 0.999) return 'above 99.9 %';
  if (probability < 0.001) return 'below 0.1 %';
  return `${(probability * 100).toFixed(1)} %`;
}

/** How much of a journal can be believed. */
export function journalInWords(integrity: Integrity): string {
  switch (integrity.kind) {
    case 'whole':
      return 'journal whole, every seal holds';
    case 'cut-off':
      return `journal cut off after ${integrity.lines} whole lines`;
    case 'damaged':
      return `journal damaged, ${integrity.lines} lines believed`;
  }
}
