import { readFileSync } from 'node:fs';

/** What this program is called, and which version of it this is. */
export function packageFacts(): { readonly name: string; readonly version: string } {
  const text = readFileSync(new URL('../../package.json', import.meta.url), 'utf8');
  const { name, version } = JSON.parse(text) as { name: string; version: string };
  return { name, version };
}
