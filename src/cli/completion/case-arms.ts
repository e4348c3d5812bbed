import { type CompletedProgram, optionValues, repeatedOptions } from './completed.js';
import { shellQuoted } from './shell-quoted.js';

/** A function of bash or zsh by which an option is known that takes one word, or `many`. */
export function takesFunction(program: CompletedProgram): string {
  return `# Whether the option takes a word after it; 'many', where it takes all up to the next option.
_${program.name}_takes() {
  case "$1" in
${takingArms(program)}    *) return 1 ;;
  esac
}`;
}

function takingArms(program: CompletedProgram): string {
  return [
    arm(repeatedOptions(program), 'many=yes'),
    arm(
      optionValues(program).map(({ name }) => name),
      'many=',
    ),
  ].join('');
}

function arm(names: readonly string[], then: string): string {
  return names.length === 0 ? '' : `    ${names.map(shellQuoted).join(' | ')}) ${then} ;;\n`;
}

/**
 * How both go through the words that stand before the cursor: which command it is, which option waits for a word, how
 * many places are taken. `word` is the one under the cursor.
 */
export const goThroughWords = (name: string): string => `    if [[ $before == '=' ]]; then
      continue
    elif [[ -z $rest && $before == -- ]]; then
      rest=yes option=
    elif [[ -z $rest && $before == -?* ]]; then
      option=
      _${name}_takes "$command $before" && option=$before
    elif [[ -n $option ]]; then
      [[ -n $many ]] || option=
    elif [[ -z $command ]]; then
      command=$before
    else
      place=$((place + 1))
    fi`;
