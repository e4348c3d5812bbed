import * as z from '../libraries/zod.js';
import { exactlyOne } from './alternatives.js';
import { name } from './building-blocks.js';
import type { StagesForm } from './stages.js';

const mostSideBySide = 12;

/** A form as files write it: a module by its name, `{ group: [...] }`, or `{ stack: [...] }`. */
type Written = string | WrittenJoined;
interface WrittenJoined {
  readonly group?: readonly Written[];
  readonly stack?: readonly Written[];
}

const moduleName = name('A module by its name.', ['W1']);

/** What is joined: the lowest of a stack first. */
export const partsSchema: z.ZodType<readonly Written[], readonly Written[]> = z
  .array(z.lazy(() => partSchema))
  .min(2)
  .max(mostSideBySide);

const partSchema: z.ZodType<Written, Written> = z
  .union([
    moduleName,
    z
      .strictObject({
        group: partsSchema.exactOptional().describe('Side by side.'),
        stack: partsSchema.exactOptional().describe('One upon the other, the lowest first.'),
      })
      .meta(exactlyOne({ must: ['group'], may: [] }, { must: ['stack'], may: [] }))
      .superRefine((part, context) => {
        // A misspelt key has been told already.
        if (Object.keys(part).length === 1 || context.issues.length > 0) return;
        const message = "one of 'group' and 'stack' is needed";
        context.addIssue({ code: 'custom', message });
      }),
  ])
  .meta({
    id: 'part',
    description: 'A module by its name, or modules joined: { group: [W1, W2] }, { stack: [W1, W2] }.',
  });

export function formOf(part: Written): StagesForm {
  if (typeof part === 'string') return { kind: 'module', name: part };
  return part.group === undefined
    ? { kind: 'stack', of: (part.stack ?? []).map(formOf) }
    : { kind: 'group', of: part.group.map(formOf) };
}
