import {
  type Completed,
  type CompletedCommand,
  type CompletedOption,
  type CompletedProgram,
  placeName,
} from './completed.js';
import { fishQuoted } from './shell-quoted.js';

/** Completion for fish, which is told option by option what there is; files and folders are its own affair. */
export function fishScript({ name, options, commands }: CompletedProgram): string {
  const complete = `complete -c ${name}`;
  const condition = (test: string, ...words: readonly string[]): string =>
    fishQuoted(`__${name}_${test} ${words.join(' ')}`);
  return `# fish completion of ${name}: made by '${name} completion fish'.

function __${name}_first
  test (count (commandline -opc)) -eq 1
end

function __${name}_in -a command
  set -l words (commandline -opc)
  test "$words[2]" = "$command"
end

# Whether this is the last option that was typed: all words up to the next one are its own.
function __${name}_after -a command option
  set -l words (commandline -opc)
  test "$words[2]" = "$command"; or return 1
  set -l typed (string match -- '-*' $words[3..])
  test "$typed[-1]" = "$option"
end

# Whether the cursor is at this place of the command; options, and the words of those that take one, do not count.
function __${name}_at -a command place
  set -l words (commandline -opc)
  test "$words[2]" = "$command"; or return 1
  set -l at 1
  set -l waiting no
  for word in $words[3..]
    if string match -q -- '-*' $word
      set waiting no
      contains -- $word $argv[3..]; and set waiting yes
    else if test $waiting = yes
      set waiting no
    else
      set at (math $at + 1)
    end
  end
  test $place = + -o $place = $at
end

${[
  `${complete} -f`,
  ...commands.map(
    ({ word, about }) =>
      `${complete} -n __${name}_first -a ${fishQuoted(fishQuoted(word))} -d ${fishQuoted(about)}`,
  ),
  ...options.map((option) => `${complete} -n __${name}_first ${optionText(option)}`),
  ...commands.flatMap((command) => [
    ...command.options.map(
      (option) => `${complete} -n ${condition('in', command.word)} ${optionText(option)}`,
    ),
    ...command.options.flatMap(({ flags, value, isRepeated }) =>
      isRepeated && value !== undefined
        ? flags.map((flag) => `${complete} -n ${condition('after', command.word, flag)} ${placeText(value)}`)
        : [],
    ),
    ...command.places.map(
      (place, index) => `${complete} -n ${condition('at', whereIs(command, index))} ${placeText(place)}`,
    ),
  ]),
].join('\n')}
`;
}

/** `run 1 --bench --module`: the command, the place, and the options that take a word. */
function whereIs(command: CompletedCommand, index: number): string {
  const taking = command.options.filter(({ value }) => value !== undefined).flatMap(({ flags }) => flags);
  return [placeName(command, index), ...taking].join(' ');
}

function optionText({ flags, about, value }: CompletedOption): string {
  const names = flags.map((flag) => (flag.startsWith('--') ? `-l ${flag.slice(2)}` : `-s ${flag.slice(1)}`));
  const taken = value === undefined ? [] : ['-r', placeText(value)];
  return [...names, ...taken, '-d', fishQuoted(about)].join(' ');
}

function placeText({ words, paths }: Completed): string {
  const list = words.map(({ word }) => fishQuoted(word));
  const folders = paths === 'folders' ? ['(__fish_complete_directories (commandline -ct))'] : [];
  const offered = [...list, ...folders];
  return [
    paths === 'files' ? '-F' : '-f',
    ...(offered.length === 0 ? [] : ['-a', fishQuoted(offered.join(' '))]),
  ].join(' ');
}
