import { dimensionWords } from '../quantity/dimension-words.js';
import { quantityOrSharePattern, quantityPattern, referencesTo } from '../quantity/parse-quantity.js';
import { baseline, type Dimension } from '../quantity/quantity.js';
import { capitalised } from '../quantity/capitalised.js';
import { type JsonSchema } from './draft-schema.js';
import { errorDimension } from './reading-dimensions.js';
import type { Vocabulary } from './vocabulary.js';

/*
 * What may be said of a finding depends on what it measures. So an editor is given an alternative for each kind of
 * quantity, and one for each finding that is a word; in each the name of the finding tells which is meant.
 */

/** An entry of the `criteria` of a procedure. */
export function criterionAlternatives(vocabulary: Vocabulary, described: JsonSchema): readonly JsonSchema[] {
  return [
    ...measured(vocabulary).flatMap(([dimension, names]) =>
      ['at-least', 'at-most'].map((form) =>
        alternative(described, names, form, limitOf(dimension, described, form)),
      ),
    ),
    ...inWords(vocabulary).map(([name, words]) =>
      alternative(described, [name], 'is', wordAmong(words, described, 'is')),
    ),
  ];
}

/** An entry of the `findings` of a tolerance; a whole family may be meant. */
export function toleranceAlternatives(vocabulary: Vocabulary, described: JsonSchema): readonly JsonSchema[] {
  const words = inWords(vocabulary);
  return [
    ...measured(vocabulary).map(([dimension, names]) =>
      alternative(described, names, 'within', allowedOf(dimension, described), 'with families'),
    ),
    alternative(
      described,
      words.map(([name]) => name),
      'same',
      keyOf(described, 'same'),
      'with families',
    ),
    ...words.map(([name, each]) =>
      alternative(described, [name], 'becomes', wordAmong(each, described, 'becomes'), 'with families'),
    ),
  ];
}

/** A map that names one of these findings, and says this one thing of it. */
function alternative(
  described: JsonSchema,
  names: readonly string[],
  form: string,
  value: JsonSchema,
  families?: 'with families',
): JsonSchema {
  const finding = { ...keyOf(described, 'finding'), ...namedAs(names, families !== undefined) };
  return {
    type: 'object',
    properties: { finding, [form]: value },
    required: ['finding', form],
    additionalProperties: false,
  };
}

/** `share-of-*` stands for every name that begins so and goes on. */
function namedAs(findings: readonly string[], withFamilies: boolean): JsonSchema {
  const plain = findings.filter((finding) => !finding.endsWith('*') || withFamilies);
  const families = findings.filter((finding) => finding.endsWith('*'));
  if (families.length === 0) return { enum: plain };
  const members = families.map((each) => ({ pattern: `^${each.slice(0, -1)}.` }));
  return { anyOf: [...(plain.length === 0 ? [] : [{ enum: plain }]), ...members] };
}

function limitOf(dimension: Dimension, described: JsonSchema, form: string): JsonSchema {
  const { name, examples } = dimensionWords[dimension];
  const names = [...referencesTo(dimension), baseline] as const;
  return {
    ...keyOf(described, form),
    description: `${String(keyOf(described, form)['description'])} ${capitalised(name)}, or a share of ${names.join(' or ')}.`,
    pattern: quantityOrSharePattern(dimension, names),
    examples: [...examples, ...names.map((each) => `100 % of ${each}`)],
  };
}

function allowedOf(dimension: Dimension, described: JsonSchema): JsonSchema {
  const unit = errorDimension(dimension);
  const points = dimension === 'ratio' ? ['2 percentage points'] : [];
  const pattern = [
    quantityPattern('ratio'),
    ...(dimension === 'ratio' ? ['^\\S+ ?percentage points?$'] : [quantityPattern(unit)]),
  ].join('|');
  const examples = ['20 %', ...(dimension === 'ratio' ? points : dimensionWords[unit].examples)];
  return { ...keyOf(described, 'within'), pattern, examples };
}

function wordAmong(words: readonly string[] | undefined, described: JsonSchema, form: string): JsonSchema {
  const { examples, ...rest } = keyOf(described, form);
  return words === undefined ? { ...rest, examples } : { ...rest, enum: words };
}

function keyOf({ properties }: JsonSchema, key: string): JsonSchema {
  return (properties as Readonly<Record<string, JsonSchema>>)[key] ?? {};
}

/** The findings that are quantities, by what they measure. */
function measured({ findings }: Vocabulary): readonly (readonly [Dimension, readonly string[]])[] {
  const names = new Map<Dimension, string[]>();
  for (const [name, dimension] of Object.entries(findings)) {
    if (dimension !== 'word') names.set(dimension, [...(names.get(dimension) ?? []), name]);
  }
  return [...names];
}

/** The findings that are words, and which, where that is known. */
function inWords({
  findings,
  words,
}: Vocabulary): readonly (readonly [string, readonly string[] | undefined])[] {
  return Object.entries(findings)
    .filter(([, dimension]) => dimension === 'word')
    .map(([name]) => [name, words[name]] as const);
}
