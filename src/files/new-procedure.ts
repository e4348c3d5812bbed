import { isMap, isScalar, isSeq, parseDocument, type YAMLMap } from '../libraries/yaml.js';
import { formatShare } from '../quantity/format-quantity.js';
import { headers } from './file-kind.js';
import type { Criterion, Procedure } from './procedure.js';
import { type ExplainedKind, kindExplained } from './step-explained.js';
import { findingDimension, type Vocabulary } from './vocabulary.js';
import { comment, written } from './written-yaml.js';

/** What procedures may speak of, in words too. */
export interface ExplainedVocabulary extends Vocabulary {
  readonly stepKinds: readonly ExplainedKind[];
}

/** What whoever asks for a procedure wants of it. */
export type NewProcedure = Pick<Procedure, 'name' | 'title' | 'criteria'>;

/** What each key means, as it stands above it. */
const keyWords: Readonly<Record<string, string>> = {
  name: 'What it is called; its records are filed under the module and this.',
  title: 'What it does, as a headline.',
  purpose: 'Why one would run it.',
  circuit: 'How the modules are wired: single, parallel or series.',
  wiring: 'How the bench is wired for it; shown before anything is switched on, and acknowledged.',
  cautions:
    'Shown and acknowledged likewise: mains, hot-surfaces, stored-charge, floating-outputs, earth-link-removed.',
  steps:
    'What is to be done, in order. A share refers to the nameplate (rated-voltage, rated-current) or to what an ' +
    'earlier step has measured (open-circuit-voltage, dropout-current).',
  criteria:
    'What is required of the result: at-least, at-most, or is for words. A value is a quantity, a share of the ' +
    'nameplate, or, with --baseline, of the same finding in an earlier record (120 % of baseline).',
  tolerance:
    'How far the findings may be from those of a --baseline: a shipped tolerance, or a file beside this one.',
  derating:
    'How the recommended current follows from the usable one: margin of its lower bound; above-nameplate: never, or ' +
    'after-soak. procedures/README.md has the air (ambient) and the limit of temperature too.',
};

const limitsWords =
  'What this procedure never exceeds, on top of what the bench allows; each of them may be left out.';
const limitsExample =
  'limits: { voltage: 110 % of rated-voltage, current: 5 A, power: 80 W, temperature: 75 °C }';

/**
 * A procedure made from another one's text: named and titled anew, with the criteria asked for in place of its own,
 * and a comment on each key and each step. All else stays as it is written there.
 */
export function adaptedProcedure(
  text: string,
  wanted: NewProcedure,
  vocabulary: ExplainedVocabulary,
): string {
  const contents = parseDocument(text).contents;
  if (!isMap(contents)) throw new Error('a procedure is a map of keys');
  const parts = partsOf(contents, text);
  const made = parts.map(({ key, part }) => {
    switch (key) {
      case 'railproof':
        return `${part}${comment(`Made from the shipped one: ${text.match(/^name: (.*)$/m)?.[1] ?? ''}.`)}\n`;
      case 'name':
        return remarked(key, `name: ${written(wanted.name)}\n`);
      case 'title':
        return remarked(key, `title: ${written(wanted.title)}\n`);
      case 'steps':
        return limitsRemark() + remarked(key, withKinds(contents, part, text, vocabulary));
      case 'criteria':
        return remarked(key, criteriaText(wanted.criteria, vocabulary));
      default:
        return remarked(key, part);
    }
  });
  const has = (key: string): boolean => parts.some((each) => each.key === key);
  return made.join('') + (has('derating') ? '' : deratingRemark());
}

/** A procedure that only looks at the idle module, with every kind of step explained beside it. */
export function emptyProcedure(
  { name, title, purpose, criteria }: NewProcedure & Pick<Procedure, 'purpose'>,
  vocabulary: ExplainedVocabulary,
): string {
  return [
    `railproof: ${headers.procedure}\n\n`,
    remarked('name', `name: ${written(name)}\n`),
    remarked('title', `title: ${written(title)}\n`),
    remarked('purpose', `purpose: ${written(purpose)}\n`),
    remarked('circuit', 'circuit: single\n'),
    remarked(
      'wiring',
      "wiring:\n  - Module unplugged. Load to the module's output, plus to plus and minus to minus.\n" +
        "  - Meter to the module's output terminals themselves, not to the load's.\n  - Plug the module in.\n",
    ),
    remarked('cautions', 'cautions: [mains, hot-surfaces]\n'),
    limitsRemark(),
    remarked('steps', 'steps:\n  - open-circuit: { for: 5 s }\n'),
    comment('Every kind of step there is: take away the # in front of one, and say what it needs.', '  '),
    ...vocabulary.stepKinds.map((kind) => kindExplained(kind, '  ')),
    remarked('criteria', criteriaText(criteria, vocabulary)),
    deratingRemark(),
  ].join('');
}

/** What stands apart from what is above it. */
const apart: readonly string[] = ['circuit', 'wiring', 'steps', 'criteria', 'derating'];

function remarked(key: string, part: string): string {
  const words = keyWords[key];
  const above = apart.includes(key) ? '\n' : '';
  return words === undefined ? part : above + comment(words) + part;
}

function limitsRemark(): string {
  return '\n' + comment(limitsWords) + comment(limitsExample);
}

function deratingRemark(): string {
  return (
    '\n' + comment(keyWords['derating'] ?? '') + comment('derating: { margin: 80 %, above-nameplate: never }')
  );
}

/** Each top-level key with all that stands up to the next one. */
function partsOf(
  contents: YAMLMap,
  text: string,
): readonly { readonly key: string; readonly part: string }[] {
  const starts = contents.items.map(({ key }) => {
    if (!isScalar(key) || !key.range) throw new Error('a key of a procedure is a word');
    return { key: String(key.value), from: key.range[0] };
  });
  return starts.map(({ key, from }, index) => ({ key, part: text.slice(from, starts[index + 1]?.from) }));
}

/** The steps as they are written, above each what its kind does. */
function withKinds(
  contents: YAMLMap,
  part: string,
  text: string,
  { stepKinds }: ExplainedVocabulary,
): string {
  const steps = contents.get('steps');
  const first = text.indexOf(part);
  let made = part;
  for (const step of isSeq(steps) ? steps.items.toReversed() : []) {
    if (!isMap(step) || !step.range) continue;
    const kind = String(step.items[0]?.key);
    const summary = stepKinds.find((each) => each.kind === kind)?.summary ?? '';
    const line = made.lastIndexOf('\n', step.range[0] - first) + 1;
    made = made.slice(0, line) + comment(`${kind}: ${summary}`, '  ') + made.slice(line);
  }
  return made;
}

function criteriaText(criteria: readonly Criterion[], vocabulary: Vocabulary): string {
  if (criteria.length === 0) return 'criteria: []\n';
  const lines = criteria.map(({ finding, requirement }) => {
    const dimension = findingDimension(finding, vocabulary);
    const required =
      requirement.kind === 'is' || dimension === undefined || dimension === 'word'
        ? `is: ${requirement.kind === 'is' ? written(requirement.word) : ''}`
        : `${requirement.kind}: ${formatShare(requirement.value, dimension)}`;
    return `  - { finding: ${written(finding)}, ${required} }\n`;
  });
  return `criteria:\n${lines.join('')}`;
}
