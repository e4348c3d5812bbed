import { execFile } from 'node:child_process';
import { readdirSync } from 'node:fs';
import { availableParallelism, cpus } from 'node:os';
import { fileURLToPath } from 'node:url';
import { parseArgs, promisify } from 'node:util';
import { chosenFrom } from './chosen.js';
import { type Benchmark, type Figure, reached } from './figure.js';
import { figuresAsTable } from './table.js';

/**
 * `npm run bench`: measures how fast railproof is, each figure against a floor or a rival in the same run. One JSON
 * object goes to standard output, the table to standard error; `--only <name>` measures one file of this folder.
 * Exit status 1 where a figure does not reach its goal.
 */
const { values } = parseArgs({ options: { only: { type: 'string' }, alone: { type: 'string' } } });

if (values.alone === undefined) await measureChosen(values.only);
else process.stdout.write(JSON.stringify(await (await benchmark(values.alone))()));

async function measureChosen(only: string | undefined): Promise<void> {
  const chosen = chosenFrom(allNames(), only);
  if (chosen.kind === 'unknown') {
    process.stderr.write(`${chosen.message}\n`);
    process.exitCode = 64;
  } else await measure(chosen.names);
}

async function measure(names: readonly string[]): Promise<void> {
  const figures: Figure[] = [];
  for (const [index, name] of names.entries()) {
    process.stderr.write(`${index + 1} of ${names.length}: ${name}\n`);
    figures.push(...(await inProcessOfItsOwn(name)));
  }
  const machine = { node: process.version, processor: cpus()[0]?.model, cores: availableParallelism() };
  process.stderr.write(`\n${figuresAsTable(figures)}`);
  process.stdout.write(
    `${JSON.stringify({ format: 'railproof/speed 1', machine, figures: figures.map(told) }, null, 2)}\n`,
  );
  if (figures.some((figure) => figure.kind === 'measured' && !reached(figure))) process.exitCode = 1;
}

/** With a heap and compiled code that no other benchmark has been at. */
async function inProcessOfItsOwn(name: string): Promise<Figure[]> {
  const here = fileURLToPath(import.meta.url);
  const child = promisify(execFile)(process.execPath, ['--expose-gc', here, '--alone', name], {
    maxBuffer: 1 << 26,
  });
  child.child.stderr?.pipe(process.stderr);
  return JSON.parse((await child).stdout) as Figure[];
}

async function benchmark(name: string): Promise<Benchmark> {
  return ((await import(`./benchmarks/${name}.js`)) as { readonly default: Benchmark }).default;
}

function allNames(): readonly string[] {
  return readdirSync(new URL('benchmarks/', import.meta.url))
    .filter((file) => file.endsWith('.js'))
    .map((file) => file.slice(0, -'.js'.length))
    .sort();
}

function told(figure: Figure): object {
  return figure.kind === 'skipped' ? figure : { ...figure, reached: reached(figure) };
}
