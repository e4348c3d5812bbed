import { formatQuantity } from '../quantity/format-quantity.js';
import { listed } from '../quantity/listed.js';
import type { RunHeader } from '../record/run-header.js';
import type { UnfitModule } from './arrangement-error.js';
import { type LineFound, needed } from './line-record.js';
import { heardOf, type ModuleRecords } from './module-records.js';
import type { ModuleProfile } from './module-profile.js';
import { recommendedOf } from './recommended.js';

type Described = RunHeader['modules'][number];

type Recommended = ModuleProfile['recommended'];
type Reason = Omit<UnfitModule, 'module'>;

/** What a profile needs at least, or why there can be none and what to do about it. */
export function fitOrNot(
  module: ModuleRecords,
  line: LineFound | undefined,
):
  | { readonly kind: 'fit'; readonly line: LineFound; readonly recommended: Recommended }
  | { readonly kind: 'unfit'; readonly unfit: UnfitModule } {
  const unfit = (reason: Reason): { kind: 'unfit'; unfit: UnfitModule } => ({
    kind: 'unfit',
    unfit: { module: module.name, ...reason },
  });
  const first = damaged(module) ?? ofTwo(module);
  if (first !== undefined) return unfit(first);
  if (line === undefined) return unfit(withoutLine(module));
  const uselessBecause = useless(line);
  if (uselessBecause !== undefined) return unfit(uselessBecause);
  const recommended = recommendedOf(module);
  if (recommended === undefined || recommended.current <= 0) return unfit(withoutRecommendation(recommended));
  return { kind: 'fit', line, recommended };
}

/** Nobody knows what it said, so the others can't stand for it. */
function damaged({ alone, together }: ModuleRecords): Reason | undefined {
  const runs = [...alone, ...together].filter(({ state }) => state === 'damaged').map(({ run }) => run);
  if (runs.length === 0) return undefined;
  return {
    why: `${listed(runs)} ${runs.length === 1 ? 'is' : 'are'} damaged: a seal does not hold, and nothing is believed of it`,
    advice: 'measure again what the damaged record was for, and leave it out',
  };
}

/** A name stands for one module, and a label does not change. */
function ofTwo({ name, alone }: ModuleRecords): Reason | undefined {
  const labels = alone.flatMap(({ header }) => header.modules.map(labelOf));
  const different = [...new Set(labels)];
  if (different.length < 2) return undefined;
  return {
    why: `its records are of modules with different labels (${different.join('; ')}), as if two were called ${name}`,
    advice:
      'give each module a name of its own in its module file, and measure again the one that is renamed',
  };
}

function labelOf({ rated, protectionClass, input }: Described): string {
  const voltage = formatQuantity(rated.voltage, 'voltage');
  return `${voltage} ${formatQuantity(rated.current, 'current')}, class ${protectionClass}, input ${input}`;
}

function withoutLine(module: ModuleRecords): Reason {
  const procedures = [...new Set(module.alone.map(({ header }) => header.procedure.name))];
  const missing = needed.filter((name) => heardOf(module, name).length === 0);
  return {
    why:
      missing.length > 0
        ? `its records (${procedures.join(', ')}) hold no ${listed(missing)}`
        : `none of its records (${procedures.join(', ')}) holds ${listed(needed)} all together`,
    advice: `run real-limit on it`,
  };
}

function useless({ record, openCircuit, usable }: LineFound): Reason | undefined {
  if (openCircuit.value <= 0) {
    return {
      why: `${record.run} measured ${formatQuantity(openCircuit.value, 'voltage', { significant: 3 })} with no load`,
      advice: 'see that its plus is at plus, and run real-limit on it again',
    };
  }
  if (usable.value > 0) return undefined;
  return {
    why: `by ${record.run} no current of it is usable`,
    advice: 'look for its fault before it is used, and run real-limit on it again',
  };
}

function withoutRecommendation(recommended: Recommended | undefined): Reason {
  return recommended === undefined
    ? { why: 'no record of it recommends a current', advice: 'run real-limit on it' }
    : {
        why: `${recommended.from.run} recommends no current at all: ${recommended.why}`,
        advice: `find out why before it is used, then run ${recommended.from.procedure} on it again`,
      };
}
