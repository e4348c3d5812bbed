import * as z from '../libraries/zod.js';
import { QuantityError, readQuantityOrAnyShare } from '../quantity/parse-quantity.js';
import type { Dimension } from '../quantity/quantity.js';
import { shown } from '../quantity/shown-text.js';
import { checkValue } from './check-value.js';
import { didYouMean } from '../quantity/nearest.js';
import type { Criterion, Requirement } from './procedure.js';
import { findingDimension, readWord, type Vocabulary } from './vocabulary.js';
import type { Complaint } from './yaml-document.js';

/** A criterion as written. What its value may be depends on the finding, so it is read afterwards. */
export const criterionSchema = z.strictObject({
  finding: z.string().meta({ description: 'What is required of: the name of a finding.' }),
  'at-least': bound('The finding must be this or more.').exactOptional(),
  'at-most': bound('The finding must be this or less.').exactOptional(),
  is: z
    .unknown()
    .meta({
      type: 'string',
      description: 'The word that the finding must be.',
      examples: ['constant-current'],
    })
    .exactOptional(),
});

const forms = ['at-least', 'at-most', 'is'] as const;

/** Reads one criterion, or tells what is wrong with it; `path` is where it stands. */
export function readCriterion(
  value: unknown,
  path: readonly PropertyKey[],
  vocabulary: Vocabulary,
): Criterion | readonly Complaint[] {
  const checked = checkValue(criterionSchema, value, path);
  if (checked.kind === 'bad') return checked.complaints;
  const criterion = checked.value;
  const { finding } = criterion;

  const dimension = findingDimension(finding, vocabulary);
  if (dimension === undefined) {
    const isFamily = Object.hasOwn(vocabulary.findings, finding);
    const hint = didYouMean(finding, Object.keys(vocabulary.findings));
    const message = isFamily
      ? `${shown(finding)} is one for each module; name one: ${finding.replace('*', 'K1')}`
      : `no finding is called ${shown(finding)}${hint}`;
    return [{ path: [...path, 'finding'], message }];
  }
  const [form, ...more] = forms.filter((each) => Object.hasOwn(criterion, each));
  if (form === undefined || more.length > 0) {
    return [{ path, message: 'a criterion has exactly one of at-least, at-most, is' }];
  }
  const requirement = readRequirement(form, criterion[form], { finding, dimension, vocabulary });
  if (typeof requirement === 'string') return [{ path: [...path, form], message: requirement }];
  return { finding, requirement };
}

function readRequirement(
  form: (typeof forms)[number],
  value: unknown,
  {
    finding,
    dimension,
    vocabulary,
  }: { finding: string; dimension: Dimension | 'word'; vocabulary: Vocabulary },
): Requirement | string {
  if (dimension === 'word') {
    if (form !== 'is') return `${finding} is a word; write is: in place of ${form}:`;
    const read = readWord(value, finding, vocabulary);
    return 'word' in read ? { kind: 'is', word: read.word } : read.problem;
  }
  if (form === 'is') return `${finding} is a quantity; write at-least: or at-most: in place of is:`;
  try {
    return { kind: form, value: readQuantityOrAnyShare(value, dimension) };
  } catch (error) {
    if (error instanceof QuantityError) return error.message;
    throw error;
  }
}

function bound(description: string): z.ZodUnknown {
  return z.unknown().meta({
    type: 'string',
    description,
    examples: ['4 A', '100 % of rated-current', '120 % of baseline', '1 %'],
  });
}
