import { goThroughWords, takesFunction } from './case-arms.js';
import {
  commandPlaces,
  type CompletedOption,
  type CompletedProgram,
  type NamedPlace,
  optionValues,
  type Word,
} from './completed.js';
import { shellQuoted } from './shell-quoted.js';

/**
 * Completion for zsh: read with `source`, or kept as `_railproof` in a folder of `fpath`. As in bash, what was typed is
 * compared with words and nothing else; files are left to `_files`.
 */
export function zshScript(program: CompletedProgram): string {
  const { name, options, commands } = program;
  return `#compdef ${name}
# zsh completion of ${name}: made by '${name} completion zsh'.

${takesFunction(program)}

# What may stand there: the value of an option, a place of a command, or the words of all options.
_${name}_offer() {
  local -a offered
  case "$1" in
${[...optionValues(program), ...commandPlaces(program)].map(offer).join('\n')}
${commands.map(({ word, options: own }) => flagsArm(`${word} -`, own)).join('\n')}
${flagsArm('-', options)}
    '') offered=(${described(commands)}); paths=none ;;
    *) return 1 ;;
  esac
  (( \${#offered} )) && _describe -t words ${shellQuoted('word')} offered
  case "$paths" in
    files) _files ;;
    folders) _files -/ ;;
  esac
  return 0
}

_${name}() {
  local word=$words[CURRENT] before= command= option= many= place=1 paths=none rest= i
  for ((i = 2; i < CURRENT; i++)); do
    before=$words[i]
${goThroughWords(name)}
  done
  if [[ -z $rest && $word == --*=* ]]; then
    option=\${word%%=*}
    compset -P '*='
    _${name}_takes "$command $option" && _${name}_offer "$command $option"
  elif [[ -n $option && ( -z $many || $word != -* ) ]]; then
    _${name}_offer "$command $option"
  elif [[ -z $rest && $word == -* ]]; then
    _${name}_offer "\${command:+$command }-"
  elif [[ -z $command ]]; then
    _${name}_offer ''
  else
    _${name}_offer "$command $place" || _${name}_offer "$command +"
  fi
}

if [[ $funcstack[1] == _${name} ]]; then
  _${name} "$@"
else
  compdef _${name} ${name}
fi
`;
}

function offer({ name, completed }: NamedPlace): string {
  return `    ${shellQuoted(name)}) offered=(${described(completed.words)}); paths=${completed.paths} ;;`;
}

function flagsArm(name: string, options: readonly CompletedOption[]): string {
  const words = options.flatMap(({ flags, about }) => flags.map((word) => ({ word, about })));
  return `    ${shellQuoted(name)}) offered=(${described(words)}); paths=none ;;`;
}

/** `word:what it means`; a colon of the word itself is escaped. */
function described(words: readonly Word[]): string {
  return words
    .map(({ word, about }) => {
      const escaped = word.replace(/[\\:]/g, '\\$&');
      return shellQuoted(about === '' ? escaped : `${escaped}:${about}`);
    })
    .join(' ');
}
