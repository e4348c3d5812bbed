import { expandedOf, type Finding, findingNamed } from '../analysis/finding.js';
import { dimensionOfFinding } from '../analysis/finding-names.js';
import { ratedOf } from '../analysis/rated.js';
import { formatQuantity, formatShare } from '../quantity/format-quantity.js';
import {
  baseline,
  type Dimension,
  type QuantityOrAnyShare,
  type ReferenceName,
  references,
} from '../quantity/quantity.js';
import type { RunHeader } from '../record/run-header.js';
import type { Comparable } from './difference.js';

/** The limit of a criterion, worked out: as written, and what it comes to in this record. */
export interface Limit {
  readonly written: QuantityOrAnyShare;
  /** In the unit of the finding; undefined where what it refers to was not measured. */
  readonly value: number | undefined;
  /** Why there is no value; empty where there is one. */
  readonly missing: string;
  /** Set where it is a share of a finding that is only a least value, so that it may be more itself. */
  readonly bound?: 'least';
  /** Nothing but where it is a share of a finding. */
  readonly standardUncertainty: number;
  readonly expanded: number;
}

type Written = Exclude<RunHeader['criteria'][number]['requirement'], { kind: 'is' }>['value'];

/** Shares refer to the nameplate, to another finding of the same record, or to the same one of the baseline. */
export function limitOf(
  finding: string,
  value: Written,
  header: RunHeader,
  findings: readonly Finding[],
): Limit {
  // The reader of the header takes any name; one that is not ours finds nothing below.
  const written = value as QuantityOrAnyShare;
  const exactly = { written, missing: '', standardUncertainty: 0, expanded: 0 };
  if (written.kind === 'absolute') return { ...exactly, value: written.value };
  if (written.of === baseline) {
    if (header.baseline === undefined)
      return { ...exactly, value: undefined, missing: 'no baseline was given: run with --baseline <run>' };
    const then = header.baseline.findings.find(({ name }) => name === finding);
    return shareOf(then, written, 'the baseline does not hold it');
  }
  const plate = nameplate(header)[written.of];
  if (plate !== undefined) return { ...exactly, value: plate * written.ratio };
  return shareOf(findingNamed(findings, written.of), written, 'what it refers to was not measured');
}

function nameplate(header: RunHeader): Partial<Record<ReferenceName, number>> {
  const { voltage, current } = ratedOf(header);
  return { 'rated-voltage': voltage, 'rated-current': current };
}

function shareOf(
  whole: Comparable | undefined,
  written: QuantityOrAnyShare & { kind: 'share' },
  missing: string,
): Limit {
  if (typeof whole?.value !== 'number')
    return { written, value: undefined, missing, standardUncertainty: 0, expanded: 0 };
  const ratio = Math.abs(written.ratio);
  return {
    written,
    value: whole.value * written.ratio,
    missing: '',
    standardUncertainty: (whole.standardUncertainty ?? 0) * ratio,
    expanded: (expandedOf(whole) ?? 0) * ratio,
    ...(whole.bound === undefined ? {} : { bound: whole.bound }),
  };
}

/** As a person reads it: `4 A (100 % of rated-current)`. */
export function limitInWords({ written, value }: Limit, finding: string): string {
  const dimension = dimensionOf(finding, written);
  if (written.kind === 'absolute') return formatQuantity(written.value, dimension);
  const share = formatShare(written, dimension);
  // A share of a measured value has more digits than anyone wants to read.
  return value === undefined
    ? share
    : `${formatQuantity(Number(value.toPrecision(5)), dimension)} (${share})`;
}

function dimensionOf(finding: string, written: QuantityOrAnyShare): Dimension {
  const known = dimensionOfFinding(finding);
  if (known !== undefined && known !== 'word') return known;
  const names: Readonly<Record<string, Dimension>> = references;
  return written.kind === 'share' && Object.hasOwn(names, written.of)
    ? (names[written.of] ?? 'ratio')
    : 'ratio';
}
