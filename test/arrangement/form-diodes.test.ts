import { expect, it } from 'vitest';
import { modulesOf, type Form } from '../../src/arrangement/build.js';
import { formDiodesOf } from '../../src/arrangement/reverse-diodes.js';
import fc from '../property.js';
import { madeProfile } from './made-profile.js';
import { alone, group, stack } from './staged.js';

/** A module as the circuit here knows it: so many volts up to so many amperes, and a stiff diode across it. */
interface Output {
  readonly volts: number;
  readonly amperes: number;
}
type Outputs = ReadonlyMap<string, Output>;

const ohms = 0.05;
const diodeOhms = 1e-3;
const highest = 200;

/** What it delivers at its terminals, its diode's current included. */
function delivered({ volts, amperes }: Output, at: number): number {
  const own = Math.min(amperes, Math.max(0, (volts - at) / ohms));
  return at < 0 ? own - at / diodeOhms : own;
}

/** Of a function that falls, where it comes to a value. */
function where(falling: (x: number) => number, value: number, [low, high]: readonly [number, number]) {
  let [from, to] = [low, high];
  for (let step = 0; step < 50; step += 1) {
    const middle = (from + to) / 2;
    if (falling(middle) > value) from = middle;
    else to = middle;
  }
  return (from + to) / 2;
}

function currentOf(form: Form, at: number, outputs: Outputs): number {
  if (form.kind === 'module') return delivered(outputs.get(form.name) ?? { volts: 0, amperes: 0 }, at);
  if (form.kind === 'group') return form.of.reduce((sum, part) => sum + currentOf(part, at, outputs), 0);
  const stood = (current: number) =>
    form.of.reduce((sum, part) => sum + voltageOf(part, current, outputs), 0);
  return where(stood, at, [0, 300]);
}

function voltageOf(form: Form, current: number, outputs: Outputs): number {
  if (form.kind === 'stack') return form.of.reduce((sum, part) => sum + voltageOf(part, current, outputs), 0);
  return where((at) => currentOf(form, at, outputs), current, [-2, highest]);
}

/** The voltage across each module where its form stands at so much. */
function stand(form: Form, at: number, outputs: Outputs): readonly (readonly [string, number])[] {
  if (form.kind === 'module') return [[form.name, at]];
  if (form.kind === 'group') return form.of.flatMap((part) => stand(part, at, outputs));
  const current = currentOf(form, at, outputs);
  return form.of.flatMap((part) => stand(part, voltageOf(part, current, outputs), outputs));
}

const profileOf = (name: string, { volts, amperes }: Output) =>
  madeProfile(name, { openCircuit: volts, usable: amperes, dropout: amperes, recommended: amperes });

it('the diode of a module within a stack within a group within a stack bears what its own neighbour pushes', () => {
  const form = stack(group(stack(alone('A'), alone('B')), alone('C')), alone('D'));
  const amperes: Readonly<Record<string, number>> = { A: 1, B: 8, C: 1, D: 2 };
  const found = formDiodesOf(
    form,
    modulesOf(form).map((name) => profileOf(name, { volts: 12, amperes: amperes[name] ?? 0 })),
  );
  const by = new Map(found.map(({ module, current, rating }) => [module, { current, rating }]));
  expect(by.get('A')?.current).toBeCloseTo(8, 1);
  expect(by.get('B')?.current).toBeCloseTo(2, 1);
  expect(by.get('C')?.current).toBeCloseTo(2, 1);
  expect(by.get('D')?.current).toBeCloseTo(9, 1);
  expect(by.get('A')?.rating.current).toBeGreaterThanOrEqual(12);
});

it('a module that is in no stack needs no diode, and one in any of several stacks does', () => {
  const profiles = ['A', 'B', 'C', 'D', 'E'].map((name) => profileOf(name, { volts: 12, amperes: 3 }));
  const [a, b, c, d, e] = ['A', 'B', 'C', 'D', 'E'].map(alone) as [Form, Form, Form, Form, Form];
  expect(formDiodesOf(group(a, b), profiles)).toEqual([]);
  const found = formDiodesOf(group(stack(a, b), stack(c, d), e), profiles);
  expect(found.map(({ module }) => module)).toEqual(['A', 'B', 'C', 'D']);
});

it('whatever modules fail and however the output is loaded, no diode bears more than it is rated for, nor blocks more', () => {
  const name = fc.constantFrom('');
  const shape: fc.Arbitrary<Form> = fc.letrec<{ form: Form }>((tie) => ({
    form: fc.oneof(
      { maxDepth: 3, depthIdentifier: 'form' },
      name.map(alone),
      fc
        .tuple(
          fc.constantFrom('group' as const, 'stack' as const),
          fc.array(tie('form'), { minLength: 2, maxLength: 3 }),
        )
        .map(([kind, of]): Form => ({ kind, of })),
    ),
  })).form;
  const numbered = (form: Form, from: { next: number }): Form =>
    form.kind === 'module'
      ? alone(`K${from.next++}`)
      : { kind: form.kind, of: form.of.map((part) => numbered(part, from)) };
  const output = fc.record({
    volts: fc.double({ min: 5, max: 24, noNaN: true }),
    amperes: fc.double({ min: 0.5, max: 10, noNaN: true }),
  });
  fc.assert(
    fc.property(
      shape.map((form) => numbered(form, { next: 1 })).filter((form) => modulesOf(form).length <= 6),
      fc.array(output, { minLength: 6, maxLength: 6 }),
      fc.array(fc.boolean(), { minLength: 6, maxLength: 6 }),
      fc.double({ min: 0, max: 1, noNaN: true }),
      (form, outputs, off, load) => {
        const sound = new Map(modulesOf(form).map((each, index) => [each, outputs[index] as Output]));
        const left: Outputs = new Map(
          [...sound].map(([each, one], index) => [each, off[index] ? { volts: 0, amperes: 0 } : one]),
        );
        const diodes = formDiodesOf(
          form,
          [...sound].map(([each, one]) => profileOf(each, one)),
        );
        const openly = voltageOf(form, 0, left);
        for (const [each, at] of stand(form, load * Math.max(0, openly), left)) {
          const own = left.get(each)?.amperes ?? 0;
          const through = at < 0 ? delivered(left.get(each) as Output, at) - own : 0;
          const diode = diodes.find(({ module }) => module === each);
          // Bisection leaves some µV, which a diode of 1 mΩ makes mA of.
          if (diode === undefined) expect(through).toBeLessThan(0.05);
          else {
            expect(through).toBeLessThanOrEqual(diode.current + 0.05);
            expect(at).toBeLessThanOrEqual(diode.rating.voltage / 1.5 + 0.05);
          }
        }
      },
    ),
    { numRuns: 60 },
  );
}, 60_000);
