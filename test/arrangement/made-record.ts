import type { UnderstoodRecord } from '../../src/arrangement/understood-record.js';
import { type Finding, inWords, measured } from '../../src/analysis/finding.js';
import { promised } from '../../src/analysis/promised-errors.js';
import type { Dimension } from '../../src/quantity/quantity.js';
import type { RunHeader } from '../../src/record/run-header.js';
import { someHeader } from '../record/some-header.js';

type Described = RunHeader['modules'][number];

/** What a test says of a record; the rest is that of a whole real-limit of K1, of 30 November 2026. */
export interface RecordMade {
  readonly modules?: readonly (Partial<Described> & { readonly name: string })[];
  readonly circuit?: RunHeader['circuit'];
  readonly procedure?: string;
  /** `2026-11-30`, in the morning. */
  readonly on?: string;
  readonly findings?: readonly Finding[];
  readonly state?: UnderstoodRecord['state'];
  readonly unmet?: UnderstoodRecord['unmet'];
  readonly bench?: string;
  readonly simulated?: boolean;
  readonly meter?: Partial<RunHeader['instruments'][number]>;
}

/** A record as if its folder had been read. */
export function madeRecord(made: RecordMade = {}): UnderstoodRecord {
  const { procedure = 'real-limit', on = '2026-11-30', modules = [{ name: 'K1' }] } = made;
  const [usual, load] = [someHeader.modules[0], someHeader.instruments[0]];
  if (usual === undefined || load === undefined) throw new Error('a header has a module and a load');
  const header: RunHeader = {
    ...someHeader,
    began: `${on}T09:15:00.000Z`,
    circuit: made.circuit ?? 'single',
    modules: modules.map((module) => ({ ...usual, changes: [], ...module })),
    procedure: { ...someHeader.procedure, name: procedure },
    bench: { ...someHeader.bench, name: made.bench ?? 'nursery bench', simulated: made.simulated ?? false },
    instruments: [load, { ...load, role: 'meter', identity: 'NURSERY,METER,1,1', ...made.meter }],
  };
  const names = modules.map(({ name }) => name).join('+');
  return {
    run: `${on.replaceAll('-', '')}T091500Z-${names}-${procedure}`,
    header,
    findings: made.findings ?? limitFindings(),
    state: made.state ?? 'whole',
    unmet: made.unmet ?? [],
  };
}

/** What a real-limit finds of a good brick, or of one that is as a test says. */
export function limitFindings({
  openCircuit = 15.21,
  droop = 0.018,
  usable = 5.1,
  recommended = 4,
}: {
  readonly openCircuit?: number;
  readonly droop?: number;
  readonly usable?: number;
  readonly recommended?: number;
} = {}): readonly Finding[] {
  return [
    amperes('usable-current', usable),
    recommendedOf(recommended),
    number('open-circuit-voltage', 'voltage', openCircuit, 'meter voltage'),
    number('droop-resistance', 'resistance', droop, 'meter voltage'),
    amperes('dropout-current', usable),
    word('limit-style', 'hiccup'),
  ];
}

/** What a quick look finds: it goes no further than the label. */
export function lookFindings(): readonly Finding[] {
  return limitFindings({ usable: 4, recommended: 3.2 })
    .filter(({ name }) => name !== 'dropout-current' && name !== 'limit-style')
    .map((finding) => (finding.dimension === 'current' ? { ...finding, bound: 'least' } : finding));
}

export function recommendedOf(value: number, note = 'the nameplate sets it'): Finding {
  return {
    ...word('recommended-current', ''),
    value,
    dimension: 'current',
    note,
  };
}

export function amperes(name: string, value: number): Finding {
  return number(name, 'current', value, 'load current');
}

export function word(name: string, value: string): Finding {
  return inWords(name, value, { step: 1 });
}

/** A tenth of a percent and a thousandth for the instrument, a thousandth for the scatter. */
function number(name: string, dimension: Dimension, value: number, of: string): Finding {
  return measured(
    name,
    dimension,
    value,
    [
      { name: 'scatter', kind: 'A', uncertainty: 1e-3 * Math.abs(value), degreesOfFreedom: 20 },
      promised(`${of}, gain`, 1e-3 * value),
      promised(`${of}, offset`, 1e-3),
      promised(`${of}, resolution`, 1e-4),
    ],
    { step: 1 },
  );
}
