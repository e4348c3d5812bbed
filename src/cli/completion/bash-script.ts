import { goThroughWords, takesFunction } from './case-arms.js';
import {
  commandPlaces,
  type Completed,
  type CompletedOption,
  type CompletedProgram,
  type NamedPlace,
  optionValues,
} from './completed.js';
import { onceEach, shellQuoted } from './shell-quoted.js';

/**
 * Completion for bash, from 3.2 on. The script only compares what was typed with the words it holds; nothing typed is
 * expanded or performed. Names of files are left to bash itself, which quotes what needs it.
 */
export function bashScript(program: CompletedProgram): string {
  const { name, options, commands } = program;
  return `# bash completion of ${name}: made by '${name} completion bash'.

${takesFunction(program)}

# What may stand there: the value of an option, a place of a command, or the words of all options.
_${name}_offer() {
  case "$1" in
${[...optionValues(program), ...commandPlaces(program)].map(offer).join('\n')}
${commands.map(({ word, options: own }) => flagsArm(`${word} -`, own)).join('\n')}
${flagsArm('-', options)}
    '') set -- ${commands.map(({ word }) => shellQuoted(word)).join(' ')} ; paths=none ;;
    *) set -- ; paths=none ;;
  esac
  local each
  for each; do
    [[ $each == "$word"* ]] && COMPREPLY+=("$each")
  done
  [[ \${#COMPREPLY[@]} -eq 0 && $paths == files ]] && compopt -o default 2>/dev/null
  [[ \${#COMPREPLY[@]} -eq 0 && $paths == folders ]] && compopt -o dirnames 2>/dev/null
  return 0
}

_${name}() {
  local word=\${COMP_WORDS[COMP_CWORD]} before= command= option= many= place=1 paths=none rest= i
  COMPREPLY=()
  # bash parts '--bench=file' at its '='.
  [[ $word == = ]] && word=
  for ((i = 1; i < COMP_CWORD; i++)); do
    before=\${COMP_WORDS[i]}
${goThroughWords(name)}
  done
  if [[ -n $option && ( -z $many || $word != -* ) ]]; then
    _${name}_offer "$command $option"
  elif [[ -z $rest && $word == -* ]]; then
    _${name}_offer "\${command:+$command }-"
  elif [[ -z $command ]]; then
    _${name}_offer ''
  else
    _${name}_offer "$command $place"
    [[ \${#COMPREPLY[@]} -eq 0 && $paths == none ]] && _${name}_offer "$command +"
  fi
}

complete -F _${name} ${name}
`;
}

function offer({ name, completed }: NamedPlace): string {
  return `    ${shellQuoted(name)}) set -- ${listed(completed)}; paths=${completed.paths} ;;`;
}

function listed({ words }: Completed): string {
  return words.map(({ word }) => `${shellQuoted(word)} `).join('');
}

function flagsArm(name: string, options: readonly CompletedOption[]): string {
  const flags = onceEach(options.flatMap((option) => option.flags));
  return `    ${shellQuoted(name)}) set -- ${flags.map(shellQuoted).join(' ')} ; paths=none ;;`;
}
