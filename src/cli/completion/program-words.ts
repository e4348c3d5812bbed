import type { Argument, Command, Option } from 'commander';
import type { Completed, CompletedCommand, CompletedOption, CompletedProgram, Word } from './completed.js';

/** What is completed where a value of that name is due; undefined for a name that nobody thought of. */
export type ValuesOf = (command: string, flag: string | undefined, value: string) => Completed | undefined;

/**
 * All that can be typed after the name of a program, as the program itself knows it: no command and no option can be
 * forgotten. What its values are it does not know, and asks.
 * @throws RangeError for a value that nobody thought of
 */
export function programWords(program: Command, valuesOf: ValuesOf): CompletedProgram {
  const help = program.createHelp();
  const completed = (command: string, flag: string | undefined, value: string): Completed => {
    const found = valuesOf(command, flag, value);
    if (found === undefined)
      throw new RangeError(`nobody knows what completes ${command} ${flag ?? ''} ${value}`);
    return found;
  };
  const optionsOf = (command: Command): readonly CompletedOption[] =>
    help.visibleOptions(command).map((option) => ({
      flags: [option.short, option.long].filter((flag) => flag !== undefined),
      about: option.description,
      value: takesValue(option) ? completed(command.name(), option.long, valueNameOf(option)) : undefined,
      isRepeated: option.variadic,
    }));
  const commandOf = (command: Command): CompletedCommand => {
    const places = command.registeredArguments;
    return {
      word: command.name(),
      about: command.description(),
      options: optionsOf(command),
      places: places.map((place: Argument) => completed(command.name(), undefined, place.name())),
      isLastRepeated: places.at(-1)?.variadic === true,
    };
  };
  return {
    name: program.name(),
    options: optionsOf(program),
    commands: help.visibleCommands(program).map(commandOf),
  };
}

/** The commands of a program, as words. */
export function commandWords(program: Command): readonly Word[] {
  return program
    .createHelp()
    .visibleCommands(program)
    .map((command) => ({ word: command.name(), about: command.description() }));
}

function takesValue(option: Option): boolean {
  return option.required || option.optional;
}

/** `file` of `--module <file...>`. */
function valueNameOf({ flags }: Option): string {
  return /[<[]([^.>\]]+)/.exec(flags)?.[1] ?? '';
}
