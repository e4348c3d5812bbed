import * as z from '../libraries/zod.js';
import { exactlyOne } from './alternatives.js';
import { quantity } from './building-blocks.js';
import { found } from './plain-words.js';
import type { StagesContact } from './stages.js';

const nodePattern = /^(?!\.)[A-Za-z0-9._-]{1,64}[+-]?$/;

/** A node of the switching by its name. */
function node(description: string) {
  return z
    .string()
    .regex(nodePattern, {
      error: ({ input }) =>
        `${found(input)}; a node is needed: W1+ and W1- of a module W1, in+, in-, or a name of your own`,
    })
    .meta({ description, examples: ['W1+', 'W1-', 'in+', 'in-'] });
}

/** Two nodes that are joined. */
export function joint(description: string) {
  return z.tuple([node('The one node.'), node('The other node.')]).meta({ description });
}

/** Without the name, under which it stands in its file. */
type Nameless<T> = T extends unknown ? Omit<T, 'name'> : never;

const notOneOf = "a contact is one of 'makes', 'breaks' and 'common' (with 'rest' and 'driven')";

export const contactSchema: z.ZodType<Nameless<StagesContact>> = z
  .strictObject({
    makes: joint('Closed between these two when driven.').exactOptional(),
    breaks: joint('Open between these two when driven.').exactOptional(),
    common: node('Of a change-over contact: the side that moves.').exactOptional(),
    rest: node('What `common` touches when not driven.').exactOptional(),
    driven: node('What `common` touches when driven.').exactOptional(),
    bridges: z
      .boolean()
      .exactOptional()
      .describe(
        'Whether it touches both in between (make before break), and not neither; false if left out.',
      ),
  })
  .meta(
    exactlyOne(
      { must: ['makes'], may: [] },
      { must: ['breaks'], may: [] },
      { must: ['common', 'rest', 'driven'], may: ['bridges'] },
    ),
  )
  .transform((contact, context): Nameless<StagesContact> => {
    // A misspelt key has been told already.
    if (context.issues.length > 0) return z.NEVER;
    const { makes, breaks, common, rest, driven, bridges } = contact;
    const refuse = (message: string): never => {
      context.addIssue({ code: 'custom', message, input: contact });
      return z.NEVER;
    };
    const kinds = [makes, breaks, common].filter((each) => each !== undefined).length;
    const changesOver = [common, rest, driven, bridges].some((each) => each !== undefined);
    if (kinds > 1 || (changesOver && (makes ?? breaks) !== undefined)) return refuse(notOneOf);
    if (makes !== undefined) return { kind: 'make', joins: makes };
    if (breaks !== undefined) return { kind: 'break', joins: breaks };
    if (!changesOver) return refuse(notOneOf);
    if (common === undefined || rest === undefined || driven === undefined)
      return refuse(
        "a change-over contact has 'common', 'rest' and 'driven'; one that touches a single side is written as 'makes' or 'breaks', with two nodes",
      );
    return { kind: 'change-over', common, rest, driven, bridges: bridges ?? false };
  });

export const diodeSchema = z
  .strictObject({
    from: node('Its anode.'),
    to: node('Its cathode.'),
    forward: quantity('voltage', 'What it takes when it conducts the full current.', { least: 0, most: 5 }),
  })
  .transform(({ from, to, forward }) => ({ from, to, forwardVoltage: forward }));
