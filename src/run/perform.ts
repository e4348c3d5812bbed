import { Guards } from '../bench/guards.js';
import { makeSafe, makeSourceSafe, type Safety } from '../bench/make-safe.js';
import type { OpenBench } from '../bench/open-bench.js';
import { checkAllIsOff, checkMeters, checkOpenCircuitVoltage, whenLookedAt } from '../bench/pre-flight.js';
import { feedInWords } from '../bench/source.js';
import { type Trip, tripOf } from '../bench/trip.js';
import type { Clock } from '../clock/clock.js';
import { exitCodeOf, exitCodes, type ExitCode } from '../errors/railproof-error.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { Carried, JournalEvent } from '../record/journal-event.js';
import type { Operator } from '../steps/operator.js';
import { startUp } from '../steps/start-up.js';
import type { Progress, StepContext, Tried } from '../steps/step-kind.js';
import { cautionOf, wiringFor } from './cautions.js';
import type { Plan } from './plan.js';
import { StoppedByOperator, UnforeseenError } from './stopped.js';
import type { TakenOver } from './taken-over.js';

export interface Performance {
  readonly plan: Plan;
  readonly bench: OpenBench;
  readonly journal: { append(event: JournalEvent): void };
  readonly operator: Operator;
  readonly clock: Clock;
  /** Aborted with a StoppedByOperator when the person wants the run to end. */
  readonly signal: AbortSignal;
  readonly watch: RunWatcher;
  /** Where an earlier run was broken off, and this one goes on. */
  readonly from?: TakenOver | undefined;
}

/** Told of what goes on; it can't change it. */
export interface RunWatcher {
  stepBegan(step: number, kind: string, summary: string): void;
  progress(step: number, progress: Progress): void;
  /** What the journal now holds. */
  recorded(event: JournalEvent): void;
  /** Something that whoever stands at the bench should know, and not only for the moment. */
  noticed(text: string): void;
}

/** Why it ended; the first reason wins, and making safe comes after it and can't change it. */
export type Ending =
  | { readonly how: 'completed' }
  | { readonly how: 'stopped'; readonly reason: string; readonly error: Error }
  | { readonly how: 'failed'; readonly reason: string; readonly error: Error };

export interface Performed {
  readonly ending: Ending;
  /** Of the load. */
  readonly safety: Safety;
  /** Undefined where the bench has none. */
  readonly sourceSafety: Safety | undefined;
  /** What the run alone says; the decisions come later. */
  readonly status: ExitCode;
}

/**
 * Performs a plan from the cautions to the load off and read back. Whatever happens on the way, the bench
 * is made safe before this returns, and the journal says how it ended.
 */
export async function perform(performance: Performance): Promise<Performed> {
  const attempted = await attempt({ ...performance, journal: watched(performance) });
  const safety = await makeSafe(performance.bench);
  const sourceSafety = await makeSourceSafe(performance.bench);
  const safeties = { safety, sourceSafety };
  const ending = unlessBroken(attempted, performance.signal);
  const { journal } = performance;
  try {
    if (safety.kind === 'unconfirmed') {
      journal.append({
        event: 'notice',
        text: `it could not be confirmed that the load is off: ${safety.why}`,
      });
    }
    if (sourceSafety !== undefined) journal.append({ event: 'notice', text: sourceInWords(sourceSafety) });
    journal.append({
      event: 'ended',
      how: ending.how,
      reason: ending.how === 'completed' ? null : ending.reason,
      status: statusOf(ending, safeties),
    });
  } catch (error) {
    // A journal that can't be written is reason enough to fail, but not to hide what went wrong before.
    if (ending.how === 'completed') return performed(endingOf(error), safeties);
  }
  return performed(ending, safeties);
}

/** Notices are for the journal and for whoever is there. */
function watched({ journal, watch }: Performance): Performance['journal'] {
  return {
    append(event) {
      if (event.event === 'notice') watch.noticed(event.text);
      journal.append(event);
      watch.recorded(event);
    },
  };
}

type Safeties = Pick<Performed, 'safety' | 'sourceSafety'>;

function performed(ending: Ending, safeties: Safeties): Performed {
  return { ending, ...safeties, status: statusOf(ending, safeties) };
}

function sourceInWords(safety: Safety): string {
  return safety.kind === 'confirmed'
    ? 'the source is off; it was read back'
    : `it could not be confirmed that the source is off: ${safety.why}`;
}

async function attempt(performance: Performance): Promise<Ending> {
  try {
    await begin(performance);
    await goThrough(performance);
    return { how: 'completed' };
  } catch (error) {
    const { signal } = performance;
    const trip = tripOf(error);
    // Whoever will not wait for an answer has the connections closed: that is no silence of an instrument.
    if (trip !== undefined && !(signal.aborted && trip.guard === 'silence')) noteTrip(performance, trip);
    // Whoever asked for an end before something else failed gave the first reason, and the first one wins.
    return signal.aborted ? endingOf(signal.reason, signal) : endingOf(error);
  }
}

/** A run during whose last moments something of ours broke is not completed. */
function unlessBroken(ending: Ending, { reason }: AbortSignal): Ending {
  return ending.how === 'completed' && reason instanceof UnforeseenError ? endingOf(reason) : ending;
}

/** The journal may be what failed, and making safe must not wait for it. */
function noteTrip({ journal }: Performance, trip: Trip): void {
  try {
    journal.append({ event: 'guard-tripped', ...trip });
  } catch {
    // `ended` will meet the same disk and report it.
  }
}

const beforeYes =
  'nothing was switched on. See to it and run again; only the word yes goes on, everything else ends the run';

async function begin({ plan, bench, journal, operator, signal, from }: Performance): Promise<void> {
  await checkAllIsOff(bench);
  await checkMeters(bench);
  const wiring = wiringFor(plan.procedure, from);
  if (wiring.length > 0) {
    const acknowledged = await operator.acknowledge('wiring', wiring.join('\n'), signal);
    if (acknowledged === 'refused')
      throw new StoppedByOperator('the wiring was not acknowledged', { advice: beforeYes });
    journal.append({ event: 'caution', name: 'wiring', by: acknowledged });
  }
  for (const caution of plan.cautions) {
    signal.throwIfAborted();
    const acknowledged = await operator.acknowledge(caution, cautionOf(caution, plan.underTest), signal);
    if (acknowledged === 'refused')
      throw new StoppedByOperator(`the caution "${caution}" was not acknowledged`, { advice: beforeYes });
    journal.append({ event: 'caution', name: caution, by: acknowledged });
  }
  await bench.load.prepare();
  await bench.source?.prepare();
}

/**
 * The source goes on before the first step that needs a live module, and not before: one that comes earlier may
 * have it unplugged. Everything was acknowledged by then, and the load is off.
 */
async function feed({ bench: { load, source }, journal, clock, signal }: Performance): Promise<void> {
  if (source === undefined) return;
  await load.inputOff();
  signal.throwIfAborted();
  const text = `the source at ${source.address} feeds what is under test from here on: ${feedInWords(source.feed)}`;
  journal.append({ event: 'notice', text });
  await source.on();
  await clock.sleep(startUp, signal);
  await source.confirm();
}

/** The last look before the first step that lets a current flow; a step before it may have unplugged the module. */
async function lookAtVoltage({ plan, bench, journal }: Performance): Promise<void> {
  const volts = await checkOpenCircuitVoltage(bench, plan.underTest.rated.voltage);
  const read = formatQuantity(volts, 'voltage', { significant: 4 });
  journal.append({ event: 'notice', text: `${whenLookedAt(bench)} the module read ${read}` });
}

async function goThrough(performance: Performance): Promise<void> {
  const { plan, bench, journal, operator, clock, signal, watch, from } = performance;
  // The nameplate is that of the plan, from which the ceilings are, whatever was carried.
  const known = { ...from?.known, ...plan.known };
  const tried: Tried = { ...from?.tried };
  const earths: StepContext['earths'] = new Map(from?.earths);
  const limits = {
    ...plan.ceilings,
    ratedVoltage: plan.underTest.rated.voltage,
  };
  const guards = new Guards(limits, plan.bench, plan.drivers);
  let looked = false;
  for (const [index, planned] of plan.steps.entries()) {
    const step = index + 1;
    if (step <= (from?.steps ?? 0)) continue;
    signal.throwIfAborted();
    if (planned.kind.needs.liveModule && !looked) {
      await feed(performance);
      await lookAtVoltage(performance);
      looked = true;
    }
    watch.stepBegan(step, planned.kind.kind, planned.summary);
    journal.append({ event: 'step-began', step, kind: planned.kind.kind });
    await planned.kind.perform(planned.parameters, {
      step,
      bench,
      limits,
      guards,
      underTest: plan.underTest,
      journal,
      clock,
      signal,
      operator,
      known,
      tried,
      earths,
      latches: { cleared: 0 },
      show: (progress) => {
        watch.progress(step, progress);
      },
    });
    journal.append({ event: 'step-ended', step, carried: carriedBy({ known, tried, earths }) });
  }
}

/** What a run that goes on from here needs; a copy, as later steps go on writing. */
function carriedBy({ known, tried, earths }: Pick<StepContext, 'known' | 'tried' | 'earths'>): Carried {
  return { known: { ...known }, tried: { ...tried }, earths: Object.fromEntries(earths) };
}

/** Whoever aborts the signal wants an end, whatever reason they give; only an error of ours is a failure. */
function endingOf(thrown: unknown, signal?: AbortSignal): Ending {
  const error = thrown instanceof Error ? thrown : new Error(String(thrown));
  const asked = signal?.aborted === true && signal.reason === thrown && !(thrown instanceof UnforeseenError);
  const stopped = asked || exitCodeOf(error) === exitCodes.stopped;
  return { how: stopped ? 'stopped' : 'failed', reason: error.message, error };
}

function statusOf(ending: Ending, { safety, sourceSafety }: Safeties): ExitCode {
  if (ending.how === 'stopped') return exitCodes.stopped;
  if (ending.how === 'failed') return exitCodeOf(ending.error);
  const confirmed = safety.kind === 'confirmed' && sourceSafety?.kind !== 'unconfirmed';
  return confirmed ? exitCodes.conforms : exitCodes.instrument;
}
