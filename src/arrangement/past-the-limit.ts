import { amps, volts } from '../analysis/in-words.js';
import type { LimitStyle, ModuleProfile } from './module-profile.js';

type Weak = Pick<ModuleProfile, 'name' | 'openCircuit' | 'droop' | 'usable' | 'limitStyle'>;

/**
 * What a string with a diode across each output does when more is asked of it than its weakest module gives, by
 * that module's limit style. Only one of constant current or power lets it sag; all others take their whole
 * voltage out of it at once.
 */
export function pastTheLimit(weakest: Weak, isSure: boolean): string {
  const { name, usable, limitStyle } = weakest;
  const who = isSure ? name : `${name} (or one that is as weak, the records can't tell)`;
  const where = `Past ${usable.bound === 'least' ? 'what was tried, ' : ''}${amps(usable.value)}`;
  return `${where} ${who} ${limitStyle === undefined ? unmeasured(name) : done(limitStyle.word, weakest)}.`;
}

function unmeasured(name: string): string {
  return `gives way first, and what it does there was not measured: reckon with the whole string going down, and run limit-shape on ${name}`;
}

function done(style: LimitStyle, { openCircuit, droop, usable }: Weak): string {
  const own = volts(Math.max(0, openCircuit.value - droop.value * usable.value));
  switch (style) {
    case 'constant-current':
      return `holds its current and lets its voltage give way: the string sags, by up to its ${own}, and comes back as soon as less is asked`;
    case 'constant-power':
      return `gives more current at ever less voltage: the string sags, by up to its ${own}, and comes back as soon as less is asked`;
    case 'foldback':
      return `folds back: its ${own} are gone from the string at once, which a load of constant current takes for the whole string going down, and stay gone until much less is asked`;
    case 'hiccup':
      return `switches off and tries again and again: its ${own} are gone from the string at each time, and the string goes down as a whole and comes up with it`;
    case 'latch-off':
      return `switches off for good: its ${own} are gone from the string, which goes down as a whole until its input is cycled`;
  }
}
