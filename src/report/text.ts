import type { Finding } from '../analysis/finding.js';
import type { Decision } from '../judgement/judge.js';
import { formatQuantity, formatUncertain, type UncertainText } from '../quantity/format-quantity.js';
import { alignTable } from './align.js';
import { endedHow, type Result } from './result.js';
import type { Style } from './style.js';

/** The report for a terminal or a text file: the answer first, then what it rests on. */
export function resultAsText(result: Result, style: Style): string {
  return [
    heading(result, style),
    ...warnings(result, style),
    answer(result, style),
    findingsTable(result, style),
    derivation(result, style),
    decisionsTable(result, style),
    footing(result),
  ]
    .filter((part) => part !== '')
    .join('\n\n')
    .concat('\n');
}

function heading({ header, run }: Result, style: Style): string {
  const module = header.modules[0];
  const plate =
    module === undefined
      ? ''
      : `${formatQuantity(module.rated.voltage, 'voltage')}, ${formatQuantity(module.rated.current, 'current')}`;
  const description = module?.description ?? '';
  const began = header.began.replace('T', ' ').replace(/:\d\d(\.\d+)?Z$/, ' UTC');
  return [
    style.strong(`${module?.name ?? '?'}: ${header.procedure.title}`),
    [description, `nameplate ${plate}`].filter((part) => part !== '').join(' · '),
    `${header.procedure.name} on ${header.bench.name}${header.bench.simulated ? ' (simulated)' : ''}, ${began}, record ${run}`,
  ].join('\n');
}

function warnings(result: Result, style: Style): string[] {
  const { how, reason } = endedHow(result);
  const { integrity } = result;
  const lines: string[] = [];
  if (integrity.kind === 'damaged') {
    lines.push(
      `DAMAGED RECORD: line ${integrity.line} of the journal: ${integrity.problem}. What follows rests on the first ${integrity.lines} lines.`,
    );
  }
  if (how === 'cut-off')
    lines.push('CUT OFF: the record ends without an end; what follows is what is whole.');
  if (how === 'stopped') lines.push(`STOPPED: ${reason ?? ''}`);
  if (how === 'failed') lines.push(`FAILED: ${reason ?? ''}`);
  return lines.map((line) => style.warn(line));
}

function answer({ findings }: Result, style: Style): string {
  const recommended = findings.find((finding) => finding.name === 'recommended-current');
  const usable = findings.find((finding) => finding.name === 'usable-current');
  if (recommended === undefined || usable === undefined) return '';
  const continuous = formatQuantity(Number(recommended.value), 'current', { significant: 3 });
  return [
    style.strong(`Load it continuously with up to ${continuous}.`),
    `It delivers ${inOneLine(usable)}; ${usable.note}.`,
  ].join('\n');
}

function findingsTable({ findings }: Result, style: Style): string {
  if (findings.length === 0) return 'No findings: the record holds too little.';
  const rows = findings.map((finding) => {
    const { value, uncertainty, unit } = columns(finding);
    const plusMinus = uncertainty === '' ? '' : '±';
    return [
      finding.name,
      value,
      plusMinus,
      uncertainty,
      unit,
      finding.step === null ? '' : `step ${finding.step}`,
      finding.note,
    ];
  });
  const table = alignTable(rows, ['left', 'right', 'left', 'right', 'left', 'left', 'left']);
  return [
    style.strong('Findings') + '   value ± expanded uncertainty, 95 %',
    ...table.map((row) => `  ${row}`),
  ].join('\n');
}

function columns(finding: Finding): UncertainText {
  if (finding.dimension === null || typeof finding.value === 'string') {
    return { value: String(finding.value), uncertainty: '', unit: '' };
  }
  const expanded = finding.interval === null ? undefined : (finding.interval[1] - finding.interval[0]) / 2;
  return formatUncertain(finding.value, expanded, finding.dimension);
}

function inOneLine(finding: Finding): string {
  const { value, uncertainty, unit } = columns(finding);
  return uncertainty === '' ? `${value} ${unit}` : `${value} ± ${uncertainty} ${unit}`;
}

function derivation({ findings }: Result, style: Style): string {
  const recommended = findings.find((finding) => finding.name === 'recommended-current');
  const usable = findings.find((finding) => finding.name === 'usable-current');
  if (recommended === undefined || usable === undefined) return '';
  const amps = (value: number): string => formatQuantity(value, 'current', { significant: 4 });
  const rows = [
    ['', amps(Number(usable.value)), 'usable-current', usable.note],
    ...recommended.factors.map(({ name, factor, reason }) => ['×', factor.toFixed(3), name, reason]),
    ['=', amps(Number(recommended.value)), 'recommended-current', recommended.note],
  ];
  const table = alignTable(rows, ['left', 'right', 'left', 'left']);
  return [style.strong('How the recommendation comes about'), ...table.map((row) => `  ${row}`)].join('\n');
}

const verdicts: Readonly<Record<Decision['outcome'], string>> = {
  conforms: 'conforms',
  'does-not-conform': 'DOES NOT CONFORM',
  undecided: 'undecided',
};

function decisionsTable({ decisions }: Result, style: Style): string {
  if (decisions.length === 0) return '';
  const rows = decisions.map(({ outcome, finding, requirement, probability, note }) => [
    verdicts[outcome],
    finding,
    requirement,
    [probability === null ? '' : `conforms with a probability of ${percent(probability)}`, note]
      .filter((part) => part !== '')
      .join('; '),
  ]);
  const table = alignTable(rows, ['left', 'left', 'left', 'left']);
  return [
    style.strong('Decisions') + '   guard band as wide as the expanded uncertainty',
    ...table.map((row) => `  ${row}`),
  ].join('\n');
}

/** Never 100 % and never 0 %: nothing measured is that sure. */
function percent(probability: number): string {
  if (probability > 0.999) return 'more than 99.9 %';
  if (probability < 0.001) return 'less than 0.1 %';
  return `${(probability * 100).toFixed(1)} %`;
}

function footing({ header, evidence, integrity }: Result): string {
  const instruments = header.instruments.map(
    ({ role, identity, address, driver }) => `${role}: ${identity}, ${driver}, ${address}`,
  );
  const journal =
    integrity.kind === 'whole'
      ? 'journal whole, every seal holds'
      : `journal ${integrity.kind}, ${integrity.lines} lines believed`;
  return [...instruments, `${evidence.readings} readings; ${journal}`].join('\n');
}
