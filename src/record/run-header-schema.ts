import * as z from '../libraries/zod.js';
import { baselineSchema } from './baseline.js';

/**
 * run.json: what was planned, with what, on what; written before anything is energised and never changed.
 * All numbers are in V, A, Ω, W, s, °C and plain ratios. It holds all that the understand side needs to
 * know, so that a record can be analysed without the files it was made from.
 */
export const headerFormat = 'railproof/record 1';

const text = (description: string) => z.string().describe(description);
const number = (description: string) => z.number().describe(description);

const ratedValues = z
  .object({
    voltage: number('In V.'),
    current: number('In A.'),
    ambient: number('The highest ambient temperature, in °C.').optional(),
  })
  .describe('What the label says.');

const accuracy = z.object({
  ofReading: number('The part that grows with the reading, a plain ratio.'),
  fixed: number('The part that does not, in the unit of the reading.'),
  resolution: number('The step of the last digit, in the unit of the reading.').optional(),
});

const uncertainResistance = z.object({
  resistance: number('In Ω.'),
  uncertainty: number('How far off that may be (half-width), in Ω.'),
});

const instrument = z.object({
  role: text('Its post on the bench: load, meter, …'),
  driver: text('The driver by which it is spoken to.'),
  address: text('Where it is.'),
  identity: text('What it calls itself.'),
  accuracy: z
    .record(z.string(), accuracy)
    .describe('Half-widths of the errors that the maker promises, by reading.'),
  ratings: z
    .object({
      voltage: number('The highest voltage it takes, in V.').optional(),
      current: number('The highest current it takes, in A.').optional(),
      power: number('The highest power it takes, in W.').optional(),
      leastVoltage: number('Below this it can not sink its current, in V.').optional(),
    })
    .describe('What the instrument can stand.'),
});

const quantityOrShare = z.union([
  z.object({
    kind: z.literal('absolute').describe('A value of its own.'),
    value: number('In the unit of the finding.'),
  }),
  z.object({
    kind: z.literal('share').describe('A share of another value.'),
    ratio: number('1.4 for 140 %.'),
    of: text('What it is a share of.'),
  }),
]);

const requirement = z.union([
  z.object({
    kind: z.enum(['at-least', 'at-most']).describe('On which side of the value it must be.'),
    value: quantityOrShare.describe('The limit.'),
  }),
  z.object({
    kind: z.literal('is').describe('It must be a word.'),
    word: text('That word.'),
  }),
]);

const change = z.object({ date: text('The day, year first.'), what: text('What was done.') });

const module = z.object({
  name: text('What the module is called.'),
  description: text('What it is and where it came from.'),
  rated: ratedValues,
  protectionClass: z.enum(['I', 'II']).describe('IEC 61140: I has an earthed plug, II has not.'),
  input: z.enum(['mains', 'dc']).describe('What the module runs from.'),
  outputIsolation: z
    .union([z.literal('unknown'), z.number()])
    .describe('What output to earth withstands, in V, or unknown.'),
  changes: z.array(change).describe('What was done to the module, oldest first.'),
});

const bench = z.object({
  name: text('What the bench is called.'),
  leads: uncertainResistance.describe('The leads from module to load, there and back.'),
  voltageFrom: z
    .enum(['meter-at-module', 'load-terminals'])
    .describe('Where the voltage of the module is read.'),
  simulated: z.boolean().describe('Whether what was measured was simulated.'),
  ambient: z
    .object({
      temperature: number('In °C.'),
      uncertainty: number('How far off that may be (half-width), in K.'),
    })
    .optional()
    .describe('The surroundings.'),
  limits: z
    .object({ temperature: number('The highest temperature of a module, in °C.').optional() })
    .optional()
    .describe('What was never to be exceeded and findings rest on.'),
  places: z
    .array(z.object({ ballast: uncertainResistance.optional().describe('In series with the module.') }))
    .optional()
    .describe('The places of a group, in the order of the modules.'),
});

const derating = z.object({
  margin: number('The part of the usable current that is recommended, a plain ratio.'),
  aboveNameplate: z
    .enum(['never', 'after-soak'])
    .describe('Whether more than the rated current may ever be recommended.'),
  ambient: z
    .object({
      expected: number('The warmest air that will be around the module, in °C.'),
      fullTo: number('Full load up to here, in °C.'),
      fallingTo: number('What is left of the load at `at`, a plain ratio.'),
      at: number('Where the falling line ends, in °C.'),
    })
    .optional()
    .describe('Less load in warmer air.'),
  lossModel: z
    .object({ fixed: number('The share of the losses that no load changes, a plain ratio.') })
    .optional()
    .describe('How a temperature rise is carried over to other currents.'),
  temperatureLimit: number('The warmest that the place of the soak may become in use, in °C.').optional(),
});

export const headerSchema = z
  .object({
    format: z.literal(headerFormat).describe('The name of the format and its version.'),
    program: z
      .object({ name: text('Its name.'), version: text('Its version.') })
      .describe('What made the record.'),
    began: text('When the run began; ISO 8601, UTC.'),
    modules: z
      .array(module)
      .min(1)
      .describe('The modules under test, in the order of the circuit; the lowest of a stack first.'),
    circuit: z
      .enum(['single', 'parallel', 'series'])
      .default('single')
      .describe('How the modules are wired.'),
    bench: bench.describe('The bench, as far as findings rest on it.'),
    procedure: z
      .object({
        name: text('What the procedure is called.'),
        title: text('What it does, as a headline.'),
        cautions: z.array(z.string()).describe('What had to be acknowledged.'),
      })
      .describe('What was to be done.'),
    steps: z
      .array(
        z.object({
          kind: text('The kind of step, as procedures name it.'),
          summary: text('The same in words.'),
          settings: z
            .record(z.string(), z.unknown())
            .describe("The step's parameters in words and numbers, as its kind understood them."),
        }),
      )
      .describe('The steps, in order.'),
    criteria: z
      .array(
        z.object({
          finding: text('The name of a finding.'),
          requirement: requirement.describe('What is required of it.'),
        }),
      )
      .describe('What is required of the result.'),
    baseline: baselineSchema
      .optional()
      .describe('The earlier run that this one is judged against, where there is one.'),
    derating: derating.describe('How the recommended current follows from the usable one.'),
    instruments: z.array(instrument).describe('The instruments, as they answered before the run.'),
    files: z
      .array(
        z.object({
          kind: text('The kind of file.'),
          path: text('Where it was.'),
          sha256: text('SHA-256 of its text, in hex.'),
          text: text('Its text, as it was.'),
        }),
      )
      .describe('Every input file.'),
  })
  .meta({
    title: 'railproof record',
    description:
      'run.json: what was planned, with what, on what; written before anything was energised and never changed. Numbers are in V, A, Ω, W, s, °C and plain ratios.',
  });
