import { exitCodes } from '../errors/railproof-error.js';
import { wordWrap } from '../quantity/word-wrap.js';

/** What each exit status says; the README says it in the same words. */
export const exitStatusWords: Readonly<Record<keyof typeof exitCodes, string>> = {
  conforms: 'conforms, or nothing to judge, or may be built',
  doesNotConform:
    'does not conform, or changed, or must not be built, or is recommended for less than the load asked for, or no driver fits',
  undecided: 'undecided, or nobody can tell',
  stopped: 'stopped by a guard or by the operator',
  usage: 'usage',
  badFile: 'bad file',
  missingFile: 'missing file, or one that may not be read',
  instrument: 'instrument unreachable or lost, or the load not confirmed to be off',
  bug: 'a fault of ours',
  inputOutput: 'the record or the output could not be written',
};

/** The list for the help, in lines no longer than the width. */
export function exitStatusList(width: number): string {
  const names = Object.keys(exitCodes) as readonly (keyof typeof exitCodes)[];
  const lines = names.map((name) => {
    const status = String(exitCodes[name]).padStart(4);
    return wordWrap(exitStatusWords[name], width - 6)
      .split('\n')
      .map((line, index) => `${index === 0 ? status : '    '}  ${line}`)
      .join('\n');
  });
  return `Exit status:\n${lines.join('\n')}`;
}
