import { Command, CommanderError, Option } from 'commander';
import { exitCodeOf, exitCodes, type ExitCode } from '../errors/railproof-error.js';
import { printableLines } from '../quantity/printable.js';
import type { ShownAs } from './build-shown.js';
import type { CombineOptions } from './combine.js';
import type { CompareOptions } from './compare.js';
import type { DriversOptions } from './drivers.js';
import { errorText } from './error-text.js';
import { exitStatusList } from './exit-status-words.js';
import { helpExample, helpItem, helpUsage } from './help-item.js';
import { packageFacts, troubleshootingPage } from './package-facts.js';
import type { ReportOptions } from './report.js';
import type { RunOptions } from './run-wanted.js';
import { say } from './say.js';
import type { SelectOptions } from './select.js';
import type { Streams } from './streams.js';

/**
 * The command line. Each command is a file of its own that is loaded only when it is called, so that
 * `--version` costs next to nothing. Results go to stdout, talk to stderr.
 */
export async function main(argv: readonly string[], streams: Streams): Promise<ExitCode> {
  let status: ExitCode = exitCodes.conforms;
  const program = commands(streams, (result) => {
    status = result;
  });
  try {
    await program.parseAsync([...argv], { from: 'user' });
    return status;
  } catch (error) {
    if (error instanceof CommanderError) return error.exitCode === 0 ? exitCodes.conforms : exitCodes.usage;
    say(streams.stderr, errorText(error));
    return exitCodeOf(error);
  }
}

function commands(streams: Streams, done: (status: ExitCode) => void): Command {
  const program = new Command('railproof')
    .description(
      'Measures what a power-supply module really delivers, on an electronic load and a meter, and says how hard it may be worked.',
    )
    .version(packageFacts().version)
    .exitOverride()
    .configureOutput({
      writeOut: (text) => streams.stdout.write(text),
      writeErr: (text) => streams.stderr.write(printableLines(text)),
    })
    .showHelpAfterError('(railproof help <command> shows examples)')
    .addHelpText('after', firstSteps)
    .configureHelp({
      formatItem: helpItem,
      commandUsage: (called) => helpUsage(called, streams.stdout.columns || 80),
    })
    .addHelpText('after', () => exitStatusList(Math.min(streams.stdout.columns || 80, 80)));

  const command = (usage: string, description: string, example: string): Command =>
    program
      .command(usage)
      .description(description)
      .addHelpText('after', () => helpExample(example, streams.stdout.columns))
      .showHelpAfterError(`(railproof help ${usage.replace(/ .*/, '')} shows an example)`);
  const json = (): Option => new Option('--json', 'print one JSON object instead of text');
  const junit = (): Option =>
    new Option(
      '--junit <file>',
      'keep the decisions as JUnit XML, for what reads the results of tests: junit.xml',
    );
  const ballast = (): Option =>
    new Option(
      '--ballast <resistance>',
      'in series with each module, "51 mΩ" (or "51 mohm"); chosen when left out',
    );
  const imbalance = (): Option =>
    new Option(
      '--imbalance <share>',
      'the most that shares may differ, by which a ballast is chosen; "10 %" when left out',
    );
  const tolerance = (): Option =>
    new Option('--resistor-tolerance <share>', 'of the ballasts; "1 %" when left out');
  const sheet = (): Option =>
    new Option('--sheet <file>', 'keep a build sheet, a page with circuit, parts and charts: sheet.html');

  command(
    'run [procedure]',
    'perform a procedure on a module: a shipped one by its name, or a file',
    'railproof run real-limit --bench fixtures/benches/nursery.yaml --module fixtures/modules/K1.yaml',
  )
    .option('--bench <file>', 'the bench: instruments, leads, hard limits')
    .option('--module <file...>', 'the module under test; repeated, in the order of the circuit')
    .option(
      '--resume <run>',
      'go on with a run that was broken off, at its first unfinished step, with the files that its record holds; --bench only where it is at another address now',
    )
    .option('--runs <folder>', 'where records are kept; ./runs, or beside the record that is resumed')
    .option('--baseline <run>', 'judge also what changed since this earlier record')
    .option(
      '--tolerance <file>',
      'how far it may be from the baseline: a shipped tolerance by its name, or a file',
    )
    .option('--yes', 'acknowledge wiring and cautions beforehand (for unattended benches)')
    .option(
      '--view',
      'serve a page on this machine that shows the run, and on which it is answered and stopped; its address opens once',
    )
    .option('--trace', 'keep every byte and when it came with the record, so that the run can be played back')
    .option('--dry-run', 'show what would be done, and touch nothing')
    .addOption(junit())
    .addOption(json())
    .action(async (procedure: string | undefined, options: RunOptions) => {
      const { run } = await import('./run.js');
      done(await run({ ...options, procedure }, streams));
    });

  command(
    'analyse <run>',
    'findings and decisions again, from the record',
    'railproof analyse fixtures/runs/20261130T091500Z-K1-real-limit',
  )
    .option('--strict', 'refuse a record that was cut off or damaged')
    .addOption(junit())
    .addOption(json())
    .action(async (run: string, options: { strict?: boolean; json?: boolean; junit?: string }) => {
      const { analyseRecord } = await import('./analyse.js');
      done(await analyseRecord({ run, ...options }, streams));
    });

  command(
    'report <run>',
    'the report of a record, a page with charts and uncertainty budgets, to be read, printed and signed',
    'railproof report fixtures/runs/20261130T091500Z-K1-real-limit --to report.html',
  )
    .option('--to <file>', 'where the page goes; report.html in the folder of the record when left out')
    .option('--open', 'show it with what this system opens pages with')
    .action(async (run: string, options: ReportOptions) => {
      const { report } = await import('./report.js');
      done(await report(run, options, streams));
    });

  command(
    'compare <earlier> <later>',
    'two records side by side: what changed, what did not, what can not be told',
    'railproof compare fixtures/runs/20261130T091500Z-K1-real-limit fixtures/runs/20261130T091500Z-K1-real-limit',
  )
    .option(
      '--tolerance <file>',
      'what must have changed and what must not: a shipped tolerance by its name, or a file',
      'unchanged',
    )
    .option('--page <file>', 'keep a page with the curves of both laid over each other: comparison.html')
    .option('--open', 'show the page with what this system opens pages with')
    .addOption(junit())
    .addOption(json())
    .action(async (earlier: string, later: string, options: CompareOptions) => {
      const { compareRecords } = await import('./compare.js');
      done(await compareRecords({ earlier, later, ...options }, streams));
    });

  command(
    'combine <run...>',
    'what modules come to side by side or one upon the other, from their records, and whether that may be built',
    'railproof combine --parallel fixtures/runs/20261130T091500Z-K1-real-limit fixtures/runs/20261202T034336Z-K2-real-limit',
  )
    .option('--parallel', 'side by side, a ballast in series with each; this or --series')
    .option('--series', 'one upon the other, the lowest first; this or --parallel')
    .option('--load <current>', 'what they are to feed, "6 A"; what is recommended when left out')
    .addOption(ballast())
    .addOption(imbalance())
    .addOption(tolerance())
    .addOption(sheet())
    .addOption(json())
    .action(async (runs: string[], options: CombineOptions) => {
      const { combine } = await import('./combine.js');
      done(await combine(runs, options, streams));
    });

  command(
    'stages <file>',
    'a supply whose modules are joined otherwise as its output rises: what it feeds, and whether its switching is safe',
    'railproof stages fixtures/stages/valve-bench.yaml',
  )
    .addOption(sheet())
    .addOption(json())
    .action(async (file: string, options: ShownAs) => {
      const { stages } = await import('./stages.js');
      done(await stages(file, options, streams));
    });

  command(
    'select <folder...>',
    'which modules of a drawer of records go together best, and by how much',
    'railproof select fixtures/runs --group 2 --supplies 2',
  )
    .option('--group <number>', 'modules side by side in each place; 1 when left out')
    .option('--stack <number>', 'places one upon the other; 1 when left out')
    .option('--supplies <number>', 'alike supplies out of the one drawer; 1 when left out')
    .addOption(ballast())
    .addOption(imbalance())
    .addOption(tolerance())
    .addOption(sheet())
    .addOption(json())
    .action(async (folders: string[], options: SelectOptions) => {
      const { select } = await import('./select.js');
      done(await select(folders, options, streams));
    });

  command(
    'new <kind> [file]',
    'a bench, module or procedure file by a few questions, which says what each line means; finds the instruments',
    'railproof new bench bench.yaml',
  ).action(async (kind: string, file: string | undefined) => {
    const { newFile } = await import('./new.js');
    done(await newFile({ kind, file }, streams));
  });

  command(
    'check <file...>',
    'are these files right? Prints each mistake with its line and column',
    'railproof check fixtures/benches/nursery.yaml fixtures/modules/K1.yaml',
  ).action(async (files: string[]) => {
    const { check } = await import('./check.js');
    done(await check(files, streams));
  });

  command(
    'drivers',
    'the shipped instrument drivers; --match finds the one for an instrument, --try walks through one, input kept off',
    'railproof drivers --try load-input-scpi --connection replay:fixtures/dialogues/load-input-scpi.jsonl',
  )
    .option(
      '--match <address>',
      'which shipped driver fits the instrument at this address; asks only what does no harm',
    )
    .option('--try <driver>', 'a shipped driver by its name, or a file')
    .option(
      '--connection <address>',
      'where the instrument is: tcp://host:port, serial:path?baud=9600 or replay:file',
    )
    .option('--channel <number>', 'of an instrument with several; the lowest when left out')
    .option(
      '--write <name>',
      'keep what came of it: <name>.yaml, the driver adapted to this instrument, and <name>.jsonl, every byte, which replay: plays',
    )
    .addOption(json())
    .action(async (options: DriversOptions) => {
      const { drivers } = await import('./drivers.js');
      done(await drivers(options, streams));
    });

  command('ports', 'serial ports of this machine', 'railproof ports')
    .addOption(json())
    .action(async (options: { json?: boolean }) => {
      const { ports } = await import('./ports.js');
      done(await ports(options, streams));
    });

  command(
    'simulate <bench>',
    'serve a simulated bench in real time, on loopback TCP or on ptys; prints the bench file to use with it',
    'railproof simulate fixtures/benches/nursery.yaml > live.yaml',
  )
    .option('--pty', 'on pseudo-terminals, as serial instruments (needs socat)')
    .option(
      '--acts',
      'do what is typed here, a line each, as hands at the bench would: unplug K1, plug in K1',
    )
    .action(async (bench: string, options: { pty?: boolean; acts?: boolean }) => {
      const { simulate } = await import('./simulate.js');
      done(await simulate({ bench, ...options }, streams));
    });

  command(
    'safe',
    'make a bench safe now: the load off, then the source where there is one, and read back',
    'railproof safe --bench fixtures/benches/nursery.yaml',
  )
    .requiredOption('--bench <file>', 'the bench')
    .action(async (options: { bench: string }) => {
      const { safe } = await import('./safe.js');
      done(await safe(options, streams));
    });

  command('runs [folder]', 'the records here', 'railproof runs fixtures/runs')
    .addOption(
      new Option(
        '--csv',
        'print the findings of all records for a spreadsheet, a row each, worked out again: > findings.csv',
      ).conflicts('json'),
    )
    .addOption(json())
    .action(async (folder: string | undefined, options: { json?: boolean; csv?: boolean }) => {
      const { runs } = await import('./runs.js');
      done(await runs({ folder: folder ?? 'runs', ...options }, streams));
    });

  command(
    'schema [kind]',
    'a JSON Schema: of a kind of file, by which an editor completes and checks it, or of what --json prints; without a kind, all there are',
    'railproof schema bench > bench.schema.json',
  ).action(async (kind: string | undefined) => {
    const { schema } = await import('./schema.js');
    done(schema(kind, streams));
  });

  command(
    'completion <shell>',
    'a script by which bash, zsh or fish completes what is typed: commands, options, what is shipped, files',
    'railproof completion bash > ~/.local/share/bash-completion/completions/railproof',
  ).action(async (shell: string) => {
    const { completion } = await import('./completion.js');
    done(await completion(shell, program, streams));
  });

  return program;
}

const firstSteps = `
To begin:
  railproof new bench    asks what is on the bench, or makes one up
  railproof new module   asks what the label of the module says
  railproof run quick-look --bench bench.yaml --module K1.yaml --dry-run

What puzzles you at the bench, by what you see:
  ${troubleshootingPage()}
`;
