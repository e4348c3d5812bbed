import { type Finding, findingNamed } from '../analysis/finding.js';
import { dimensionOfFinding } from '../analysis/finding-names.js';
import { formatQuantity, formatShare } from '../quantity/format-quantity.js';
import {
  type Dimension,
  type QuantityOrShare,
  type ReferenceName,
  references,
} from '../quantity/quantity.js';
import type { RunHeader } from '../record/run-header.js';

/** The limit of a criterion, worked out: as written, and what it comes to in this record. */
export interface Limit {
  readonly written: QuantityOrShare;
  /** In the unit of the finding; undefined where what it refers to was not measured. */
  readonly value: number | undefined;
  /** Nothing but where it is a share of a finding. */
  readonly standardUncertainty: number;
  readonly expanded: number;
}

type Written = Exclude<RunHeader['criteria'][number]['requirement'], { kind: 'is' }>['value'];

/** Shares refer to the nameplate, or to another finding of the same record. */
export function limitOf(value: Written, header: RunHeader, findings: readonly Finding[]): Limit {
  // The reader of the header takes any name; one that is not ours finds nothing below.
  const written = value as QuantityOrShare;
  const exactly = { written, standardUncertainty: 0, expanded: 0 };
  if (written.kind === 'absolute') return { ...exactly, value: written.value };
  const rated = header.modules[0]?.rated;
  const nameplate: Partial<Record<ReferenceName, number | undefined>> = {
    'rated-voltage': rated?.voltage,
    'rated-current': rated?.current,
  };
  const plate = nameplate[written.of];
  if (plate !== undefined) return { ...exactly, value: plate * written.ratio };
  const whole = findingNamed(findings, written.of);
  if (typeof whole?.value !== 'number') return { ...exactly, value: undefined };
  const ratio = Math.abs(written.ratio);
  return {
    written,
    value: whole.value * written.ratio,
    standardUncertainty: (whole.standardUncertainty ?? 0) * ratio,
    expanded: whole.interval === null ? 0 : ((whole.interval[1] - whole.interval[0]) / 2) * ratio,
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

function dimensionOf(finding: string, written: QuantityOrShare): Dimension {
  const known = dimensionOfFinding(finding);
  if (known !== undefined && known !== 'word') return known;
  return written.kind === 'share' && Object.hasOwn(references, written.of) ? references[written.of] : 'ratio';
}
