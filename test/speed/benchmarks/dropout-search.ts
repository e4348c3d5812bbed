import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type * as library from '../../../src/index.js';
import type * as operating from '../../../src/cli/simulated-operator.js';
import type { SimulatedModule } from '../../../src/files/simulation-section.js';
import type { TimedEvent } from '../../../src/record/journal-event.js';
import type * as truths from '../../../src/simulation/true-values.js';
import { built } from '../built.js';
import type { Benchmark, Figure } from '../figure.js';
import { median } from '../side-by-side.js';
import { benchFile, moduleFile, randomModule, rated } from '../unknown-module.js';

const { loadPlan, performPlan, worldOf } = await built<typeof library>('index.js');
const { simulatedOperator } = await built<typeof operating>('cli/simulated-operator.js');
const { trueValues } = await built<typeof truths>('simulation/true-values.js');

const seeds = 100;
const resolution = 0.01;
const sag = 0.05;
/** From 100 % to 200 % of what is rated, that is. */
const stepsOfTheRamp = rated.current / resolution;

/**
 * The search for the dropout of a hundred modules that nobody has seen before, as the shipped procedure does it:
 * somewhere in 4 A, to 10 mA. The bench is simulated and its instruments are exact, as what is asked is what the
 * search costs, and whether what it ends with is true of the module.
 */
export default (async () => {
  const folder = mkdtempSync(join(tmpdir(), 'railproof-speed-'));
  try {
    const procedure = written(folder, 'procedure.yaml', {
      railproof: 'procedure 1',
      name: 'dropout',
      title: 'Where it drops out',
      steps: [
        { 'open-circuit': { for: '5 s' } },
        {
          'dropout-search': {
            from: '100 % of rated-current',
            ceiling: '200 % of rated-current',
            resolution: '10 mA',
            sag: '5 %',
          },
        },
      ],
    });
    const searched: Searched[] = [];
    for (let seed = 1; seed <= seeds; seed += 1) searched.push(await search(seed, procedure, folder));
    return figures(searched);
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}) satisfies Benchmark;

function figures(searched: readonly Searched[]): Figure[] {
  const points = searched.map((one) => one.points);
  const dropouts = searched.map((one) => one.dropouts);
  const bisection = Math.log2(stepsOfTheRamp);
  const holding = searched.filter(({ held, dropped, truth }) => held <= truth.most && truth.least <= dropped);
  const outside = searched.map(({ held, dropped, truth }) =>
    Math.max(0, held - truth.middle, truth.middle - dropped),
  );
  return [
    {
      kind: 'measured',
      name: 'points-of-a-dropout-search',
      what: 'points of a search for 10 mA in 4 A',
      ours: { value: median(points), unit: 'points' },
      rival: { value: stepsOfTheRamp, unit: 'points', what: 'linear ramp' },
      ratio: median(points),
      bound: { atMost: 30 },
      beside: { ...ends(points), benchSeconds: median(searched.map(({ seconds }) => seconds)) },
    },
    {
      kind: 'measured',
      name: 'dropouts-of-a-dropout-search',
      what: 'dropouts of a search for 10 mA in 4 A',
      ours: { value: median(dropouts), unit: 'dropouts' },
      rival: { value: bisection, unit: 'probes', what: 'bisection' },
      ratio: median(dropouts),
      bound: { atMost: 6 },
      beside: ends(dropouts),
    },
    {
      kind: 'measured',
      name: 'truth-inside-the-bracket',
      what: 'searches whose bracket holds the truth, as sharp as noise leaves it',
      ours: { value: holding.length, unit: 'searches' },
      rival: { value: searched.length, unit: 'searches', what: 'all of them' },
      ratio: holding.length / searched.length,
      bound: { atLeast: 1 },
      beside: {
        closedTo10mA: searched.filter(({ held, dropped }) => dropped - held <= resolution * (1 + 1e-9))
          .length,
        holdingItWithoutNoise: outside.filter((by) => by === 0).length,
        furthestOutsideInmA: 1000 * Math.max(...outside),
      },
    },
  ];
}

function ends(counts: readonly number[]): Record<string, number> {
  return { searches: counts.length, least: Math.min(...counts), most: Math.max(...counts) };
}

interface Searched {
  readonly points: number;
  readonly dropouts: number;
  readonly held: number;
  readonly dropped: number;
  readonly truth: Truth;
  /** On the bench. */
  readonly seconds: number;
}

/** The true dropout current, and those at which the noise of one reading may show it. */
interface Truth {
  readonly least: number;
  readonly middle: number;
  readonly most: number;
}

async function search(seed: number, procedure: string, folder: string): Promise<Searched> {
  const module = randomModule(seed);
  const bench = written(folder, `bench-${seed}.yaml`, benchFile(seed, module));
  const label = written(folder, `${module.name}.yaml`, moduleFile(module));
  const loaded = await loadPlan({ procedure, bench, modules: [label] });
  const world = await worldOf(loaded.plan.bench, loaded.plan.drivers);
  if (world.simulation === undefined) throw new Error('the bench is not simulated');
  const performed = await performPlan(loaded, world, {
    runs: join(folder, 'runs'),
    operator: simulatedOperator(world.simulation),
    signal: new AbortController().signal,
    hurry: new AbortController().signal,
    watch: { stepBegan() {}, progress() {}, recorded() {}, noticed() {} },
  });
  return { ...told(performed.folder.path), truth: truthOf(module) };
}

/** Where the voltage does not break down but sinks through the sag, its noise blurs where it does. */
function truthOf(module: SimulatedModule): Truth {
  const { dropoutCurrent } = trueValues({ leads: 0 }, module);
  const blur = (3 * module.noise) / module.openCircuitVoltage;
  return {
    least: dropoutCurrent(sag - blur),
    middle: dropoutCurrent(sag),
    most: dropoutCurrent(sag + blur),
  };
}

/** What the journal tells of the search, the second step: all points count, of whatever phase. */
function told(run: string): Omit<Searched, 'truth'> {
  const events = readFileSync(join(run, 'journal.jsonl'), 'utf8')
    .trimEnd()
    .split('\n')
    .map((line) => JSON.parse(line) as TimedEvent);
  const outcomes = new Map(
    events.flatMap((event) => (event.event === 'point-ended' ? [[event.point, event.outcome] as const] : [])),
  );
  const [began = Number.NaN, ended = Number.NaN] = events.flatMap(({ event, t, ...rest }) =>
    event.startsWith('step-') && 'step' in rest && rest.step === 2 ? [t] : [],
  );
  const points = events.flatMap((event) =>
    event.event === 'point-began' && event.step === 2
      ? [{ phase: event.phase, set: event.set.current, outcome: outcomes.get(event.point) }]
      : [],
  );
  const dropouts = points.filter(({ phase, outcome }) => phase !== 'recovery' && outcome === 'dropped');
  const dropped = Math.min(...dropouts.map(({ set = Number.NaN }) => set));
  const held = points.filter(({ set, outcome }) => outcome === 'held' && set !== undefined && set < dropped);
  return {
    points: points.length,
    dropouts: dropouts.length,
    dropped,
    held: Math.max(...held.map(({ set = Number.NaN }) => set)),
    seconds: ended - began,
  };
}

/** A file as a user has it; JSON is YAML. */
function written(folder: string, name: string, content: object): string {
  const path = join(folder, name);
  writeFileSync(path, JSON.stringify(content));
  return path;
}
