import type { Amperes, Ratio, Volts } from '../quantity/quantity.js';
import type { RunHeader } from '../record/run-header.js';
import { type Finding, inWords } from './finding.js';
import { amps, percent, volts } from './in-words.js';
import type { StackLook } from './module-voltages.js';
import { isComplete } from './place-looks.js';

/** Of its voltage with no load; a module that lost more has collapsed. */
const collapsed: Ratio = 0.3;
/** One sags clearly more than the next when it sags by this factor more, and by more than `noticeable`. */
const clearlyMore = 2;
const noticeable: Ratio = 0.05;

/**
 * `weakest-module`: the one whose voltage collapses first while the load climbs, with the string's current
 * there; or the one that sags clearly more than the others at the highest point that was held. `none` where
 * all held alike, `undetermined` where the string dropped out and nobody saw whose voltage went.
 */
export function weakestModule(header: RunHeader, looks: readonly StackLook[]): readonly Finding[] {
  const climb = looks.filter(({ kind }) => kind === 'climb');
  const first = climb[0];
  if (first === undefined) return [];
  const held = highestHeld(header, climb);
  const collapse = firstCollapse(header, looks);
  const { step } = first;
  if (collapse !== undefined) {
    const { module, how } = collapse;
    return [inWords('weakest-module', module, { step: collapse.step, note: `it ${how}` })];
  }
  const dropped = climb.find(({ outcome }) => outcome === 'dropped');
  if (dropped !== undefined) {
    const seen = dropped.modules.map(({ module }) => module).join(', ');
    const note = `the string dropped out at ${amps(dropped.set ?? dropped.current)}; ${seen === '' ? 'no place was read then' : `it was not ${seen}, and no other place was read then`}`;
    return [inWords('weakest-module', 'undetermined', { step, note })];
  }
  if (held === undefined) return [];
  const [most, next] = [...sagsAt(looks, held)].sort((one, other) => other.sag - one.sag);
  if (most === undefined) return [];
  const sags = `${most.module} sags most, by ${percent(Math.max(0, most.sag))}`;
  const isWeak = most.sag > noticeable && most.sag > clearlyMore * (next?.sag ?? 0);
  return [
    isWeak
      ? inWords('weakest-module', most.module, {
          step,
          note: `it sags most, by ${percent(Math.max(0, most.sag))} at ${amps(held.current)}; none dropped`,
        })
      : inWords('weakest-module', 'none', { step, note: `all held up to ${amps(held.current)}; ${sags}` }),
  ];
}

/** For the note of what the string holds. */
export function howTheStackFailed(header: RunHeader, looks: readonly StackLook[]): string {
  const collapse = firstCollapse(header, looks);
  return collapse === undefined ? '' : `${collapse.module} ${collapse.how}`;
}

/** The module of a string whose voltage goes first. */
export interface Collapse {
  readonly module: string;
  readonly step: number;
  /** The current that was asked for when it went, and the highest that the string held. */
  readonly at: Amperes;
  readonly held: Amperes | undefined;
  /** What a sentence says of it: `collapses at 3.60 A …`. */
  readonly how: string;
}

/**
 * The module that lost most of its voltage at the lowest dropped point. Where one place only was read there,
 * it speaks for itself, and of two modules for the other one.
 */
export function firstCollapse(header: RunHeader, looks: readonly StackLook[]): Collapse | undefined {
  const dropped = looks
    .filter(({ kind, outcome }) => kind === 'climb' && outcome === 'dropped')
    .sort((one, other) => (one.set ?? 0) - (other.set ?? 0))
    .at(0);
  if (dropped === undefined) return undefined;
  const sags = sagsAt(looks, dropped);
  const worst = [...sags].sort((one, other) => other.sag - one.sag).at(0);
  const asked = dropped.set ?? dropped.current;
  const at = amps(asked);
  const held = highestHeld(
    header,
    looks.filter(({ kind }) => kind === 'climb'),
  );
  const after = held === undefined ? '' : `, it held ${amps(held.current)}`;
  if (worst !== undefined && worst.sag > collapsed) {
    const how = `collapses at ${at} (${volts(worst.idle)} fall to ${volts(worst.volts)})${after}`;
    return { module: worst.module, step: dropped.step, at: asked, held: held?.current, how };
  }
  const others = header.modules.filter(({ name }) => !sags.some(({ module }) => module === name));
  const [only] = others;
  if (only === undefined || others.length > 1) return undefined;
  const rest = sags.map(({ module }) => module).join(', ');
  return {
    module: only.name,
    step: dropped.step,
    at: asked,
    held: held?.current,
    how: `collapses at ${at}, as ${rest} kept ${sags.length === 1 ? 'its' : 'their'} voltage when the string dropped out${after}`,
  };
}

function highestHeld(header: RunHeader, climb: readonly StackLook[]): StackLook | undefined {
  return climb
    .filter((look) => look.outcome === 'held' && isComplete(look, header))
    .sort((one, other) => one.current - other.current)
    .at(-1);
}

interface Sag {
  readonly module: string;
  /** With the least load that was looked at. */
  readonly idle: Volts;
  readonly volts: Volts;
  readonly sag: Ratio;
}

function sagsAt(looks: readonly StackLook[], { modules }: StackLook): readonly Sag[] {
  return modules.flatMap(({ module, volts: own }) => {
    const idle = looks
      .filter(({ kind, outcome }) => kind === 'together' || (kind === 'climb' && outcome === 'held'))
      .sort((one, other) => one.current - other.current)
      .flatMap((look) => look.modules.find((each) => each.module === module)?.volts ?? [])
      .at(0);
    if (idle === undefined || idle <= 0) return [];
    return [{ module, idle, volts: own, sag: (idle - own) / idle }];
  });
}
