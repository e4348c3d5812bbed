import type { ModuleProfile } from '../../arrangement/module-profile.js';
import { formatExact } from '../../quantity/format-quantity.js';
import type { Style } from '../style.js';
import { prose } from './prose.js';

/** What it is, and of what: each module with its label, those that are alike together. */
export function headingText(title: string, modules: readonly ModuleProfile[], style: Style): string {
  const alike = new Map<string, string[]>();
  for (const module of modules) {
    const plate = plateOf(module);
    alike.set(plate, [...(alike.get(plate) ?? []), module.name]);
  }
  const plates = [...alike].map(([plate, names]) => prose(plate, `${names.join(', ')}: `));
  return [style.strong(prose(title)), ...plates].join('\n');
}

function plateOf({ description, label }: ModuleProfile): string {
  const said = [formatExact(label.voltage, 'voltage'), formatExact(label.current, 'current')]
    .map(({ value, unit }) => `${value} ${unit}`)
    .join(', ');
  return [description, `nameplate ${said}`].filter((part) => part !== '').join(' · ');
}
