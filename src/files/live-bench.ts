import { parseDocument } from 'yaml';

/**
 * The text of a bench file with the addresses of its instruments replaced, by role, and without the
 * section that says what is simulated: what is served is real to whoever uses it.
 */
export function withAddresses(text: string, addresses: Readonly<Record<string, string>>): string {
  const document = parseDocument(text);
  for (const [role, address] of Object.entries(addresses)) {
    document.setIn(['instruments', role, 'connection'], address);
  }
  document.deleteIn(['simulation']);
  return document.toString();
}
