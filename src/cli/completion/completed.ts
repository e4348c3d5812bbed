/** What can stand in one place of a command line: these words, and what the file system has. */
export interface Completed {
  readonly words: readonly Word[];
  readonly paths: 'files' | 'folders' | 'none';
}

/** A word that can be typed, and what it means. */
export interface Word {
  readonly word: string;
  readonly about: string;
}

export interface CompletedOption {
  /** `-h` and `--help`. */
  readonly flags: readonly string[];
  readonly about: string;
  /** Undefined where it takes none. */
  readonly value: Completed | undefined;
  /** It takes all words up to the next option. */
  readonly isRepeated: boolean;
}

export interface CompletedCommand extends Word {
  readonly options: readonly CompletedOption[];
  readonly places: readonly Completed[];
  /** The last place takes all words that are left. */
  readonly isLastRepeated: boolean;
}

/** All that can be typed after the name of a program. */
export interface CompletedProgram {
  readonly name: string;
  readonly options: readonly CompletedOption[];
  readonly commands: readonly CompletedCommand[];
}

/** An option's value or a command's place, by a name that a script asks for: `run --bench`, `schema 1`. */
export interface NamedPlace {
  readonly name: string;
  readonly completed: Completed;
}

export function optionValues({ commands }: CompletedProgram): readonly NamedPlace[] {
  return commands.flatMap(({ word, options }) =>
    options.flatMap(({ flags, value }) =>
      value === undefined ? [] : flags.map((flag) => ({ name: `${word} ${flag}`, completed: value })),
    ),
  );
}

/** The options that take more than one word. */
export function repeatedOptions({ commands }: CompletedProgram): readonly string[] {
  return commands.flatMap(({ word, options }) =>
    options
      .filter(({ isRepeated }) => isRepeated)
      .flatMap(({ flags }) => flags.map((flag) => `${word} ${flag}`)),
  );
}

/** The places of commands, counted from 1; one that is repeated bears a `+`. */
export function commandPlaces({ commands }: CompletedProgram): readonly NamedPlace[] {
  return commands.flatMap((command) =>
    command.places.map((completed, index) => ({ name: placeName(command, index), completed })),
  );
}

/** `compare 2`, `check +`. @param index counted from 0 */
export function placeName({ word, places, isLastRepeated }: CompletedCommand, index: number): string {
  return `${word} ${isLastRepeated && index === places.length - 1 ? '+' : index + 1}`;
}
