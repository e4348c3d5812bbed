import type { Form } from '../../arrangement/build.js';
import { listed } from '../../quantity/listed.js';

/** `K1 and K2 side by side`, `K1, K2 and K3 in a stack, the lowest first`; what is within another in brackets. */
export function formInWords(form: Form): string {
  if (form.kind === 'module') return form.name;
  const parts = form.of.map((part) => (part.kind === 'module' ? part.name : `(${formInWords(part)})`));
  if (parts.length < 2) return parts.join('');
  return form.kind === 'group'
    ? `${listed(parts)} side by side`
    : `${listed(parts)} in a stack, the lowest first`;
}

/** `K1 ∥ K2`, `K1 + K2`, `(K1 ∥ K2) + (K3 ∥ K4)`. */
export function formInSigns(form: Form): string {
  if (form.kind === 'module') return form.name;
  const parts = form.of.map((part) =>
    part.kind === 'module' || part.of.length === 1 ? formInSigns(part) : `(${formInSigns(part)})`,
  );
  return parts.join(form.kind === 'group' ? ' ∥ ' : ' + ');
}
