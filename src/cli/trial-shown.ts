import type { Driver } from '../files/driver.js';
import type { Meeting } from '../instrument/trial-meeting.js';
import type { Need } from '../instrument/trial-pace.js';
import type { Pace, Proposal } from '../instrument/trial-proposal.js';
import type { TrialResult } from '../instrument/trial-result.js';
import type { Trial } from '../instrument/trial.js';
import { visible } from '../instrument/visible.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import { printable } from '../quantity/printable.js';
import type { Seconds } from '../quantity/quantity.js';
import { alignTable } from '../report/align.js';
import { jsonText } from '../report/json-text.js';
import { fitted, wordWrap } from '../quantity/word-wrap.js';
import type { TrialJson } from './schema/trial-schema.js';

/** Where nobody said how wide the screen is. */
const usualWidth = 80;
const indent = '  ';

/** A verdict, then every byte that went for it, with its ends of line: `> INP?\n  < 0\r\n`. */
export function resultText(
  result: TrialResult,
  columns = usualWidth,
  /** `my-load.yaml:18`, where it is known. */
  place?: string,
): string {
  const { part, verdict, name, sent, received, detail, seconds } = result;
  const time = seconds > 0 ? milliseconds(seconds) : '';
  const head = `${verdict.padEnd(10)}  ${name.padEnd(18)}  ${time.padStart(8)}  `;
  // What came stands below, byte for byte; an error is what is to be seen at once.
  const words =
    verdict === 'not-sent'
      ? `"${visible(sent)}" ${detail}`
      : verdict === 'refused' && part !== 'proof'
        ? (received ?? detail)
        : detail;
  const text = wordWrap(words, Math.max(columns - head.length, 20)).replaceAll(
    '\n',
    `\n${' '.repeat(head.length)}`,
  );
  const see = place !== undefined && toBeMended(result) ? [`${indent}see ${printable(place)}`] : [];
  return [`${head}${text}`.trimEnd(), ...bytesText(result, columns), ...see].join('\n');
}

/** Where nobody can tell whether it was understood there is nothing to mend yet. */
function toBeMended({ verdict, received }: TrialResult): boolean {
  return verdict === 'refused' || verdict === 'silent' || (verdict === 'unclear' && received !== undefined);
}

/** What was sent and what came back; what came in pieces is one. */
function bytesText({ bytes }: TrialResult, columns: number): string[] {
  const pieces: { kind: 'sent' | 'received'; text: string }[] = [];
  for (const { kind, bytes: each } of bytes) {
    const text = Buffer.from(each).toString('latin1');
    const last = pieces.at(-1);
    if (last?.kind === 'received' && kind === 'received') last.text += text;
    else pieces.push({ kind, text });
  }
  const lines: string[] = [];
  for (const { kind, text } of pieces) {
    const piece = `${kind === 'sent' ? '>' : '<'} ${visible(text)}`;
    const last = lines.at(-1);
    if (last !== undefined && last.length + indent.length + piece.length <= columns) {
      lines[lines.length - 1] = `${last}${indent}${piece}`;
    } else {
      lines.push(`${indent}${piece}`);
    }
  }
  return lines;
}

/** What the first words of an instrument show that its driver does not say. */
export function meetingText({ remarks }: Meeting): string {
  return remarks.map((remark) => `${remark}\n`).join('');
}

/** How fast it is, and what a driver file had better say. */
export function paceText(driver: Driver, pace: Pace, proposal: Proposal, columns = usualWidth): string {
  const trips = pace.roundTrips.map(({ question, times }) => [
    ...[indent + visible(question), 'answers in', milliseconds(median(times))],
    ...['at most', milliseconds(Math.max(...times))],
  ]);
  const needs = [
    [`${indent}after an answer`, needText(pace.afterAnswer)],
    ...pace.afterOperations.map((each) => [`${indent}after ${each.operation}`, needText(each)]),
  ];
  return [
    '\nHow fast it may be spoken to',
    ...alignTable(trips, ['left', 'left', 'right', 'left', 'right']),
    ...alignTable(needs, ['left', 'left']),
    '\nWhat its driver file should say',
    ...alignTable(proposalRows(driver, proposal), ['left', 'left', 'left']),
    ...unseen[driver.role].map((text) => fitted(text, columns, { indent })),
    '',
  ].join('\n');
}

/** What none of this can show. */
const unseen: Readonly<Record<Driver['role'], readonly string[]>> = {
  load: [
    'How long a reading needs to settle after a change of current does not show with the input off. That is in ' +
      'the manual, or in the first points of a run.',
  ],
  source: ['How long its voltage needs to settle does not show with the output off.'],
  meter: [
    'How long a reading needs to settle after a change of what is measured does not show: an answer that ' +
      'comes in time may still be a mean over what was before.',
  ],
  scanner: ['How long a relay bounces, and the meter behind it settles, does not show here.'],
  thermometer: [],
};

function proposalRows({ wire, settling, operations }: Driver, proposal: Proposal): string[][] {
  const row = (key: string, value: Seconds, before: Seconds): string[] => [
    ...[indent + key, formatQuantity(value, 'time')],
    value === before ? 'as it does' : `and not ${formatQuantity(before, 'time')}`,
  ];
  return [
    row('gap', proposal.gap, wire.gap),
    row('timeout', proposal.timeout, wire.timeout),
    row('settling', proposal.settling, settling),
    ...Object.entries(proposal.rests).map(([operation, rest]) =>
      row(`rest after ${operation}`, rest, operations[operation]?.at(-1)?.rest ?? 0),
    ),
  ];
}

function needText({ pause, late }: Need): string {
  if (pause === undefined) return 'misses the next message, however late it comes';
  if (pause > 0) return `misses what comes too soon; ${milliseconds(pause)} later it hears`;
  return late > 0
    ? `hears the next message at once, answers it ${milliseconds(late)} late`
    : 'hears the next message at once';
}

function median(times: readonly Seconds[]): Seconds {
  const sorted = [...times].sort((one, other) => one - other);
  return sorted[Math.floor(sorted.length / 2)] ?? 0;
}

function milliseconds(time: Seconds): string {
  const value = time * 1000;
  return `${value < 9.95 ? Math.max(0.1, Number(value.toFixed(1))) : Math.round(value)} ms`;
}

export function countLine(results: readonly TrialResult[]): string {
  const count = (verdict: TrialResult['verdict']): number =>
    results.filter((result) => result.verdict === verdict).length;
  const others = (['refused', 'silent', 'unclear'] as const).flatMap((verdict) =>
    count(verdict) === 0 ? [] : [`, ${count(verdict)} ${verdict}`],
  );
  const sent = results.length - count('not-sent');
  return `${count('understood')} of ${sent} messages understood${others.join('')}\n`;
}

/** One JSON object, of a trial that was broken off with what there is. */
export function trialAsJson(
  { name }: Driver,
  results: readonly TrialResult[],
  { meeting, pace, proposal }: Partial<Trial>,
  written: readonly string[],
): string {
  const json: TrialJson = {
    format: 'railproof/trial 1',
    driver: name,
    results: results.map(resultAsJson),
    ...(meeting && { wire: meeting.wire, remarks: meeting.remarks }),
    ...(pace && { pace }),
    ...(proposal && { proposal }),
    ...(written.length > 0 && { written }),
  };
  return jsonText(json);
}

function resultAsJson(result: TrialResult): TrialJson['results'][number] {
  const { part, name, sent, received, verdict, detail, seconds, bytes } = result;
  const overTheLine = bytes.map(({ t, kind, bytes: each }) => {
    const text = Buffer.from(each).toString('latin1');
    return kind === 'sent' ? { t, sent: text } : { t, received: text };
  });
  return { part, name, sent, received, verdict, detail, seconds, bytes: overTheLine };
}
