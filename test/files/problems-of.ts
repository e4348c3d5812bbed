import { BadFileError } from '../../src/files/file-error.js';

/** The message, a line for each problem, of what must be refused as a bad file. */
export function problemsOf(read: () => unknown): string[] {
  try {
    read();
  } catch (error) {
    if (error instanceof BadFileError) return error.message.split('\n');
    throw error;
  }
  throw new Error('this was accepted, and should not have been');
}
