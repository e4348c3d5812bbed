import { dimensionWords } from '../quantity/dimension-words.js';
import type { DriverFile } from './driver-checks.js';
import type { DriverReading } from './driver.js';
import { readingDimensions } from './reading-dimensions.js';
import type { Complaint } from './yaml-document.js';

/** Whether each reading is of the kind and the dimension that its name says, and each accuracy that of a reading. */
export function readingProblems(driver: DriverFile): Complaint[] {
  return [...readingKinds(driver), ...accuracyWithoutReading(driver)];
}

/** The key that makes a reading of each kind, and what such a reading is. */
const kinds: Readonly<Record<DriverReading['kind'], { readonly key: string; readonly is: string }>> = {
  number: { key: "'unit'", is: 'a number' },
  flag: { key: "'true-when'", is: 'a yes or a no' },
  channel: { key: "'channel-in'", is: "a channel's number" },
};

function* readingKinds({ readings }: DriverFile): Generator<Complaint> {
  for (const [name, reading] of Object.entries(readings)) {
    // What is no reading at all has been told already.
    if (!Object.hasOwn(kinds, reading.kind)) continue;
    const path = ['readings', name];
    const due = kindOf(name);
    if (due !== undefined && reading.kind !== due) {
      const told = name.startsWith('measures-') ? name : `the ${name}`;
      const give = due === 'number' ? `its ${kinds[due].key}` : kinds[due].key;
      yield {
        path,
        message: `${told} is ${kinds[due].is}; give ${give} in place of ${kinds[reading.kind].key}`,
      };
      continue;
    }
    const dimension = isNumber(name) ? readingDimensions[name] : undefined;
    if (dimension !== undefined && reading.kind === 'number' && reading.dimension !== dimension) {
      const message = `the unit is that of ${dimensionWords[reading.dimension].name}; this reading is ${dimensionWords[dimension].name}`;
      yield { path: [...path, 'unit'], message };
    }
  }
}

function* accuracyWithoutReading({ accuracy, readings }: DriverFile): Generator<Complaint> {
  for (const name of Object.keys(accuracy)) {
    if (Object.hasOwn(readings, name)) continue;
    yield { path: ['accuracy', name], message: `this driver has no reading '${name}'` };
  }
}

function kindOf(name: string): DriverReading['kind'] | undefined {
  if (isNumber(name)) return 'number';
  if (name.endsWith('-state') || name.startsWith('measures-')) return 'flag';
  return name === 'closed-channel' ? 'channel' : undefined;
}

function isNumber(name: string): name is keyof typeof readingDimensions {
  return Object.hasOwn(readingDimensions, name);
}
