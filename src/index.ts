/**
 * railproof as a library: run a procedure, read a record, analyse and judge it, and work out what may be built of
 * the modules that were measured.
 *
 * @example
 * const loaded = await loadPlan({ procedure: 'real-limit', bench: 'bench.yaml', modules: ['K1.yaml'] });
 * const world = await worldOf(loaded.plan.bench, loaded.plan.drivers);
 * const operator = new TerminalOperator({ input: process.stdin, output: process.stderr, yes: false });
 * const watch = { stepBegan() {}, progress() {}, noticed() {} };
 * const signal = new AbortController().signal;
 * const { folder, safety } = await performPlan(loaded, world, { runs: 'runs', operator, signal, watch });
 * const { findings, outcome } = understand(folder.path);
 *
 * @example
 * const modules = requireAll(profilesOf(readRecords(['runs/…-K1-real-limit', 'runs/…-K2-real-limit']), new Date()));
 * const ballast = { kind: 'for-imbalance', most: 0.1 } as const;
 * const group = buildParallel(modules, { ballast, tolerance: 0.01, load: 6 });
 * const { standing, recommended, parts } = group; // recommended.current in A
 * process.stdout.write(buildAsText(group, plainStyle));
 */
export { buildParallel } from './arrangement/build-parallel.js';
export { buildSeries } from './arrangement/build-series.js';
export { buildStages } from './arrangement/build-stages.js';
export { selectModules } from './arrangement/select-modules.js';
export { alikeOnly, profilesOf, requireAll, type ProfilesFound } from './arrangement/profiles.js';
export { UnfitRecordsError, UnfitWishError, type UnfitModule } from './arrangement/arrangement-error.js';
export type * from './arrangement/build.js';
export type { ModuleProfile, Taken, TakenContribution } from './arrangement/module-profile.js';
export type * from './arrangement/parallel-build.js';
export type * from './arrangement/series-build.js';
export type * from './arrangement/selection.js';
export type * from './arrangement/staged-build.js';
export type * from './arrangement/stages-wish.js';
export type { RecordSource, RecordState, UnderstoodRecord } from './arrangement/understood-record.js';
export { loadBaseline, type LoadedBaseline } from './cli/baseline.js';
export { loadPlan, type LoadedPlan } from './cli/load-plan.js';
export { loadResumed, type ResumedPlan } from './cli/resume-plan.js';
export { performPlan, type PlanPerformed } from './cli/perform-plan.js';
export { readDrawer, readRecords, type UnreadableRecord } from './cli/read-records.js';
export { recordsOf } from './cli/stage-records.js';
export { vocabulary } from './cli/vocabulary.js';
export { worldOf, type World } from './cli/wiring.js';
export { RailproofError, exitCodes, type ExitCode } from './errors/railproof-error.js';
export { readBench } from './files/read-bench.js';
export { readDriver } from './files/read-driver.js';
export { readModule } from './files/read-module.js';
export { readProcedure } from './files/read-procedure.js';
export { readStages } from './files/read-stages.js';
export { readTolerance } from './files/read-tolerance.js';
export type { Stages } from './files/stages.js';
export type { Tolerance } from './files/tolerance.js';
export { analyse } from './analysis/analyse.js';
export { type Evidence, EvidenceCollector } from './analysis/evidence.js';
export type { Factor, Finding } from './analysis/finding.js';
export { compare, type Compared, type Comparison, type Side } from './judgement/compare.js';
export type { Comparable, Difference } from './judgement/difference.js';
export type { Verdict } from './judgement/verdict.js';
export { judge, overall, type Decision, type Outcome } from './judgement/judge.js';
export type { JournalEvent, TimedEvent } from './record/journal-event.js';
export { checkJournal, type Integrity } from './record/journal-check.js';
export { readJournal } from './record/journal-reader.js';
export type { Baseline, ToleranceEntry } from './record/baseline.js';
export { readHeader, type RunHeader } from './record/run-header.js';
export { understand } from './report/understand.js';
export { outcomeOf, type AnyBuild, type BuildOutcome } from './report/build/any-build.js';
export { buildAsJson } from './report/build/build-json.js';
export { buildAsText } from './report/build/build-text.js';
export { buildPage } from './report/page/build-page.js';
export { comparisonAsJson } from './report/comparison-json.js';
export { comparisonAsText } from './report/comparison-text.js';
export type { ComparedRecords } from './report/comparison.js';
export { resultAsJson } from './report/json.js';
export { resultAsText } from './report/text.js';
export { plainStyle, terminalStyle, type Style } from './report/style.js';
export type { Result } from './report/result.js';
export type { Operator, OperatorRequest } from './steps/operator.js';
export { simulatedOperator } from './cli/simulated-operator.js';
export type { Performed, RunWatcher } from './run/perform.js';
export { StoppedByOperator } from './run/stopped.js';
export { TerminalOperator } from './run/terminal-operator.js';
