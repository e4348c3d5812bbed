import { describe, expect, it } from 'vitest';
import { forbiddenIn } from '../../src/arrangement/forbidden-connection.js';
import type { Joint } from '../../src/arrangement/stages-wish.js';
import { netlistOf, settledState, type Switching } from '../../src/arrangement/switching.js';
import fc from '../property.js';
import { largestCurrent } from './nodal-analysis.js';
import { diode, makes, source, switched } from './switched.js';

const found = (switching: Switching, driven: readonly string[] = []) =>
  forbiddenIn(switching, netlistOf(switching, settledState(switching.contacts, driven)));

describe('a forbidden connection', () => {
  it('is an output across itself, with the contacts that do it', () => {
    const switching = switched([makes('S', 'W1+', 'x'), makes('T', 'x', 'W1-')]);
    expect(found(switching, ['S'])).toBeUndefined();
    expect(found(switching, ['S', 'T'])).toEqual({
      kind: 'short',
      modules: ['W1'],
      volts: 12,
      through: ['S', 'T'],
      sentence: 'the output of W1 would be shorted, through S and T',
    });
  });

  it('is a stack side by side with a single output', () => {
    const three = ['W1', 'W2', 'W3'].map((name) => source(name));
    const wires: Joint[] = [
      ['W1+', 'W2-'],
      ['W1-', 'W3-'],
    ];
    const switching = switched([makes('S', 'W2+', 'W3+')], wires, { sources: three });
    expect(found(switching)).toBeUndefined();
    expect(found(switching, ['S'])).toMatchObject({
      kind: 'unequal',
      volts: 12,
      through: ['S'],
      sentence: 'the stack of W1 and W2 would be side by side with W3, 12.0 V apart, through S',
    });
  });

  it('is two outputs against each other', () => {
    const switching = switched([makes('S', 'W1+', 'W2-')], [['W1-', 'W2+']]);
    expect(found(switching, ['S'])).toMatchObject({ kind: 'reversed', volts: 24, modules: ['W1', 'W2'] });
  });

  it('is a linear stage that is fed backwards', () => {
    const wires: Joint[] = [['W1-', 'in+']];
    expect(found(switched([makes('S', 'W1+', 'in-')], wires), ['S'])).toMatchObject({
      kind: 'reversed',
      volts: 12,
      sentence: 'W1 would feed the linear stage backwards, with 12.0 V, through S',
    });
  });

  it('is not two alike outputs side by side, though one is a little higher', () => {
    const wires: Joint[] = [['W1-', 'W2-']];
    const pair = (open: number) =>
      switched([makes('S', 'W1+', 'W2+')], wires, { sources: [source('W1'), source('W2', open)] });
    expect(found(pair(12.5), ['S'])).toBeUndefined();
    expect(found(pair(12.7), ['S'])).toMatchObject({ kind: 'unequal' });
  });

  it('is not one that a diode blocks, and is one that it lets through', () => {
    const three = ['W1', 'W2', 'W3'].map((name) => source(name));
    const wires: Joint[] = [
      ['W1+', 'W2-'],
      ['W1-', 'W3-'],
      ['W2+', 'in+'],
    ];
    const steered = (from: string, to: string) =>
      switched([], wires, { sources: three, diodes: [diode('D1', from, to)] });
    expect(found(steered('W3+', 'in+'))).toBeUndefined();
    expect(found(steered('in+', 'W3+'))).toMatchObject({ kind: 'unequal', volts: 11.5 });
  });

  it('that is the worst of several is told', () => {
    const three = ['W1', 'W2', 'W3'].map((name) => source(name));
    const contacts = [makes('S', 'W1-', 'W2+'), makes('T', 'W3-', 'W3+')];
    const switching = switched(contacts, [['W1+', 'W2-']], { sources: three });
    expect(found(switching, ['T'])).toMatchObject({ volts: 12, modules: ['W3'], through: ['T'] });
    expect(found(switching, ['S', 'T'])).toMatchObject({ volts: 24, through: ['S'] });
  });
});

it('what is forbidden is just what drives a current with no load, by nodal analysis', () => {
  const sources = [source('W1'), source('W2'), source('W3'), source('W4', 15, 15)];
  const nodes = ['in+', 'in-', 'x', ...sources.flatMap(({ name }) => [`${name}+`, `${name}-`])];
  const pair = fc
    .tuple(fc.constantFrom(...nodes), fc.constantFrom(...nodes))
    .filter(([one, other]) => one !== other);
  let forbidden = 0;
  let blocked = 0;
  fc.assert(
    fc.property(
      fc.array(pair, { minLength: 2, maxLength: 6 }),
      fc.array(pair, { maxLength: 3 }),
      (joints, steering) => {
        const diodes = steering.map(([from, to], index) => diode(`D${index}`, from, to, 0.1));
        const switching = switched([], joints, { sources, diodes });
        const told = found(switching);
        const current = largestCurrent(switching, joints);
        if (told === undefined) expect(current).toBeLessThan(1);
        else expect(current).toBeGreaterThan(10);
        if (told !== undefined) forbidden += 1;
        else if (found(switched([], [...joints, ...steering], { sources })) !== undefined) blocked += 1;
      },
    ),
    { numRuns: 2000 },
  );
  // Both answers came up often, and diodes that make the difference did.
  expect(Math.min(forbidden, 2000 - forbidden, blocked)).toBeGreaterThan(50);
});
