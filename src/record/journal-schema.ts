import * as z from '../libraries/zod.js';
import { type Dimension, dimensions } from '../quantity/quantity.js';
import { journalFormat, phases, type TimedEvent } from './journal-event.js';

const text = (description: string) => z.string().describe(description);
const count = (description: string) => z.int().positive().describe(description);
const time = (description: string) => z.number().describe(description);
const sha256 = (description: string) =>
  z
    .string()
    .regex(/^[0-9a-f]{64}$/)
    .describe(description);
const wallClock = (description: string) =>
  z.string().meta({ description, examples: ['2026-11-30T09:15:00.006Z'] });

const t = time('Seconds since the run began, by a clock that never goes back.');
const seal = sha256('SHA-256 of every byte before this line, and of the line without its seal.');
const step = count('The step, counted from 1.');
const point = count('The point, counted from 1.');

const opened = z.strictObject({
  t,
  event: z.literal('opened').describe('The first line: the journal begins.'),
  format: z.literal(journalFormat).describe('The name of the format and its version.'),
  wallClock: wallClock('When the run began; ISO 8601, UTC. The wall clock stands here and nowhere else.'),
  header: sha256('SHA-256 of run.json.'),
  seal,
});

const resumed = z.strictObject({
  t,
  event: z
    .literal('resumed')
    .describe('The run goes on with an earlier one, whose events up to its last finished step follow.'),
  run: text("The name of the earlier record's folder."),
  header: sha256('SHA-256 of the earlier run.json.'),
  began: wallClock('When the earlier run began; ISO 8601, UTC.'),
  steps: count('How many steps were done then.'),
  seal,
});

const instrument = z.strictObject({
  t,
  event: z.literal('instrument').describe('An instrument said who it is.'),
  role: text('Its post on the bench: load, meter, …'),
  address: text('Where it is.'),
  identity: text('What it calls itself.'),
});

const caution = z.strictObject({
  t,
  event: z.literal('caution').describe('A caution was acknowledged.'),
  name: text('Which one.'),
  by: z
    .enum(['operator', '--yes', 'simulated-operator'])
    .describe('Who took note of it: a person, the one who wrote --yes, or a simulated operator.'),
});

const stepBegan = z.strictObject({
  t,
  event: z.literal('step-began').describe('A step begins.'),
  step,
  kind: text('The kind of step, as procedures name it.'),
});

const pointBegan = z.strictObject({
  t,
  event: z.literal('point-began').describe('A point begins: a set-point that is held for a while.'),
  step,
  point,
  phase: z.enum(phases).describe('What the point is for.'),
  set: z
    .strictObject({
      current: z.number().exactOptional().describe('The current that the load holds, in A.'),
      voltage: z.number().exactOptional().describe('The voltage that the load holds, in V.'),
    })
    .describe('What the load was set to; empty where its input is off.'),
  of: z.string().exactOptional().describe('The module that the point is about, where it is one of several.'),
});

const reading = z.strictObject({
  t,
  event: z.literal('reading').describe('A value was read.'),
  step,
  point,
  sample: count('Which reading at this point, counted from 1; what is read at one moment is one sample.'),
  of: text("The instrument's post on the bench: load, meter, …"),
  what: text('What was read: voltage, current, …'),
  at: z
    .string()
    .exactOptional()
    .meta({
      description: 'Where the probes were, when not at their usual place.',
      examples: ['ballast-of-K1', 'leads'],
    }),
  value: z
    .number()
    .nullable()
    .describe('In V, A, W, Ω or °C; null where the instrument said that it has none.'),
  problem: z
    .enum(['overload', 'not-a-number'])
    .exactOptional()
    .describe('What the instrument said in place of a value.'),
});

const pointEnded = z.strictObject({
  t,
  event: z.literal('point-ended').describe('A point is done.'),
  step,
  point,
  outcome: z
    .enum(['held', 'dropped', 'measured', 'interrupted'])
    .describe(
      '"held": the module kept its voltage and the load its current; "dropped": not so; "interrupted": a connection was lost, and it is taken again.',
    ),
  seal,
});

const input = z.strictObject({
  t,
  event: z.literal('input').describe('The input of the load is switched, or said how it is.'),
  state: z.enum(['on', 'off']).describe('How it is.'),
  confirmed: z.boolean().describe('Whether that was read back from the load.'),
  seal,
});

const recovery = z.strictObject({
  t,
  event: z.literal('recovery').describe('An overload was taken away.'),
  step,
  outcome: z
    .enum(['came-back', 'stayed-off', 'came-back-after-cycling'])
    .describe('Whether the module came back.'),
  after: time('It was not back yet after so many seconds.'),
  within: time('It was back within so many seconds, or not back in time.'),
  untimed: z
    .literal(true)
    .exactOptional()
    .describe('A connection was lost meanwhile, so that how long it took was not seen.'),
});

const prompt = z.strictObject({
  t,
  event: z.literal('prompt').describe('The person at the bench was asked to do or to read something.'),
  step,
  text: text('What was asked.'),
  act: z
    .string()
    .exactOptional()
    .meta({ description: 'The act it asks for.', examples: ['unplug K1'] }),
});

const answer = z.strictObject({
  t,
  event: z.literal('answer').describe('What the person at the bench answered.'),
  step,
  name: text('What the answer is called.'),
  answer: text('As it was typed.'),
  value: z.number().exactOptional().describe('Where a quantity was asked for: its number.'),
  dimension: z
    .enum(Object.keys(dimensions) as [Dimension])
    .exactOptional()
    .describe('What that number measures; it is in V, A, Ω, W, s, °C or K, and a ratio is plain.'),
});

const notice = z.strictObject({
  t,
  event: z.literal('notice').describe('Something was noticed.'),
  text: text('In a sentence.'),
});

const guardTripped = z.strictObject({
  t,
  event: z.literal('guard-tripped').describe('A guard stopped the run.'),
  guard: text('Which one.'),
  text: text('What was crossed, in a sentence.'),
  seal,
});

const known = z.record(z.string(), z.number());

const stepEnded = z.strictObject({
  t,
  event: z.literal('step-ended').describe('A step is done.'),
  step,
  carried: z
    .strictObject({
      known: known.describe('The nameplate and what was measured, in V and A, by name.'),
      tried: z
        .strictObject({
          held: z.number().exactOptional().describe('The highest current that was held, in A.'),
          dropped: z.number().exactOptional().describe('The lowest current that was not, in A.'),
        })
        .describe('Which currents were tried.'),
      earths: z
        .record(z.string(), z.string())
        .describe("How each module's output stands to earth, by its name."),
    })
    .exactOptional()
    .describe('What later steps rest on.'),
  seal: seal.exactOptional(),
});

const ended = z.strictObject({
  t,
  event: z.literal('ended').describe('The last line: the run is over.'),
  how: z
    .enum(['completed', 'stopped', 'failed'])
    .describe('As planned, stopped by a guard or a person, or failed.'),
  reason: z.string().nullable().describe('Why, in a sentence; null where it went as planned.'),
  status: z.int().describe('The exit status that the reason stands for; 0 for a completed run.'),
  seal,
});

/** Each line of journal.jsonl, as it is written. Readers go by `parseLine`, which is quick and lets more pass. */
export const journalLineSchema = z
  .discriminatedUnion('event', [
    opened,
    resumed,
    instrument,
    caution,
    stepBegan,
    pointBegan,
    reading,
    pointEnded,
    input,
    recovery,
    prompt,
    answer,
    notice,
    guardTripped,
    stepEnded,
    ended,
  ])
  .meta({
    title: 'railproof journal',
    description:
      'A line of journal.jsonl: one event of a run, written before anything acted on it. Values are in V, A, Ω, W, °C and s.',
  });

type Line = z.output<typeof journalLineSchema>;
type Unsealed<Each> = Each extends unknown ? Omit<Each, 'seal'> : never;
type Within<Part extends Whole, Whole> = Part;

/** Compiles only as long as every event that is written is one that the schema knows, and the other way round. */
export type JournalLine = Within<Unsealed<Line>, TimedEvent> & Within<TimedEvent, Unsealed<Line>>;
