import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, it } from 'vitest';

/**
 * Errors that give no advice of their own, and why: whoever stops a run needs none; those of values come to people
 * only as a line of a file, an option or a question, which says itself what is needed; the advice of the others is
 * that of what they wrap or what their makers give.
 */
const without: Readonly<Record<string, string>> = {
  StoppedByOperator: 'it was wanted',
  QuantityError: 'a value',
  ExpressionError: 'a value',
};

interface Source {
  readonly file: string;
  readonly text: string;
}

const sources: readonly Source[] = readdirSync('src', { recursive: true, encoding: 'utf8' })
  .filter((file) => file.endsWith('.ts'))
  .map((file) => ({ file, text: readFileSync(join('src', file), 'utf8') }));

/** Every class of the family of foreseen errors, by its name, with its text. */
function family(): ReadonlyMap<string, string> {
  const classes = sources.flatMap(({ text }) =>
    [...text.matchAll(/class (\w+) extends (\w+)\b[^]*?\n\}\n/g)].map(([body, name = '', parent = '']) => ({
      ...{ name, parent, body },
    })),
  );
  const found = new Map<string, string>();
  for (let before = -1; before < found.size;) {
    before = found.size;
    for (const { name, parent, body } of classes)
      if (parent === 'RailproofError' || found.has(parent)) found.set(name, body);
  }
  return found;
}

/** The whole of a call, from its name to the bracket that closes it. */
function callAt(text: string, from: number): string {
  let depth = 0;
  for (let at = text.indexOf('(', from); at < text.length; at += 1) {
    if (text[at] === '(') depth += 1;
    if (text[at] === ')') depth -= 1;
    if (depth === 0) return text.slice(from, at + 1);
  }
  throw new Error('a call that is never closed');
}

it('every error that is foreseen says what to do next', () => {
  const errors = family();
  expect(errors.size).toBeGreaterThan(60);
  const lacking: string[] = [];
  for (const [name, body] of errors) {
    if (name in without || /\badvice\b/.test(body)) continue;
    // A class between demands it as an argument.
    const [, parent = ''] = / extends (\w+)/.exec(body) ?? [];
    if (/constructor\([^)]*\badvice: string/.test(errors.get(parent) ?? '')) continue;
    // It leaves the advice to whoever makes one: then each of them gives it.
    const made = sources.flatMap(({ file, text }) =>
      [...text.matchAll(new RegExp(`\\bnew ${name}\\(`, 'g'))].map(({ index }) => ({
        file,
        call: callAt(text, index),
      })),
    );
    expect(made.length, name).toBeGreaterThan(0);
    for (const { file, call } of made)
      if (!/\badvice\b/.test(call)) lacking.push(`${name} in ${file}: ${call.slice(0, 80)}`);
  }
  expect(lacking).toEqual([]);
});

it('no error is listed as one that gives no advice and is none, or gives some', () => {
  const errors = family();
  for (const name of Object.keys(without)) expect(errors.get(name), name).not.toMatch(/\badvice\b/);
});

it('what is advised to be typed is a command that there is', () => {
  const program = readFileSync('src/cli/program.ts', 'utf8');
  const commands = new Set(
    [...program.matchAll(/^ {4}'([a-z]+)[ ']|command\('([a-z]+)/gm)].map(([, one, other]) => one ?? other),
  );
  const named = sources.flatMap(({ file, text }) =>
    [...text.matchAll(/[`"]railproof ([a-z]+)\b/g)].map(([, command = '']) => `${command} (${file})`),
  );
  expect(named.length).toBeGreaterThan(20);
  for (const each of named) expect([...commands, 'help'], each).toContain(each.split(' ')[0]);
});
