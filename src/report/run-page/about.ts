import { asGiven } from '../../analysis/in-words.js';
import { spokenTime } from '../../quantity/spoken-time.js';
import type { RunHeader } from '../../record/run-header.js';
import { inMinutes } from '../in-minutes.js';
import { element, type Markup } from '../page/markup.js';
import { againstWhat, circuitInWords, plateInWords, takenOverInWords } from '../record-heading.js';
import { endedHow, type Result } from '../result.js';
import { code, type Fact, facts } from '../page/facts.js';

/** What was tested on what, by which procedure, when, how it ended and by which program: a line each. */
export function aboutRun(result: Result): Markup {
  const { header, evidence, run } = result;
  return facts([
    ...circuitInWords(header).map((text): Fact => ['Circuit', text]),
    ...header.modules.map((module): Fact => [module.name, moduleInWords(module)]),
    ['Procedure', procedureInWords(header)],
    ['Bench', [header.bench.name, header.bench.simulated && ' (simulated: no real module was measured)']],
    ['Tested', `${inMinutes(header.began)}, ${endInWords(result)}`],
    ...takenOverInWords(evidence).map((text): Fact => ['Earlier run', text]),
    ...againstWhat(header).map((text): Fact => ['Baseline', text]),
    ['Record', code(run)],
    ['Tested with', `${header.program.name} ${header.program.version}`],
  ]);
}

type Module = RunHeader['modules'][number];

function moduleInWords(module: Module): Markup {
  const { description, rated, protectionClass, input, outputIsolation, changes } = module;
  const ambient = rated.ambient === undefined ? '' : `, up to ${asGiven(rated.ambient, 'temperature')}`;
  const bears =
    outputIsolation === 'unknown'
      ? 'what its output bears to earth is unknown'
      : `its output bears ${asGiven(outputIsolation, 'voltage')} to earth`;
  const parts = [
    ...(description === '' ? [] : [description]),
    `label ${plateInWords(rated)}${ambient}`,
    `class ${protectionClass}, fed by ${input === 'mains' ? 'mains' : 'DC'}`,
    bears,
  ];
  return element(
    'span',
    {},
    parts.join('; '),
    changes.map(({ date, what }) => [element('br', {}), `Changed ${date}: ${what}`]),
  );
}

function procedureInWords({ procedure, files }: RunHeader): Markup {
  const file = files.find(({ kind }) => kind === 'procedure');
  return element(
    'span',
    {},
    procedure.name,
    file !== undefined && [', SHA-256 ', code(shortened(file.sha256))],
  );
}

/** Enough to tell files apart; the whole of it stands with the other files. */
function shortened(hash: string): string {
  return hash.length > 16 ? `${hash.slice(0, 16)}…` : hash;
}

const ends = {
  completed: 'ran to its end',
  stopped: 'was stopped',
  failed: 'failed',
  'cut-off': 'was cut off',
} as const;

function endInWords(result: Result): string {
  const { how } = endedHow(result);
  const { lasted } = result.evidence;
  return `${ends[how]} after ${spokenTime(lasted)}`;
}
