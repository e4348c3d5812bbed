import { findingNamed } from '../analysis/finding.js';
import { ratedOf } from '../analysis/rated.js';
import type { Decision } from '../judgement/judge.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import { fitted } from '../quantity/word-wrap.js';
import type { WatchmanReport } from '../record/watchman-report.js';
import { fittedTable } from './align.js';
import { answer } from './answer.js';
import { columnsOf } from './finding-text.js';
import { inMinutes } from './in-minutes.js';
import { printableData } from './printable.js';
import { journalInWords, probabilityInWords } from './record-words.js';
import { endedHow, type Result } from './result.js';
import type { Style } from './style.js';
import { takenOver, type TakenOverPart } from './taken-over.js';
import { watchmanText } from './watchman-text.js';

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
  const names = header.modules.map(({ name }) => name).join('+');
  return [
    style.strong(`${names}: ${header.procedure.title}`),
    ...circuitInWords(header),
    ...header.modules.map((module) => plate(module, header.circuit === 'single')),
    `${header.procedure.name} on ${header.bench.name}${header.bench.simulated ? ' (simulated)' : ''}, ${began}, record ${run}`,
    ...takenOverInWords(takenOver(evidence)),
    ...againstWhat(header),
  ].join('\n');
}

/** What was measured on another day. */
function takenOverInWords(parts: readonly TakenOverPart[]): readonly string[] {
  return parts.map(({ first, last, run, began }) => {
    const steps = first === last ? `step ${first}` : `steps ${first} to ${last}`;
    return `${steps} taken over from ${run}, ${inMinutes(began)}`;
  });
}

/** Of several modules: how they are wired, and what their labels amount to together. */
function circuitInWords(header: Result['header']): readonly string[] {
  const { circuit, modules } = header;
  if (circuit === 'single') return [];
  const whole = platesInWords(ratedOf(header));
  const wired = circuit === 'parallel' ? 'in parallel' : 'in series, the lowest first';
  return [`${modules.length} modules ${wired} · together ${whole}`];
}

function plate({ name, description, rated }: Result['header']['modules'][number], isAlone: boolean): string {
  const parts = [description, `nameplate ${platesInWords(rated)}`].filter((part) => part !== '');
  return `${isAlone ? '' : `${name}: `}${parts.join(' · ')}`;
}

function platesInWords({ voltage, current }: { readonly voltage: number; readonly current: number }): string {
  // Sums of labels without the digits that adding makes.
  const said = (value: number): number => Number(value.toPrecision(6));
  return `${formatQuantity(said(voltage), 'voltage')}, ${formatQuantity(said(current), 'current')}`;
}

function againstWhat({ baseline }: Result['header']): readonly string[] {
  if (baseline === undefined) return [];
  const { run, tolerance } = baseline;
  return [`compared with ${run}, tolerance ${tolerance.name}: ${tolerance.title}`];
}

function warnings(result: Result, style: Style, columns?: number): string[] {
  const { how, reason } = endedHow(result);
  const { integrity } = result;
  const lines: string[] = [];
  if (integrity.kind === 'damaged') {
    lines.push(
      `DAMAGED RECORD: line ${integrity.line} of the journal: ${integrity.problem}. What follows rests on the first ${integrity.lines} lines.`,
    );
  }
  if (how === 'cut-off' && integrity.kind !== 'damaged')
    lines.push('CUT OFF: the record ends without an end; what follows is what is whole.');
  if (how === 'cut-off' && result.watchman !== undefined) lines.push(...watchmanInWords(result.watchman));
  else if (how === 'cut-off' && result.evidence.input === 'on')
    lines.push('THE LOAD WAS ON when the record broke off: `railproof safe --bench <file>` switches it off.');
  else if (result.evidence.input === 'on')
    lines.push(
      'THE LOAD MAY BE ON: nobody could read back that it went off. `railproof safe --bench <file>` switches it off.',
    );
  const { baseline, modules } = result.header;
  const names = modules.map(({ name }) => name).join(', ');
  if (baseline !== undefined && baseline.modules.join(', ') !== names)
    lines.push(
      `DIFFERENT MODULES: the baseline is of ${baseline.modules.join(', ')}, this record of ${names}.`,
    );
  if (how === 'stopped') lines.push(`STOPPED: ${(reason ?? '').replace(/^stopped /, '')}`);
  if (how === 'failed') lines.push(`FAILED: ${reason ?? ''}`);
  return lines.map((line) => style.warn(fitted(line, columns)));
}

/** What became of the program, and of the load. */
function watchmanInWords(report: WatchmanReport): string[] {
  const text = `WATCHMAN: ${watchmanText(report)}.`;
  return report.outcome === 'off'
    ? [text]
    : [text, 'THE LOAD MAY BE ON: `railproof safe --bench <file>` switches it off.'];
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
  const recommended = findingNamed(findings, 'recommended-current');
  const usable = findingNamed(findings, 'usable-current');
  if (recommended === undefined || usable === undefined) return '';
  const amps = (value: number): string => formatQuantity(value, 'current', { significant: 4 });
  const rows = [
    ['', amps(Number(usable.value)), 'usable-current', usable.note],
    ...recommended.factors.map(({ name, factor, reason }) => ['×', factor.toFixed(3), name, reason]),
    ['=', amps(Number(recommended.value)), 'recommended-current', recommended.note],
  ];
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
