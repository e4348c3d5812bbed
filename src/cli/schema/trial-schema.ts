import * as z from '../../libraries/zod.js';
import type { AsWritten } from '../../report/schema/as-written.js';

const seconds = (description: string) => z.number().nonnegative().describe(description);

const t = z.number().describe('Seconds since the connection was made.');
const text = (description: string) => z.string().describe(`${description} One character a byte (Latin-1).`);

const bytes = z.union([
  z.strictObject({ t, sent: text('What was sent.') }),
  z.strictObject({ t, received: text('What came.') }),
]);

const result = z.strictObject({
  part: z
    .enum([
      'identity',
      'error-queue',
      'remote',
      'prepare',
      'operation',
      'reading',
      'release',
      'proof',
      'local',
    ])
    .describe('The part of the driver that the message is of.'),
  name: z.string().describe('Of the operation or the reading; of the part otherwise.'),
  sent: z.string().describe('The message.'),
  received: z.string().optional().describe('What came, escaped and cut; left out where nothing did.'),
  verdict: z
    .enum(['understood', 'refused', 'silent', 'unclear', 'not-sent'])
    .describe('What the instrument made of it.'),
  detail: z.string().describe('The same in words.'),
  seconds: seconds('That the last answer took, or that was waited for one; 0 where none was due.'),
  bytes: z.array(bytes).describe('All that went over the line for it, in its order.'),
});

const message = z.string();
const serial = z
  .strictObject({
    baud: z.int().exactOptional().describe('The speed.'),
    data: z
      .union([z.literal(7), z.literal(8)])
      .exactOptional()
      .describe('Data bits.'),
    parity: z.enum(['none', 'even', 'odd']).exactOptional().describe('The parity bit.'),
    stop: z
      .union([z.literal(1), z.literal(2)])
      .exactOptional()
      .describe('Stop bits.'),
    flow: z.enum(['none', 'hardware', 'software']).exactOptional().describe('The handshake.'),
    dtr: z.enum(['on', 'off']).exactOptional().describe('The control line DTR while the port is open.'),
    rts: z.enum(['on', 'off']).exactOptional().describe('The control line RTS while the port is open.'),
  })
  .describe('What the serial line was set to.');

const wire = z.strictObject({
  sendEnd: message.describe('What ends a message to it.'),
  replyEnd: message.describe('What ends a reply.'),
  gap: seconds('Silence kept between two messages, in s.'),
  timeout: seconds('How long a reply may take, in s.'),
  echo: z.boolean().exactOptional().describe('Whether it repeats each message before it answers.'),
  prompt: z.string().exactOptional().describe('What it sends when it will take the next message.'),
  serial: serial.exactOptional(),
});

const needKeys = {
  pause: seconds(
    'The shortest pause, in s, after which it missed nothing; left out where none will do.',
  ).optional(),
  late: seconds('How much later than usual it answered when asked without a pause, in s.'),
};

const pace = z.strictObject({
  roundTrips: z
    .array(
      z.strictObject({
        question: message.describe('What was asked.'),
        times: z.array(z.number()).describe('How long each answer took, in s.'),
      }),
    )
    .describe('How long it takes to answer.'),
  afterAnswer: z.strictObject(needKeys).describe('What it needs after an answer.'),
  afterOperations: z
    .array(
      z.strictObject({
        operation: z.string().describe('The operation.'),
        message: message.describe('Its last message.'),
        ...needKeys,
      }),
    )
    .describe('What it needs after each operation.'),
});

const proposal = z.strictObject({
  gap: seconds('In s.'),
  timeout: seconds('In s.'),
  settling: seconds('In s.'),
  rests: z
    .record(z.string(), z.number())
    .describe('After the last message of an operation, in s, where it needs more than the gap.'),
});

/** `drivers --try --json`. */
export const trialSchema = z
  .strictObject({
    format: z.literal('railproof/trial 1').describe('The name of the format and its version.'),
    driver: z.string().describe('The name of the driver.'),
    results: z.array(result).describe('What became of each message, in the order in which they were sent.'),
    wire: wire
      .exactOptional()
      .describe('How it turned out to be spoken to; left out where that is not known.'),
    remarks: z
      .array(z.string())
      .exactOptional()
      .describe('What the driver says otherwise, or does not say, a sentence each.'),
    pace: pace.exactOptional().describe('How fast it turned out to be; left out where that is not known.'),
    proposal: proposal.exactOptional().describe('What a driver file had better say.'),
    written: z.array(z.string()).exactOptional().describe('The files that were written.'),
  })
  .meta({
    title: 'railproof trial',
    description: 'What an instrument made of a driver, message by message.',
  });

export type TrialJson = AsWritten<typeof trialSchema>;
