import * as z from '../libraries/zod.js';
import { readQuantity } from '../quantity/parse-quantity.js';
import { QuantityError } from '../quantity/quantity-error.js';
import type { Dimension } from '../quantity/quantity.js';
import { exactlyOne } from './alternatives.js';
import { placeholderOf } from './driver-checks.js';
import {
  errorMeanings,
  identityMeanings,
  readyMeanings,
  type Exchange,
  type ReadingMeaning,
} from './driver-dialogue.js';
import { dimensionOfValue } from './driver-dialogue-text.js';
import { messageText } from './driver-message-schema.js';
import { found, notAmong } from './plain-words.js';
import { readingDimensions } from './reading-dimensions.js';

const answer = z
  .string()
  .max(1000)
  // What an instrument may send, without the end of the reply.
  .refine((text) => /^[\p{ASCII}\u0080-\u00ff]*$/u.test(text), {
    error: ({ input }) => `${found(input)}; an answer is made of characters of one byte each`,
  });

const written = z.strictObject({
  identity: answer.describe('An answer to the question for the identity.').exactOptional(),
  operation: z.string().describe('The operation that is performed.').exactOptional(),
  reading: z.string().describe('The reading that is asked for.').exactOptional(),
  errors: answer.describe('An answer to the question for errors.').exactOptional(),
  ready: answer.describe('An answer to the question whether it is ready.').exactOptional(),
  value: z
    .union([z.string(), z.number()])
    .describe('What the operation is given: a quantity, or the number of a channel.')
    .exactOptional(),
  channel: z
    .int()
    .describe('The channel, of an instrument that has several; the lowest when left out.')
    .exactOptional(),
  sends: z.array(messageText).max(40).describe('The messages that are sent, in their order.').exactOptional(),
  answer: answer.describe('What the instrument answers, without the end of the reply.').exactOptional(),
  is: z.union([z.string(), z.number()]).describe('What the answer is taken for.').exactOptional(),
});

type Written = z.output<typeof written>;
type Key = keyof Written;
type Complain = (path: PropertyKey[], message: string) => void;

/** The key that an exchange begins with says what it is; the others it must have, and may. */
const forms = {
  identity: { must: ['is'], may: [] },
  operation: { must: ['sends'], may: ['value', 'channel'] },
  reading: { must: [], may: ['sends', 'answer', 'is', 'channel'] },
  errors: { must: ['is'], may: [] },
  ready: { must: ['is'], may: [] },
} as const satisfies Record<string, { must: readonly Key[]; may: readonly Key[] }>;

type Form = keyof typeof forms;
const formNames = Object.keys(forms) as readonly Form[];

const exchange = written
  .meta(
    exactlyOne(
      ...formNames.map((form) => ({ must: [form, ...forms[form].must], may: [...forms[form].may] })),
    ),
  )
  .transform((value, context): Exchange => {
    const read = readExchange(value, (path, message) => {
      context.addIssue({ code: 'custom', path, message });
    });
    return read ?? z.NEVER;
  });

/** The `dialogue` of a driver file. */
export const dialogueSchema = z
  .array(exchange)
  .max(500)
  .describe(
    'Messages as they must be sent, and answers with what they must be taken for; `railproof check` goes through them.',
  );

function readExchange(value: Written, complain: Complain): Exchange | undefined {
  const given = formNames.filter((form) => value[form] !== undefined);
  const [form] = given;
  if (form === undefined || given.length > 1) {
    complain([], `an exchange has one of ${formNames.join(', ')}`);
    return undefined;
  }
  misplacedKeys(value, form, complain);
  const { answer: said, is, sends, channel } = value;
  const ofChannel = channel === undefined ? {} : { channel };
  switch (form) {
    case 'identity':
      return { kind: form, answer: value.identity ?? '', is: word(is, identityMeanings, complain) };
    case 'errors':
      return { kind: form, answer: value.errors ?? '', is: word(is, errorMeanings, complain) };
    case 'ready':
      return { kind: form, answer: value.ready ?? '', is: word(is, readyMeanings, complain) };
    case 'operation': {
      const operation = value.operation ?? '';
      const set = operationValue(operation, value.value, complain);
      return {
        ...{ kind: form, operation, sends: sends ?? [] },
        ...(set === undefined ? {} : { value: set }),
        ...ofChannel,
      };
    }
    case 'reading': {
      const reading = value.reading ?? '';
      if ((said === undefined) !== (is === undefined)) {
        complain([], said === undefined ? "'is' needs an 'answer'" : "'answer' needs an 'is'");
      } else if (sends === undefined && is === undefined) {
        complain([], "a reading has 'sends', or 'answer' and 'is', or all three");
      }
      return {
        ...{ kind: form, reading },
        ...(sends === undefined ? {} : { sends }),
        ...(said === undefined || is === undefined
          ? {}
          : { heard: { answer: said, is: meaning(reading, is, complain) } }),
        ...ofChannel,
      };
    }
  }
}

function misplacedKeys(value: Written, form: Form, complain: Complain): void {
  const { must, may }: { must: readonly Key[]; may: readonly Key[] } = forms[form];
  for (const key of must) if (value[key] === undefined) complain([key], `missing; '${form}' needs it`);
  for (const key of Object.keys(value) as Key[]) {
    if (key !== form && !must.includes(key) && !may.includes(key)) {
      complain([key], `'${form}' has no '${key}'; it has ${[...must, ...may].join(', ')}`);
    }
  }
}

function word<W extends string>(is: string | number | undefined, words: readonly W[], complain: Complain): W {
  const known = words.find((each) => each === is);
  if (known === undefined && is !== undefined) complain(['is'], notAmong(is, words));
  return known ?? z.NEVER;
}

function operationValue(
  operation: string,
  value: string | number | undefined,
  complain: Complain,
): number | undefined {
  const placeholder = placeholderOf[operation];
  if (placeholder === undefined) {
    if (value !== undefined) complain(['value'], 'this operation is given no value');
    return undefined;
  }
  if (value === undefined) {
    complain(['value'], `missing; it stands for ${placeholder}`);
    return undefined;
  }
  const dimension = dimensionOfValue(operation);
  if (dimension !== undefined) return quantityIn(value, dimension, ['value'], complain);
  if (isChannel(value)) return value;
  complain(['value'], `${found(value)}; the number of a channel is needed`);
  return undefined;
}

function isChannel(value: string | number): value is number {
  return typeof value === 'number' && Number.isSafeInteger(value) && value >= 0;
}

/** By the name of the reading, which says what it is; that there is such a reading is looked at later. */
function meaning(reading: string, is: string | number, complain: Complain): ReadingMeaning {
  if (is === 'not-understood') return { kind: is };
  if (Object.hasOwn(readingDimensions, reading)) {
    if (is === 'overload' || is === 'not-a-number') return { kind: is };
    const dimension = readingDimensions[reading as keyof typeof readingDimensions];
    const value = quantityIn(is, dimension, ['is'], complain, ['overload', 'not-a-number']);
    return { kind: 'number', value: value ?? 0, dimension };
  }
  if (reading === 'closed-channel') {
    if (is === 'none') return { kind: 'channel', value: null };
    if (isChannel(is)) return { kind: 'channel', value: is };
    complain(['is'], `${found(is)}; the number of a channel, none or not-understood is needed`);
    return z.NEVER;
  }
  const said = word(is, ['yes', 'no'], complain);
  return { kind: 'flag', value: said === 'yes' };
}

function quantityIn(
  text: string | number,
  dimension: Dimension,
  path: PropertyKey[],
  complain: Complain,
  words: readonly string[] = [],
): number | undefined {
  try {
    return readQuantity(text, dimension);
  } catch (error) {
    if (!(error instanceof QuantityError)) throw error;
    const hint = words.length === 0 ? '' : `; or ${[...words, 'not-understood'].join(', ')}`;
    complain(path, `${error.message}${hint}`);
    return undefined;
  }
}
