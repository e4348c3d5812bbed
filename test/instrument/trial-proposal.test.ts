import { describe, expect, it } from 'vitest';
import type { Driver } from '../../src/files/driver.js';
import { pauses, type Need } from '../../src/instrument/trial-pace.js';
import { type Pace, proposalFor, roundedUp } from '../../src/instrument/trial-proposal.js';
import fc from '../property.js';
import { toyDriver } from './fixtures/toy-load.js';

const heard: Need = { pause: 0, late: 0 };
const after = (operation: string, need: Partial<Need>) => ({
  ...heard,
  ...need,
  operation,
  message: operation,
});
const pace = (change: Partial<Pace> = {}): Pace => ({
  ...{ roundTrips: [], afterAnswer: heard, afterOperations: [] },
  ...change,
});
const withWire = (change: Partial<Driver['wire']>, settling = 0): Driver => ({
  ...toyDriver,
  settling,
  wire: { ...toyDriver.wire, ...change },
});

describe('what a trial proposes', () => {
  it('leaves alone what will do', () => {
    const driver = withWire({ gap: 0.02, timeout: 1 }, 0.05);
    const measured = pace({ roundTrips: [{ question: '*IDN?', times: [0.012, 0.2] }] });
    expect(proposalFor(driver, measured)).toEqual({ gap: 0.02, timeout: 1, settling: 0.05, rests: {} });
  });

  it('gives a slow reading five times its slowest answer', () => {
    const measured = pace({ roundTrips: [{ question: 'READ?', times: [0.8, 0.9, 0.85] }] });
    expect(proposalFor(toyDriver, measured).timeout).toBe(5);
  });

  it('gives a pause to all of them where half of them need one, and a rest of its own to whoever needs more', () => {
    const measured = pace({
      afterOperations: [
        after('make-safe', { pause: 0.02 }),
        after('set-current', { pause: 0.02 }),
        after('current-mode', { pause: 0.2 }),
      ],
    });
    expect(proposalFor(toyDriver, measured)).toMatchObject({ gap: 0.05, rests: { 'current-mode': 0.5 } });
  });

  it('lets nothing rest for the sake of one operation', () => {
    const measured = pace({
      afterOperations: [
        after('make-safe', {}),
        after('set-current', {}),
        after('current-mode', { pause: 0.5 }),
      ],
    });
    expect(proposalFor(toyDriver, measured)).toMatchObject({ gap: 0, rests: { 'current-mode': 1 } });
  });

  it('takes one that answers late after an operation as not settled before', () => {
    const measured = pace({ afterOperations: [after('current-mode', { late: 0.28 })] });
    expect(proposalFor(toyDriver, measured)).toMatchObject({ settling: 0.5, timeout: 2 });
  });

  it('proposes no pause where none was long enough: something else is the matter', () => {
    const measured = pace({ afterOperations: [after('current-mode', { pause: undefined })] });
    expect(proposalFor(toyDriver, measured)).toMatchObject({ gap: 0, rests: {} });
  });
});

const time = fc.double({ min: 0, max: 20, noNaN: true });
const need = fc.record({ pause: fc.option(fc.constantFrom(...pauses), { nil: undefined }), late: time });
const anyPace = fc.record({
  roundTrips: fc.array(fc.record({ question: fc.string(), times: fc.array(time, { maxLength: 5 }) }), {
    maxLength: 5,
  }),
  afterAnswer: need,
  afterOperations: fc
    .uniqueArray(fc.constantFrom(...Object.keys(toyDriver.operations)))
    .chain((names) => fc.tuple(...names.map((name) => need.map((each) => after(name, each))))),
});

describe('whatever was measured', () => {
  it('no answer that was seen comes too late, and nothing that was said is missed', () => {
    fc.assert(
      fc.property(anyPace, time, time, time, (measured, gap, timeout, settling) => {
        const proposal = proposalFor(withWire({ gap, timeout }, settling), measured);
        const times = measured.roundTrips.flatMap((each) => each.times);
        for (const each of times) expect(proposal.timeout).toBeGreaterThanOrEqual(5 * each * (1 - 1e-6));
        expect(proposal.gap).toBeGreaterThanOrEqual(measured.afterAnswer.pause ?? 0);
        for (const { operation, pause, late } of measured.afterOperations) {
          expect(Math.max(proposal.gap, proposal.rests[operation] ?? 0)).toBeGreaterThanOrEqual(pause ?? 0);
          expect(proposal.settling).toBeGreaterThanOrEqual(late * (1 - 1e-6));
        }
      }),
    );
  });

  it('nothing becomes shorter than the file has it, and nothing much longer than it need be', () => {
    fc.assert(
      fc.property(anyPace, time, time, time, (measured, gap, timeout, settling) => {
        const proposal = proposalFor(withWire({ gap, timeout }, settling), measured);
        expect(proposal.gap).toBeGreaterThanOrEqual(gap);
        expect(proposal.timeout).toBeGreaterThanOrEqual(timeout);
        expect(proposal.settling).toBeGreaterThanOrEqual(settling);
        const lates = measured.afterOperations.map(({ late }) => late);
        const slowest = Math.max(0, ...lates, ...measured.roundTrips.flatMap((each) => each.times));
        expect(proposal.timeout).toBeLessThanOrEqual(
          Math.max(timeout, 0.001, 2.5 * 5 * slowest * (1 + 1e-6)),
        );
        const longest = Math.max(
          ...[measured.afterAnswer, ...measured.afterOperations].map(({ pause }) => pause ?? 0),
        );
        expect(proposal.gap).toBeLessThanOrEqual(Math.max(gap, 2.5 * longest));
      }),
    );
  });

  it.each([
    [0, 0],
    [0.0003, 0.001],
    [0.001, 0.001],
    [0.0011, 0.002],
    [0.06, 0.1],
    [0.1, 0.1],
    [0.21, 0.5],
    [4.1, 5],
    [5.1, 10],
    [50, 50],
  ])('%s s is rounded up to %s s', (given, rounded) => {
    expect(roundedUp(given)).toBeCloseTo(rounded, 12);
  });
});
