import type { Form } from './build.js';
import type { ModuleProfile } from './module-profile.js';

/** Side by side; a module alone is itself. */
export function groupOf(profiles: readonly ModuleProfile[]): Form {
  const of = profiles.map(({ name }) => ({ kind: 'module' as const, name }));
  const [first] = of;
  return first !== undefined && of.length === 1 ? first : { kind: 'group', of };
}
