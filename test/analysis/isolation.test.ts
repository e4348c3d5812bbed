import { describe, expect, it } from 'vitest';
import { dimensionOfFinding } from '../../src/analysis/finding-names.js';
import { isolationFindings } from '../../src/analysis/isolation.js';
import type { JournalEvent, Phase } from '../../src/record/journal-event.js';
import type { RunHeader } from '../../src/record/run-header.js';
import { collected, eventsOf, headerOf } from './evidence-of.js';

const settings = { bondedBelow: 10, isolatedAbove: 1e6, openAbove: 10e6, leadResistanceBelow: 2 };
const open = Infinity;

/** A point and what the meter read there, in Ω. */
type Looked = readonly [phase: Phase, of: string | undefined, ...ohms: readonly number[]];

const together: Looked = ['leads-together', undefined, 0.12, 0.12];
const apart: Looked = ['leads-apart', undefined, open, open];
const earth = (...ohms: readonly number[]): Looked => ['earth', 'K1', ...ohms];

interface Change {
  readonly modules?: readonly Partial<RunHeader['modules'][number]>[];
  readonly settings?: Readonly<Record<string, unknown>>;
}

function header(change: Change): RunHeader {
  const usual = headerOf({ meter: { resistance: { ofReading: 0.002, fixed: 0.05 } } });
  const [module] = usual.modules;
  if (module === undefined) throw new Error('a header has a module');
  const k1 = { ...module, protectionClass: 'I' as const };
  return {
    ...usual,
    modules: (change.modules ?? [{}]).map((each) => ({ ...k1, ...each })),
    steps: [{ kind: 'isolation-check', summary: '', settings: change.settings ?? settings }],
  };
}

function findings(points: readonly Looked[], change: Change = {}) {
  const more = points.flatMap(([phase, of, ...ohms], index): JournalEvent[] => {
    const at = { step: 1, point: index + 1 };
    const about = of === undefined ? {} : { of };
    return [
      { event: 'point-began', ...at, phase, set: {}, ...about },
      ...ohms.map((each, sample): JournalEvent => ({
        event: 'reading',
        ...at,
        sample: sample + 1,
        of: 'meter',
        what: 'resistance',
        at: of === undefined ? 'leads' : `earth-of-${of}`,
        ...(each === open ? { value: null, problem: 'overload' } : { value: each }),
      })),
      { event: 'point-ended', ...at, outcome: 'measured' },
    ];
  });
  const evidence = collected(eventsOf([{ kind: 'isolation-check', more }]), header(change));
  return new Map(isolationFindings(evidence).map((finding) => [finding.name, finding]));
}

const proof = [together, apart];

describe('the earth relation', () => {
  it('of a bonded output, with the resistance less that of the leads', () => {
    const found = findings([...proof, earth(0.2, 0.2, 0.2), ...proof]);
    expect(found.get('earth-relation')).toMatchObject({ value: 'bonded', dimension: null, step: 1 });
    const resistance = found.get('earth-resistance');
    expect(resistance?.value).toBeCloseTo(0.08, 12);
    expect(resistance).toMatchObject({
      dimension: 'resistance',
      note: 'measured to the earth pin of its plug; the leads are taken off',
    });
    expect(resistance?.bound).toBeUndefined();
    expect(resistance?.interval?.[1]).toBeLessThan(0.2);
  });

  it('of an isolated output: at least what the meter can show, and no word on what voltage it withstands', () => {
    const found = findings([...proof, earth(open, open), ...proof]);
    expect(found.get('earth-relation')?.value).toBe('isolated');
    expect(found.get('earth-relation')?.note).toBe(
      'above 1 MΩ, measured to the earth pin of its plug; what voltage it withstands, only an insulation test shows',
    );
    expect(found.get('earth-resistance')).toMatchObject({
      value: 10e6,
      bound: 'least',
      interval: null,
      note: 'measured to the earth pin of its plug; at least this much: the meter showed open',
    });
  });

  it('of a leaky output, with what leaks', () => {
    const found = findings([...proof, earth(47e3, 47.01e3, 46.99e3), ...proof]);
    expect(found.get('earth-relation')).toMatchObject({ value: 'leaky' });
    const [low, high] = found.get('earth-resistance')?.interval ?? [];
    expect(low).toBeGreaterThan(46.8e3);
    expect(high).toBeLessThan(47.2e3);
  });

  it('is undetermined where the interval straddles a threshold, and says which', () => {
    const found = findings([...proof, earth(1e6, 1e6), ...proof]);
    expect(found.get('earth-relation')).toMatchObject({ value: 'undetermined' });
    expect(found.get('earth-relation')?.note).toMatch(/between 998 kΩ and 1\.00 MΩ, on both sides of 1 MΩ/);
    expect(found.has('earth-resistance')).toBe(true);
  });

  it('is undetermined where a voltage is in the way', () => {
    const found = findings([...proof, earth(-500, -500), ...proof]);
    expect(found.get('earth-relation')).toMatchObject({ value: 'undetermined' });
    expect(found.get('earth-relation')?.note).toContain('below zero');
  });

  it('goes by the thresholds of the procedure', () => {
    const found = findings([...proof, earth(47e3, 47e3), ...proof], {
      settings: { ...settings, isolatedAbove: 40e3 },
    });
    expect(found.get('earth-relation')?.value).toBe('isolated');
    expect(findings([...proof, earth(open), ...proof], { settings: {} }).get('earth-relation')).toMatchObject(
      {
        value: 'undetermined',
        note: 'the record does not say what it was to be judged by',
      },
    );
  });

  it('says what was taken for earth where the module has none', () => {
    const found = findings([...proof, earth(open), ...proof], { modules: [{ protectionClass: 'II' }] });
    expect(found.get('earth-relation')?.note).toMatch(
      /measured to both pins of its plug, joined with any bare metal of its case; /,
    );
  });

  it('is not there where nobody checked', () => {
    expect(isolationFindings(collected(eventsOf([{ kind: 'wait' }]), headerOf()))).toEqual([]);
  });
});

describe('an open lead is never reported as isolation', () => {
  const broken: Looked = ['leads-together', undefined, open, open];

  it.each([
    ['broken before the first proof', [broken]],
    ['broken between the first proof and the measurement', [...proof, earth(open, open), broken]],
    ['broken after the measurement', [...proof, earth(0.2, 0.2), broken]],
    ['never proved', [earth(open, open)]],
    ['proved only before', [...proof, earth(open, open)]],
    ['proved only after', [earth(open, open), ...proof]],
    ['proved by half', [together, earth(open, open), together]],
    ['shorted after', [...proof, earth(0.2, 0.2), together, ['leads-apart', undefined, 0.2]]],
  ] as readonly [string, readonly Looked[]][])('leads %s', (_how, points) => {
    const found = findings(points);
    expect(found.get('earth-relation')).toMatchObject({ value: 'undetermined' });
    expect(found.get('earth-relation')?.note).not.toBe('');
    expect(found.has('earth-resistance')).toBe(false);
  });

  it('a measurement of another module between takes the proof away', () => {
    const modules = [{ name: 'K1' }, { name: 'K2' }];
    const k2: Looked = ['earth', 'K2', 47e3, 47e3];
    const found = findings([...proof, earth(open), k2, ...proof], { modules });
    expect(found.get('earth-relation-of-K1')?.value).toBe('undetermined');
    expect(found.get('earth-relation-of-K2')?.value).toBe('undetermined');
  });
});

describe('the earth relations of several modules', () => {
  it('stand under the name of each; the proof between two counts for both', () => {
    const modules = [{ name: 'K1' }, { name: 'K2' }, { name: 'K3' }];
    const k2: Looked = ['earth', 'K2', 0.2, 0.2];
    const found = findings([...proof, earth(open, open), ...proof, k2, ...proof], { modules });
    expect([...found].map(([name, { value }]) => [name, value])).toEqual([
      ['earth-relation-of-K1', 'isolated'],
      ['earth-resistance-of-K1', 10e6],
      ['earth-relation-of-K2', 'bonded'],
      ['earth-resistance-of-K2', expect.closeTo(0.08, 12)],
      ['earth-relation-of-K3', 'undetermined'],
    ]);
    expect(found.get('earth-relation-of-K3')?.note).toBe('it was not measured: the check ended before that');
    expect(dimensionOfFinding('earth-relation-of-K1')).toBe('word');
    expect(dimensionOfFinding('earth-resistance-of-K1')).toBe('resistance');
  });
});
