import { type Made, pageText } from '../page/page.js';
import { modulesInWords } from '../record-heading.js';
import type { Result } from '../result.js';
import { aboutRun } from './about.js';
import { answerSection } from './answer-section.js';
import { benchSection } from './bench-section.js';
import { budgetsSection } from './budgets-section.js';
import { cautionsSection } from './cautions-section.js';
import { chartsSection } from './charts-section.js';
import { decisionsSection } from './decisions-section.js';
import { findingsSection } from './findings-section.js';
import { recommendationSection } from './recommendation-section.js';
import { recordSection } from './record-section.js';
import { signatureSection } from './signature-section.js';
import { waySection } from './way-section.js';

/**
 * The report of a record as one HTML file that needs no other: what was tested on what, the answer, the charts, and
 * all that they rest on, with room for a signature.
 */
export function runPage(result: Result, made: Made): string {
  const { header } = result;
  return pageText({
    kind: `Test report · ${header.procedure.name}${header.bench.simulated ? ' · simulated bench' : ''}`,
    title: `${modulesInWords(header)}: ${header.procedure.title}`,
    about: aboutRun(result),
    answer: answerSection(result),
    sections: [
      decisionsSection(result),
      signatureSection(result),
      chartsSection(result),
      recommendationSection(result),
      findingsSection(result),
      budgetsSection(result),
      waySection(result),
      benchSection(result),
      cautionsSection(result),
      recordSection(result),
    ],
    made,
    pageKind: 'report',
  });
}
