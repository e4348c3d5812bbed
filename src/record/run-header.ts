import { createHash } from 'node:crypto';
import { existsSync } from 'node:fs';
import { join } from 'node:path';
import { z } from 'zod';
import { baselineSchema } from './baseline.js';
import { OddFileError, readWhole } from './read-whole.js';
import { BadRecordError, NoRecordError } from './record-error.js';

/**
 * run.json: what was planned, with what, on what; written before anything is energised and never changed.
 * All numbers are in V, A, Ω, W, s, °C and plain ratios. It holds all that the understand side needs to
 * know, so that a record can be analysed without the files it was made from.
 */
export const headerFormat = 'railproof/record 1';

const ratedValues = z.object({
  voltage: z.number(),
  current: z.number(),
  ambient: z.number().optional(),
});

const accuracy = z.object({ ofReading: z.number(), fixed: z.number(), resolution: z.number().optional() });

const uncertainResistance = z.object({ resistance: z.number(), uncertainty: z.number() });

const instrument = z.object({
  role: z.string(),
  driver: z.string(),
  address: z.string(),
  identity: z.string(),
  /** Half-widths of the promised error, by reading. */
  accuracy: z.record(z.string(), accuracy),
  ratings: z.object({
    voltage: z.number().optional(),
    current: z.number().optional(),
    power: z.number().optional(),
    leastVoltage: z.number().optional(),
  }),
});

const quantityOrShare = z.union([
  z.object({ kind: z.literal('absolute'), value: z.number() }),
  z.object({ kind: z.literal('share'), ratio: z.number(), of: z.string() }),
]);

const requirement = z.union([
  z.object({ kind: z.enum(['at-least', 'at-most']), value: quantityOrShare }),
  z.object({ kind: z.literal('is'), word: z.string() }),
]);

const headerSchema = z.object({
  format: z.literal(headerFormat),
  program: z.object({ name: z.string(), version: z.string() }),
  /** ISO 8601, UTC. */
  began: z.string(),
  modules: z
    .array(
      z.object({
        name: z.string(),
        description: z.string(),
        rated: ratedValues,
        protectionClass: z.enum(['I', 'II']),
        input: z.enum(['mains', 'dc']),
        outputIsolation: z.union([z.literal('unknown'), z.number()]),
        changes: z.array(z.object({ date: z.string(), what: z.string() })),
      }),
    )
    .min(1),
  /** How the modules are wired; in the order in which they stand above, the lowest of a stack first. */
  circuit: z.enum(['single', 'parallel', 'series']).default('single'),
  bench: z.object({
    name: z.string(),
    leads: uncertainResistance,
    voltageFrom: z.enum(['meter-at-module', 'load-terminals']),
    simulated: z.boolean(),
    ambient: z.object({ temperature: z.number(), uncertainty: z.number() }).optional(),
    limits: z.object({ temperature: z.number().optional() }).optional(),
    /** In the order of the modules. */
    places: z.array(z.object({ ballast: uncertainResistance.optional() })).optional(),
  }),
  procedure: z.object({ name: z.string(), title: z.string(), cautions: z.array(z.string()) }),
  /** In order; `settings` are the step's parameters in words and numbers, as its kind understood them. */
  steps: z.array(
    z.object({ kind: z.string(), summary: z.string(), settings: z.record(z.string(), z.unknown()) }),
  ),
  criteria: z.array(z.object({ finding: z.string(), requirement })),
  /** Where the run was to be judged against an earlier one. */
  baseline: baselineSchema.optional(),
  derating: z.object({
    margin: z.number(),
    aboveNameplate: z.enum(['never', 'after-soak']),
    ambient: z
      .object({ expected: z.number(), fullTo: z.number(), fallingTo: z.number(), at: z.number() })
      .optional(),
    lossModel: z.object({ fixed: z.number() }).optional(),
    temperatureLimit: z.number().optional(),
  }),
  instruments: z.array(instrument),
  /** Every input file, as it was. */
  files: z.array(z.object({ kind: z.string(), path: z.string(), sha256: z.string(), text: z.string() })),
});

export type RunHeader = Readonly<z.infer<typeof headerSchema>>;

export interface HeaderRead {
  readonly header: RunHeader;
  /** Of the file as it is now. */
  readonly sha256: string;
}

/** @throws NoRecordError, BadRecordError */
export function readHeader(folder: string): HeaderRead {
  const path = join(folder, 'run.json');
  let text: string;
  try {
    text = readWhole(path);
  } catch (cause) {
    if (cause instanceof OddFileError) throw new NoRecordError(path, cause);
    throw new NoRecordError(folder, existsSync(folder) && !existsSync(path) ? undefined : cause);
  }
  const sha256 = createHash('sha256').update(text).digest('hex');
  return { header: parseHeader(text, path), sha256 };
}

function parseHeader(text: string, path: string): RunHeader {
  let data: unknown;
  try {
    data = JSON.parse(text);
  } catch {
    throw new BadRecordError(path, 'it is not JSON');
  }
  const parsed = headerSchema.safeParse(data);
  if (parsed.success) return parsed.data;
  const [issue] = parsed.error.issues;
  const where = issue === undefined || issue.path.length === 0 ? '' : `${issue.path.join('.')}: `;
  throw new BadRecordError(path, `${where}${issue?.message ?? 'it is unreadable'}`);
}
