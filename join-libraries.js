import { readdirSync } from 'node:fs';
import { build } from 'rolldown';

// Last step of the build: each library of src/libraries becomes one file with only what is used of it, where tsc
// wrote a file that names the library. Opening a hundred files takes longer than all that a short command does.
for (const file of readdirSync('src/libraries')) {
  await build({
    input: `src/libraries/${file}`,
    platform: 'node',
    output: {
      file: `dist/libraries/${file.replace(/\.ts$/, '.js')}`,
      format: 'esm',
      sourcemap: true,
      banner: '/* Joined from a library; its licence lies in its own package in node_modules. */',
    },
  });
}
