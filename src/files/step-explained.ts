import * as z from '../libraries/zod.js';
import type { StepKindWord } from './vocabulary.js';
import { comment } from './written-yaml.js';

/** A kind of step, with a sentence on what it does. */
export interface ExplainedKind extends StepKindWord {
  readonly summary: string;
}

interface Parameter {
  readonly description?: string;
  readonly default?: string | number | boolean;
  readonly examples?: readonly unknown[];
}

/** Of parameters that must be given, where the first example of their schema would not do or there is none. */
const examples: Readonly<Record<string, string>> = {
  for: '1 min',
  name: 'position',
  ask: 'Which way up does the module lie?',
  to: '100 % of rated-current',
  ceiling: '150 % of rated-current',
};

/** As comments: what a kind of step does, what it may be told, and a step of it to take the `#` from. */
export function kindExplained({ kind, summary, parameters }: ExplainedKind, indent: string): string {
  const schema = z.toJSONSchema(parameters, { io: 'input' });
  const known = Object.entries((schema.properties ?? {}) as Readonly<Record<string, Parameter>>);
  const required = schema.required ?? [];
  const lines = known.map(([name, parameter]) => {
    const { description = '', default: usual } = parameter;
    const otherwise = required.includes(name)
      ? ' (must be given)'
      : usual === undefined
        ? ''
        : ` (${String(usual)} when left out)`;
    return comment(`    ${name}: ${description}${otherwise}`, indent);
  });
  const given = known
    .filter(([name]) => required.includes(name))
    .map(([name, parameter]) => `${name}: ${examples[name] ?? String(parameter.examples?.[0])}`);
  const body = given.length === 0 ? '{}' : `{ ${given.join(', ')} }`;
  return [
    `${indent}#\n`,
    comment(`${kind}: ${summary}`, indent),
    ...lines,
    `${indent}# - ${kind}: ${body}\n`,
  ].join('');
}
