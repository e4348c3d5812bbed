import type { Decision } from '../judgement/judge.js';
import { fitted } from '../quantity/word-wrap.js';
import { fittedTable } from './align.js';
import { answer } from './answer.js';
import { derivationRows } from './derivation-rows.js';
import { columnsOf } from './finding-text.js';
import { inMinutes } from './in-minutes.js';
import { printableData } from './printable.js';
import {
  againstWhat,
  circuitInWords,
  modulesInWords,
  plateInWords,
  takenOverInWords,
} from './record-heading.js';
import { journalInWords, probabilityInWords } from './record-words.js';
import type { Result } from './result.js';
import type { Style } from './style.js';
import { warningInWords, warningsOf } from './warnings.js';

/**
 * The report for a terminal of so many columns, or for a text file, where each row is a line: the answer first, then
 * what it rests on.
 */
export function resultAsText(recorded: Result, style: Style, columns?: number): string {
  const result = withPrintableTexts(recorded);
  return [
    heading(result, style),
    ...warnings(result, style, columns),
    answerAsText(result, style, columns),
    findingsTable(result, style, columns),
    derivation(result, style, columns),
    decisionsTable(result, style, columns),
    footing(result),
  ]
    .filter((part) => part !== '')
    .join('\n\n')
    .concat('\n');
}

/** Of the evidence, only the way it ended and what it was resumed from are shown; its points may be many and are left alone. Steps are counted only. */
function withPrintableTexts({ evidence, header, ...rest }: Result): Result {
  return {
    ...printableData(rest),
    header: { ...printableData({ ...header, steps: [], files: [] }), steps: header.steps },
    evidence: {
      ...evidence,
      ended: printableData(evidence.ended),
      resumed: printableData(evidence.resumed),
    },
  };
}

function heading({ header, run, evidence }: Result, style: Style): string {
  const began = inMinutes(header.began);
  return [
    style.strong(`${modulesInWords(header)}: ${header.procedure.title}`),
    ...circuitInWords(header),
    ...header.modules.map((module) => plate(module, header.circuit === 'single')),
    `${header.procedure.name} on ${header.bench.name}${header.bench.simulated ? ' (simulated)' : ''}, ${began}, record ${run}`,
    ...takenOverInWords(evidence),
    ...againstWhat(header),
  ].join('\n');
}

function plate({ name, description, rated }: Result['header']['modules'][number], isAlone: boolean): string {
  const parts = [description, `nameplate ${plateInWords(rated)}`].filter((part) => part !== '');
  return `${isAlone ? '' : `${name}: `}${parts.join(' · ')}`;
}

function warnings(result: Result, style: Style, columns?: number): string[] {
  return warningsOf(result).map((warning) => style.warn(fitted(warningInWords(warning), columns)));
}

function answerAsText(result: Result, style: Style, columns?: number): string {
  const [first, ...others] = answer(result).map((line) => fitted(line, columns));
  return first === undefined ? '' : [style.strong(first), ...others].join('\n');
}

function findingsTable({ findings }: Result, style: Style, columns?: number): string {
  if (findings.length === 0) return 'No findings: the record holds too little.';
  const rows = findings.map((finding) => {
    const { value, uncertainty, unit } = columnsOf(finding);
    const plusMinus = uncertainty === '' ? '' : '±';
    return [
      finding.name,
      finding.bound === 'least' ? `≥ ${value}` : value,
      plusMinus,
      uncertainty,
      unit,
      finding.step === null ? '' : `step ${finding.step}`,
      finding.note,
    ];
  });
  const table = fittedTable(rows, ['left', 'right', 'left', 'right', 'left', 'left', 'left'], columns);
  return [style.strong('Findings') + '   value ± expanded uncertainty, 95 %', ...table].join('\n');
}

function derivation({ findings }: Result, style: Style, columns?: number): string {
  const rows = derivationRows(findings);
  if (rows.length === 0) return '';
  const table = fittedTable(rows, ['left', 'right', 'left', 'left'], columns);
  return [style.strong('How the recommendation comes about'), ...table].join('\n');
}

const verdicts: Readonly<Record<Decision['outcome'], string>> = {
  conforms: 'conforms',
  'does-not-conform': 'DOES NOT CONFORM',
  undecided: 'undecided',
};

function decisionsTable({ decisions }: Result, style: Style, columns?: number): string {
  if (decisions.length === 0) return '';
  const rows = decisions.map(({ outcome, finding, requirement, probability, note }) => [
    verdicts[outcome],
    finding,
    requirement,
    [probability === null ? '' : `conformance probability ${probabilityInWords(probability)}`, note]
      .filter((part) => part !== '')
      .join('; '),
  ]);
  const table = fittedTable(rows, ['left', 'left', 'left', 'left'], columns);
  return [style.strong('Decisions') + '   guard band as wide as the expanded uncertainty', ...table].join(
    '\n',
  );
}

function footing({ header, evidence, integrity }: Result): string {
  const instruments = header.instruments.map(
    ({ role, identity, address, driver }) => `${role}: ${identity}, ${driver}, ${address}`,
  );
  return [...instruments, `${evidence.readings} readings; ${journalInWords(integrity)}`].join('\n');
}
