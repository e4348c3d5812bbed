import { describe, expect, it } from 'vitest';
import type { Form } from '../../src/arrangement/build.js';
import { formInWords, isSameForm, madeForm, withoutDrops } from '../../src/arrangement/made-form.js';
import type { Joint } from '../../src/arrangement/stages-wish.js';
import { netlistOf, settledState, type Switching } from '../../src/arrangement/switching.js';
import fc from '../property.js';
import { changeOvers, diode, pairWires, source, switched } from './switched.js';

const alone = (name: string): Form => ({ kind: 'module', name });
const group = (...of: Form[]): Form => ({ kind: 'group', of });
const stack = (...of: Form[]): Form => ({ kind: 'stack', of });
const made = (switching: Switching, driven: readonly string[] = []) =>
  madeForm(netlistOf(switching, settledState(switching.contacts, driven)));

function bare(switching: Switching, driven: readonly string[] = []): Form {
  const found = made(switching, driven);
  if (found.kind !== 'form') throw new Error(`the contacts make ${found.kind}`);
  return withoutDrops(found.form);
}

it('the same contacts make a group at rest and a stack when driven', () => {
  const switching = switched(changeOvers(false), pairWires);
  expect(isSameForm(bare(switching), group(alone('W2'), alone('W1')))).toBe(true);
  expect(bare(switching, ['S1', 'S2'])).toEqual(stack(alone('W1'), alone('W2')));
});

it('the order of a stack counts, that of a group does not', () => {
  const [a, b, c] = [alone('W1'), alone('W2'), alone('W3')];
  expect(isSameForm(stack(a, b), stack(b, a))).toBe(false);
  expect(isSameForm(group(a, b), group(b, a))).toBe(true);
  expect(isSameForm(group(a, group(b, c)), group(c, b, a))).toBe(true);
  expect(isSameForm(stack(group(a, b), c), stack(group(b, a), c))).toBe(true);
  expect(isSameForm(stack(group(a, b), c), group(a, b, c))).toBe(false);
});

it('whatever groups and stacks are wired, they are found again', () => {
  const forms = fc.letrec<{ form: Form }>((tie) => ({
    form: fc.oneof(
      { maxDepth: 3, depthSize: 'small' },
      fc.constant(alone('?')),
      fc.array(tie('form'), { minLength: 2, maxLength: 3 }).map((of) => group(...of)),
      fc.array(tie('form'), { minLength: 2, maxLength: 3 }).map((of) => stack(...of)),
    ),
  })).form;
  fc.assert(
    fc.property(forms, (shape) => {
      const names: string[] = [];
      const wires: Joint[] = [];
      const form = wired(shape, 'in-', 'in+', { names, wires, nodes: [] });
      // Alike volts only: a group of a stack and a single module would be forbidden, and is no matter here.
      const switching = switched([], wires, { sources: names.map((name) => source(name)) });
      expect(isSameForm(bare(switching), form)).toBe(true);
    }),
    { numRuns: 300 },
  );
});

/** Wires a form between two nodes; gives it back with names to its modules. */
function wired(
  form: Form,
  low: string,
  high: string,
  made: { readonly names: string[]; readonly wires: Joint[]; readonly nodes: number[] },
): Form {
  if (form.kind === 'module') {
    const name = `W${made.names.length + 1}`;
    made.names.push(name);
    made.wires.push([`${name}-`, low], [`${name}+`, high]);
    return alone(name);
  }
  if (form.kind === 'group') return group(...form.of.map((part) => wired(part, low, high, made)));
  let below = low;
  const parts = form.of.map((part, index) => {
    const above = index === form.of.length - 1 ? high : `n${made.nodes.push(index)}`;
    const found = wired(part, below, above, made);
    below = above;
    return found;
  });
  return stack(...parts);
}

describe('what does not feed', () => {
  const three = ['W1', 'W2', 'W3'].map((name) => source(name));

  it('is left out where it leads nowhere', () => {
    const wires: Joint[] = [
      ['W1-', 'in-'],
      ['W1+', 'in+'],
      ['W2-', 'in+'],
      ['W3+', 'x'],
    ];
    expect(bare(switched([], wires, { sources: three }))).toEqual(alone('W1'));
  });

  it('is nothing, where nothing is joined', () => {
    expect(made(switched([], [['W1-', 'in-']]))).toEqual({ kind: 'nothing' });
  });

  it('is a diode that a higher voltage blocks', () => {
    const wires: Joint[] = [
      ['W1-', 'in-'],
      ['W1+', 'W2-'],
      ['W2+', 'in+'],
    ];
    const steered = switched([], wires, { diodes: [diode('D1', 'W1+', 'in+')] });
    expect(bare(steered)).toEqual(stack(alone('W1'), alone('W2')));
  });
});

it('a diode that conducts takes its voltage, and outputs behind one each are side by side', () => {
  const wires: Joint[] = [
    ['W1-', 'in-'],
    ['W2-', 'in-'],
  ];
  const diodes = [diode('D1', 'W1+', 'in+'), diode('D2', 'W2+', 'in+', 0.4)];
  const sources = [source('W1', 12.1), source('W2', 12)];
  expect(made(switched([], wires, { diodes, sources }))).toEqual({
    kind: 'form',
    form: {
      kind: 'group',
      of: [
        { kind: 'behind', drop: 0.5, of: alone('W1') },
        { kind: 'behind', drop: 0.4, of: alone('W2') },
      ],
    },
    diodes: ['D1', 'D2'],
  });
});

it('what is neither a group nor a stack is called so', () => {
  const five = ['W1', 'W2', 'W3', 'W4', 'W5'].map((name) => source(name, name === 'W5' ? 0 : 12));
  const bridge: Joint[] = [
    ['W1-', 'in-'],
    ['W2-', 'in-'],
    ['W1+', 'a'],
    ['W2+', 'b'],
    ['W3-', 'a'],
    ['W4-', 'b'],
    ['W3+', 'in+'],
    ['W4+', 'in+'],
    ['W5-', 'a'],
    ['W5+', 'b'],
  ];
  expect(made(switched([], bridge, { sources: five }))).toMatchObject({ kind: 'neither' });
});

it('a form is put into words', () => {
  expect(formInWords(stack(group(alone('W1'), alone('W2')), alone('W3')))).toBe(
    'the stack of the group of W1 and W2 and W3',
  );
});
