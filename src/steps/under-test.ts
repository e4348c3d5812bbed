import type { Tap } from '../bench/sample.js';
import type { Nameplate } from '../circuit/nameplate.js';
import type { Module } from '../files/module.js';
import type { Circuit } from '../files/procedure.js';

/** What is connected: one module, or several wired to a group or to a stack. */
export interface UnderTest {
  readonly circuit: Circuit;
  /** In the order of the circuit, the lowest of a stack first. */
  readonly modules: readonly [Module, ...Module[]];
  /** `K1`, or `K1+K2`. */
  readonly name: string;
  /** Of the whole: what the circuit makes of the labels. */
  readonly rated: Nameplate;
}

/** Where a meter stands for each module: across its ballast in a group, across its output in a stack. */
export function tapsOf({ circuit, modules }: Pick<UnderTest, 'circuit' | 'modules'>): readonly Tap[] {
  const across = circuit === 'parallel' ? 'ballast' : 'output';
  return modules.map(({ name }, index) => ({ place: index + 1, at: `${across}-of-${name}` }));
}
