import { type ComparedRecords, titleOf } from '../comparison.js';
import { type Made, pageText } from '../page/page.js';
import { comparisonAnswer } from './answer.js';
import { basisSection } from './basis.js';
import { changesSection } from './changes-section.js';
import { curvesSection } from './curves-section.js';
import { allowanceSection, findingsSection } from './findings-section.js';
import { movementsSection } from './movements.js';
import { instrumentsSection, recordsSection } from './records-section.js';

/** Two records compared, as one HTML file that needs no other: what changed first, then what it rests on. */
export function comparisonPage(records: ComparedRecords, made: Made): string {
  return pageText({
    kind: 'Comparison · an earlier record and a later one',
    title: titleOf(records),
    answer: comparisonAnswer(records),
    sections: [
      movementsSection(records),
      basisSection(records),
      allowanceSection(records),
      curvesSection(records),
      changesSection(records),
      findingsSection(records),
      recordsSection(records),
      instrumentsSection(records),
    ],
    made,
    pageKind: 'comparison',
  });
}
