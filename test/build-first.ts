import { execFileSync } from 'node:child_process';
import { readdirSync, statSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';

const root = fileURLToPath(new URL('..', import.meta.url));

/** The command line is tested as it is installed; a build older than the sources would test yesterday. */
export default function buildFirst(): void {
  if (newestIn('src') <= builtAt()) return;
  execFileSync('npm', ['run', 'build', '--silent'], { cwd: root, stdio: 'inherit' });
}

function newestIn(folder: string): number {
  return Math.max(
    ...readdirSync(join(root, folder), { recursive: true, encoding: 'utf8' }).map(
      (file) => statSync(join(root, folder, file)).mtimeMs,
    ),
  );
}

/** Every build writes its entry. */
function builtAt(): number {
  try {
    return statSync(join(root, 'dist', 'cli', 'main.js')).mtimeMs;
  } catch {
    return 0;
  }
}
