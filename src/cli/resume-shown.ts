import type { OpenBench } from '../bench/open-bench.js';
import type { UnfinishedRun } from '../record/resume.js';
import { printable } from '../report/printable.js';
import { packageFacts } from './package-facts.js';
import type { Plan } from '../run/plan.js';
import type { Resumption } from './resume-plan.js';

/** For whoever is there before anything is touched: which run goes on, how it ended, what was done of it, and where it goes on. */
export function resumptionAsText({ steps: planned }: Plan, { run }: Resumption): string {
  const steps = planned.map(
    ({ kind, summary }, index) => `step ${index + 1} of ${planned.length}: ${kind.kind}, ${summary}`,
  );
  const next = steps[run.done.length];
  return [
    `Resuming ${printable(run.folder.path)}`,
    `  begun ${inMinutes(run.header.began)}, ${endedInWords(run)}`,
    ...steps.slice(0, run.done.length).map((step) => `  done: ${step}`),
    ...versionsInWords(run).map((text) => `  ${text}`),
    next === undefined
      ? '  every step is done; what is left is to see that the load is off'
      : `  goes on with ${next}`,
    '',
  ].join('\n');
}

/** How the bench must stand for what is left to do; hands at it may have done much since. */
export function standingFor({ done, header }: Pick<UnfinishedRun, 'done' | 'header'>): readonly string[] {
  if (done.length === header.steps.length) return [];
  return [
    `This run goes on with step ${done.length + 1}: bench, leads and module are as step ${done.length} left them, nothing was changed since, and what got warm has cooled.`,
    ...done.flatMap(({ step, asked }) =>
      asked === undefined ? [] : [`Step ${step} asked for this last: ${printable(asked)}`],
    ),
  ];
}

/** Where the steps that are done were done by another version of the program. */
export function versionsInWords({ header, done }: Pick<UnfinishedRun, 'header' | 'done'>): readonly string[] {
  const { name, version } = packageFacts();
  const { program } = header;
  if (program.version === version) return [];
  return [
    `${stepsWere(done)} done with ${printable(`${program.name} ${program.version}`)}; this is ${name} ${version}`,
  ];
}

/** Where an instrument is another one now, perhaps of the same make, than that which measured the steps that are done. */
export function instrumentsInWords(
  { header, done }: Pick<UnfinishedRun, 'header' | 'done'>,
  present: OpenBench['instruments'],
): readonly string[] {
  return present.flatMap(({ post, instrument: { identity } }) => {
    const earlier = header.instruments.find(({ role }) => role === post)?.identity;
    if (earlier === undefined || earlier === identity) return [];
    return [
      `${stepsWere(done)} done with another ${post}, ${printable(earlier)}; now it is ${printable(identity)}`,
    ];
  });
}

function stepsWere(done: UnfinishedRun['done']): string {
  return done.length === 1 ? 'step 1 was' : `steps 1 to ${done.length} were`;
}

function endedInWords({ ended }: UnfinishedRun): string {
  if (ended === undefined) return 'cut off';
  const reason = printable(ended.reason ?? 'no reason given');
  return reason.startsWith(ended.how) ? reason : `${ended.how}: ${reason}`;
}

function inMinutes(began: string): string {
  return printable(began.replace('T', ' ').replace(/:\d\d(\.\d+)?Z$/, ' UTC'));
}
