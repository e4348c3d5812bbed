import { createHash } from 'node:crypto';
import type { OpenBench } from '../bench/open-bench.js';
import type { FileRead } from '../files/read-text.js';
import { headerFormat, type RunHeader } from '../record/run-header.js';
import type { Plan } from '../run/plan.js';
import type { LoadedPlan } from './load-plan.js';
import { packageFacts } from './package-facts.js';
import { recordedPath } from './shipped.js';

/** What a record says of its run before the run begins: all that anyone who reads it later must know. */
export function headerOf({ plan, files, baseline }: LoadedPlan, bench: OpenBench, began: Date): RunHeader {
  const { procedure } = plan;
  return {
    format: headerFormat,
    program: packageFacts(),
    began: began.toISOString(),
    modules: plan.underTest.modules.map((module) => ({
      ...module,
      rated: { ...module.rated },
      changes: [...module.changes],
    })),
    circuit: procedure.circuit,
    bench: {
      name: plan.bench.name,
      leads: plan.bench.leads,
      voltageFrom: plan.bench.voltageFrom,
      simulated: plan.bench.simulation !== undefined,
      ...(plan.bench.ambient === undefined ? {} : { ambient: plan.bench.ambient }),
      limits: { temperature: plan.bench.limits.temperature },
      ...(plan.bench.group === undefined
        ? {}
        : {
            places: plan.bench.group.places.map(({ ballast }) => (ballast === undefined ? {} : { ballast })),
          }),
    },
    procedure: { name: procedure.name, title: procedure.title, cautions: [...plan.cautions] },
    steps: stepsOf(plan),
    criteria: procedure.criteria.map(({ finding, requirement }) => ({ finding, requirement })),
    ...(baseline === undefined ? {} : { baseline: baseline.baseline }),
    derating: procedure.derating,
    instruments: bench.instruments.map(({ post, instrument: { driver, address, identity } }) => ({
      role: post,
      driver: driver.name,
      address,
      identity,
      accuracy: driver.accuracy,
      ratings: driver.ratings,
    })),
    files: [
      fileOf('procedure', files.procedure),
      fileOf('bench', files.bench),
      ...files.modules.map((module) => fileOf('module', module)),
      ...files.drivers.map(({ file }) => fileOf('driver', file)),
      ...(baseline === undefined ? [] : [fileOf('tolerance', baseline.tolerance)]),
    ],
  };
}

/** The steps of a plan, as a record has them. */
export function stepsOf({ steps }: Plan): RunHeader['steps'] {
  return steps.map(({ kind, summary, parameters }) => ({
    kind: kind.kind,
    summary,
    settings: parameters as Record<string, unknown>,
  }));
}

function fileOf(kind: string, { path, text }: FileRead<unknown>): RunHeader['files'][number] {
  const sha256 = createHash('sha256').update(text).digest('hex');
  return { kind, path: recordedPath(path), sha256, text };
}
