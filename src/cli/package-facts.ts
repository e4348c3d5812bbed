import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';

/** What this program is called, and which version of it this is. */
export function packageFacts(): { readonly name: string; readonly version: string } {
  const text = readFileSync(new URL('../../package.json', import.meta.url), 'utf8');
  const { name, version } = JSON.parse(text) as { name: string; version: string };
  return { name, version };
}

/** Where the page stands that goes by what is seen at the bench. */
export function troubleshootingPage(): string {
  return fileURLToPath(new URL('../../TROUBLESHOOTING.md', import.meta.url));
}
