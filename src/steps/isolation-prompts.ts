import { earthPoint } from '../circuit/earth-point.js';
import type { Module } from '../files/module.js';
import type { OperatorRequest } from './operator.js';

/** Something that is done by hand, and so asked for. */
export type Handwork = Required<Pick<OperatorRequest, 'name' | 'text' | 'act'>>;

type Modules = readonly [Module, ...Module[]];

export function unplug(modules: Modules): Handwork {
  const outputs =
    modules.length === 1
      ? `take its output leads off the load and off anything else; only the meter's probes stay on its output`
      : 'take the output of each off the load, off its ballast and off the others, so that none touches another';
  return {
    name: 'unplug',
    text: `${inputsOut(modules)} and leave ${modules.length === 1 ? 'it' : 'them'} out. Then ${outputs}.`,
    act: 'unplug',
  };
}

export function probeOutput({ name }: Module): Handwork {
  return {
    name: `probe-output-${name}`,
    text: `Put the meter's own leads across the output of ${name}: plus at its plus, minus at its 0 V.`,
    act: `probe output of ${name}`,
  };
}

export const leadsTogether: Handwork = {
  name: 'leads-together',
  text: "Take the meter's leads off and hold their two tips together, firmly, until the next question.",
  act: 'leads together',
};

export const leadsApart: Handwork = {
  name: 'leads-apart',
  text: "Hold the tips of the meter's leads apart, touching nothing and not your fingers, until the next question.",
  act: 'leads apart',
};

/** The plug is out, and it is the plug that is touched: nothing is ever measured on live mains. */
export function probeEarth(module: Module, alone: boolean): Handwork {
  const { name, protectionClass, input } = module;
  const out =
    input === 'mains' ? `The plug of ${name} is out of the socket` : `The input of ${name} is off its source`;
  const joined = protectionClass === 'I' ? '' : ' Join them with clip leads, as it has no earth of its own.';
  return {
    name: `probe-earth-${name}`,
    text:
      `${out} and stays out. Hold one of the meter's tips on ${earthPoint(module)}, ` +
      `and the other on the 0 V of its output, until the next question.${joined}`,
    act: alone ? 'probe earth and 0 V' : `probe earth and 0 V of ${name}`,
  };
}

export const probesBack: Handwork = {
  name: 'probe-output',
  text: "Everything still unplugged: take off any clip leads, wire the outputs as the procedure's wiring says, and put the meter's probes back where the bench file has them.",
  act: 'probe the output',
};

export function plugIn(modules: Modules): Handwork {
  const names = named(modules);
  const text = modules.every(({ input }) => input === 'mains')
    ? `Plug ${names} in again.`
    : `Give ${names} ${modules.length === 1 ? 'its input' : 'their inputs'} again.`;
  return { name: 'plug-in', text, act: 'plug in' };
}

/** `K1`; `K1, K2 and K3`. */
export function named(modules: readonly Module[]): string {
  const names = modules.map(({ name }) => name);
  return names.length < 2 ? names.join('') : `${names.slice(0, -1).join(', ')} and ${String(names.at(-1))}`;
}

function inputsOut(modules: Modules): string {
  const names = named(modules);
  if (modules.every(({ input }) => input === 'mains')) {
    return modules.length === 1
      ? `Pull the plug of ${names} out of its socket`
      : `Pull the plugs of ${names} out of their sockets`;
  }
  return modules.length === 1
    ? `Take the input leads of ${names} off their source`
    : `Pull the plugs, or take off the input leads, of ${names}`;
}
