import { givenPercent, ratedAmperes, volts } from '../analysis/in-words.js';
import { listed } from '../quantity/listed.js';
import { formatExact, formatQuantity } from '../quantity/format-quantity.js';
import type { Amperes, Ratio } from '../quantity/quantity.js';
import { roundedDown } from '../quantity/rounded-down.js';
import type { Concern, Standing } from './build.js';
import { usualMismatch } from './forbidden-connection.js';
import { groupOf } from './group-form.js';
import type { ModuleProfile } from './module-profile.js';
import type { ParallelBuild, ParallelWish } from './parallel-build.js';
import { standingOf } from './standing-of.js';
import { worstOf } from './worst-form.js';

/** Of the label's voltage: labels that differ by more are of different modules. */
const alikeLabels: Ratio = 0.01;
/** The most that ballasts may cost of the lowest open-circuit voltage, as where one is chosen. */
const mostCost: Ratio = 0.1;

/** Of what a part of a group is good for alone: one that adds less is wasted. Chosen, no published source. */
export const littleUse: Ratio = 0.1;

interface Found {
  readonly ballast: ParallelBuild['ballast'];
  /** Of the group. */
  readonly recommended: Amperes;
}

/**
 * Whether a group may be built. Refused: modules made for different voltages, or that give such; one that its
 * records recommend for nothing; an imbalance that no ballast gives; a ballast that takes more than a tenth of the
 * voltage; a load above what is recommended. An output that is bonded to earth or leaks to it refuses nothing: all
 * 0 V are joined anyway. The cautions say what it means.
 */
export function parallelStanding(
  profiles: readonly ModuleProfile[],
  wish: ParallelWish,
  found: Found,
): { readonly standing: Standing; readonly concerns: readonly Concern[] } {
  const refusals = [
    ...differentLabels(profiles),
    ...farApart(profiles),
    ...profiles.flatMap(recommendedForNothing),
    ...ballastRefusals(profiles, found),
    ...tooMuch(profiles, wish, found),
  ];
  const concerns = [
    ...profiles.flatMap((profile) => profile.concerns),
    ...(refusals.length > 0 ? [] : ofLittleUse(profiles, wish, found)),
  ];
  return { standing: standingOf({ refusals, doubts: worseThanBest(profiles, found), concerns }), concerns };
}

function differentLabels(profiles: readonly ModuleProfile[]): readonly string[] {
  const voltages = profiles.map(({ label }) => label.voltage);
  const highest = Math.max(...voltages);
  const lowest = Math.min(...voltages);
  if (highest <= lowest * (1 + alikeLabels)) return [];
  const of = (voltage: number): string =>
    listed(profiles.filter(({ label }) => label.voltage === voltage).map(({ name }) => name));
  const written = (voltage: number): string => {
    const text = formatExact(voltage, 'voltage');
    return `${text.value} ${text.unit}`;
  };
  return [
    `${of(highest)} is made for ${written(highest)} and ${of(lowest)} for ${written(lowest)}: side by side the higher carries everything, the lower nothing, and its output is held above what it is made for. Put only modules of one voltage side by side.`,
  ];
}

/** By more than outputs that are meant to be alike may differ, as where contacts join them. */
function farApart(profiles: readonly ModuleProfile[]): readonly string[] {
  if (differentLabels(profiles).length > 0) return [];
  const rising = profiles.toSorted((one, other) => one.openCircuit.value - other.openCircuit.value);
  const [lowest, highest] = [rising.at(0), rising.at(-1)];
  if (lowest === undefined || highest === undefined) return [];
  const apart = highest.openCircuit.value - lowest.openCircuit.value;
  if (apart <= usualMismatch * highest.label.voltage) return [];
  const read = ({ openCircuit }: ModuleProfile): string =>
    formatQuantity(openCircuit.value, 'voltage', { significant: 4 });
  return [
    `With no load ${highest.name} gives ${read(highest)} and ${lowest.name} ${read(lowest)}, ${volts(apart)} apart, more than ${givenPercent(usualMismatch)} of the ${volts(highest.label.voltage)} that both are made for: the lower would give nothing while its output is held up by the other. See which of them is off its label and why, and leave it out.`,
  ];
}

export function recommendedForNothing({ name, recommended }: ModuleProfile): readonly string[] {
  return recommended.current > 0
    ? []
    : [`${name} is recommended for nothing by its records: ${recommended.why}.`];
}

/** By the worst case, which is what is recommended of anything. */
function worseThanBest(profiles: readonly ModuleProfile[], { recommended }: Found): readonly string[] {
  const best = bestOf(profiles);
  if (best === undefined || recommended >= best.recommended.current) return [];
  return [
    `The group is recommended for ${roundedDown(recommended, 'current')}, less than ${best.name} alone, ${roundedDown(best.recommended.current, 'current')}: the others do it no good. Build with ${best.name} alone, or put modules side by side that are alike.`,
  ];
}

function bestOf(profiles: readonly ModuleProfile[]): ModuleProfile | undefined {
  return profiles.toSorted((one, other) => other.recommended.current - one.recommended.current).at(0);
}

/** Those without which the group is recommended for hardly less. */
function ofLittleUse(
  profiles: readonly ModuleProfile[],
  { tolerance }: Pick<ParallelWish, 'tolerance'>,
  { ballast, recommended }: Found,
): readonly Concern[] {
  const resistor = ballast.kind === 'resistor' ? { resistance: ballast.resistance, tolerance } : undefined;
  return profiles.flatMap((profile): readonly Concern[] => {
    const rest = profiles.filter((each) => each !== profile);
    const without = worstOf(groupOf(rest), profiles, resistor).limit;
    if (recommended - without >= littleUse * profile.recommended.current) return [];
    return [
      {
        kind: 'of-little-use',
        module: profile.name,
        run: undefined,
        weight: 'weakens',
        text: `without it the group is recommended for ${roundedDown(without, 'current')}, with it for ${roundedDown(recommended, 'current')}: leave it out, or put it with modules that are more like it`,
      },
    ];
  });
}

function ballastRefusals(profiles: readonly ModuleProfile[], { ballast }: Found): readonly string[] {
  if (ballast.kind === 'impossible') return [`No ballast does what is asked for: ${ballast.why}.`];
  if (ballast.kind === 'none') return [];
  const lowest = Math.min(...profiles.map(({ openCircuit }) => openCircuit.value));
  return ballast.voltageCost > mostCost * lowest
    ? [
        `The ballasts take ${volts(ballast.voltageCost)} of ${volts(lowest)}, more than a tenth: take smaller ones, or leave the ballast out to have one chosen.`,
      ]
    : [];
}

function tooMuch(
  profiles: readonly ModuleProfile[],
  { load }: ParallelWish,
  { recommended }: Found,
): readonly string[] {
  if (load === undefined || load <= recommended || recommended <= 0) return [];
  const modules = Math.ceil((load * profiles.length) / recommended);
  return [
    `${ratedAmperes(load)} is asked for, and ${roundedDown(recommended, 'current')} is the most that the group is recommended for. Ask for less, or put more modules side by side: of modules like these about ${modules} would do, if they share as well.`,
  ];
}
