import { QuantityError, readQuantity } from '../quantity/parse-quantity.js';
import { didYouMean } from '../quantity/nearest.js';
import type { Dimension } from '../quantity/quantity.js';
import { shown } from '../quantity/shown-text.js';
import { checkValue } from './check-value.js';
import { found } from './plain-words.js';
import { errorDimension } from './reading-dimensions.js';
import type { Allowed, Expected, ToleranceEntry } from './tolerance.js';
import { toleranceEntrySchema } from './tolerance-schema.js';
import { familyOrFindingDimension, readWord, type FindingWords } from './vocabulary.js';
import type { Complaint } from './yaml-document.js';

const forms = ['within', 'same', 'becomes'] as const;

/** Reads one entry of a tolerance, or tells what is wrong with it; `path` is where it stands. */
export function readToleranceEntry(
  value: unknown,
  path: readonly PropertyKey[],
  vocabulary: FindingWords,
): ToleranceEntry | readonly Complaint[] {
  const checked = checkValue(toleranceEntrySchema, value, path);
  if (checked.kind === 'bad') return checked.complaints;
  const entry = checked.value;
  const { finding } = entry;
  const dimension = familyOrFindingDimension(finding, vocabulary);
  if (dimension === undefined) {
    const hint = didYouMean(finding, Object.keys(vocabulary.findings));
    return [{ path: [...path, 'finding'], message: `no finding is called ${shown(finding)}${hint}` }];
  }
  const [form, ...more] = forms.filter((each) => Object.hasOwn(entry, each));
  if (form === undefined || more.length > 0)
    return [{ path, message: 'a finding has exactly one of within, same, becomes' }];
  const expected = readExpected(form, entry[form], { finding, dimension, vocabulary });
  return typeof expected === 'string'
    ? [{ path: [...path, form], message: expected }]
    : { finding, expected };
}

function readExpected(
  form: (typeof forms)[number],
  value: unknown,
  {
    finding,
    dimension,
    vocabulary,
  }: { finding: string; dimension: Dimension | 'word'; vocabulary: FindingWords },
): Expected | string {
  if (dimension !== 'word') {
    return form === 'within'
      ? readWithin(value, dimension)
      : `${finding} is a quantity; write within: in place of ${form}:`;
  }
  if (form === 'within') return `${finding} is a word; write same: or becomes: in place of within:`;
  if (form === 'same') return { kind: 'same' };
  const read = readWord(value, finding, vocabulary);
  return 'word' in read ? { kind: 'becomes', word: read.word } : read.problem;
}

function readWithin(value: unknown, dimension: Dimension): Expected | string {
  try {
    const limit = readAllowed(value, dimension);
    const size = limit.kind === 'share' ? limit.ratio : limit.value;
    // Nothing that is measured comes out the same to the last digit.
    return size > 0 ? { kind: 'within', limit } : `${found(value)}; more than nothing is needed`;
  } catch (error) {
    if (error instanceof QuantityError) return error.message;
    throw error;
  }
}

const percentagePoints = /^(\S+) ?percentage points?$/;

/** A percentage is a share of the earlier value; of what is itself in %, points are a difference. */
function readAllowed(value: unknown, dimension: Dimension): Allowed {
  if (typeof value === 'string') {
    const [, points] = percentagePoints.exec(value) ?? [];
    if (points !== undefined && dimension === 'ratio')
      return { kind: 'absolute', value: readQuantity(`${points} %`, 'ratio') };
    if (value.endsWith('%')) return { kind: 'share', ratio: readQuantity(value, 'ratio') };
  }
  return { kind: 'absolute', value: readQuantity(value, errorDimension(dimension)) };
}
