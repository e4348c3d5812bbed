import { earthPoint } from '../circuit/earth-point.js';
import type { Module } from '../files/module.js';
import type { OperatorRequest } from './operator.js';

/** Something that is done by hand, and so asked for. */
export type Handwork = Required<Pick<OperatorRequest, 'name' | 'text' | 'act'>>;

type Modules = readonly [Module, ...Module[]];

/** The outputs stay as they are until the meter has shown that they are discharged. */
export function unplug(modules: Modules): Handwork {
  const it = modules.length === 1 ? 'it' : 'them';
  return {
    name: 'unplug',
    text:
      `${inputsOut(modules)} and leave ${it} out. The pins may hold a charge for some seconds: do not touch ` +
      'them. Touch nothing at the output either, until the meter has shown that it is discharged.',
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

/** Before the first measurement the output is freed as well: by now it has been shown to be discharged. */
export function leadsTogether(when: 'before' | 'after', modules: Modules): Handwork {
  const freed =
    modules.length === 1
      ? 'The output is discharged: take its leads off the load and off anything else. '
      : 'The outputs are discharged: take each off the load, off its ballast and off the others, so that none touches another. ';
  return {
    name: 'leads-together',
    text:
      (when === 'before' ? freed : '') +
      "Take the meter's leads off and join their two tips, clipped or held together firmly, until the next question.",
    act: 'leads together',
  };
}

export const leadsApart: Handwork = {
  name: 'leads-apart',
  text: "Lay the tips of the meter's leads apart on something that does not conduct, touching nothing, until the next question.",
  act: 'leads apart',
};

/** The plug is out, and it is the plug that is touched: nothing is ever measured on live mains. */
export function probeEarth(module: Module, alone: boolean): Handwork {
  const { name, protectionClass, input } = module;
  const out =
    input === 'mains' ? `The plug of ${name} is out of the socket` : `The input of ${name} is off its source`;
  const joined =
    protectionClass === 'I'
      ? ''
      : ' It has no earth of its own: first join what is named next with clip leads.';
  return {
    name: `probe-earth-${name}`,
    text:
      `${out} and stays out.${joined} Clip or hold one of the meter's tips on ${earthPoint(module)}, ` +
      'and the other on the 0 V of its output, until the next question.',
    act: alone ? 'probe earth and 0 V' : `probe earth and 0 V of ${name}`,
  };
}

export const probesBack: Handwork = {
  name: 'probe-output',
  text: "Everything still unplugged: take off any clip leads, put the output's leads back where they were, and the meter's probes where the bench file has them.",
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
