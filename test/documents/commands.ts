import { railproof } from '../cli/in-process.js';

/** A command as a document shows it, without what the shell makes of it. */
export type Named = readonly string[];

/** The lines of each block that a reader pastes into a shell: those without a language, and those for one. */
export function blocksIn(markdown: string): readonly (readonly string[])[] {
  return [...markdown.matchAll(fenced)].flatMap(([, language = '', block = '']) =>
    language === '' || language === 'sh' ? [block.split('\n').map((line) => line.trim())] : [],
  );
}

const fenced = /^[ ]*```(\w*)\n([^]*?)^[ ]*```$/gm;

/** The commands that a document names, in blocks and in the middle of a sentence. */
export function commandsIn(markdown: string): readonly Named[] {
  const spans = [...markdown.replace(fenced, '').matchAll(/`([^`\n]+)`/g)].map(([, span = '']) => span);
  return [...blocksIn(markdown).flat(), ...spans]
    .flatMap((line) => line.split(/ && | \| /))
    .flatMap((line) => {
      const words = wordsOf(line.replace(/^node dist\/cli\/main\.js/, 'railproof').replace(/ > .*$/, ''));
      return words[0] === 'railproof' && words.length > 1 ? [words.slice(1)] : [];
    });
}

/** As a shell would cut it, as far as documents go. */
function wordsOf(line: string): readonly string[] {
  return [...line.matchAll(/"([^"]*)"|'([^']*)'|(\S+)/g)].map(
    ([, one, two, three]) => one ?? two ?? three ?? '',
  );
}

/** What is wrong with a command, by the help of the program itself; undefined where it has the command and its options. */
export async function wrongWith([command = '', ...words]: Named): Promise<string | undefined> {
  if (command.startsWith('-') || command === 'help' || command === '…') return undefined;
  const { status, stdout } = await helpOf(command);
  if (status !== 0 || !stdout.startsWith(`Usage: railproof ${command}`)) return `there is no ${command}`;
  const known = new Set(stdout.match(/--[a-z][a-z-]*/g));
  const unknown = words.filter((word) => word.startsWith('--') && !known.has(word));
  return unknown.length === 0 ? undefined : `${command} has no ${unknown.join(', ')}`;
}

const helps = new Map<string, ReturnType<typeof railproof>>();

function helpOf(command: string): ReturnType<typeof railproof> {
  const help = helps.get(command) ?? railproof(command, '--help');
  helps.set(command, help);
  return help;
}
