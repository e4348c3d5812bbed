import { rm } from 'node:fs/promises';
import { junitMark, junitText } from '../report/junit/junit-text.js';
import type { Suite } from '../report/junit/suite.js';
import { checkKept, FileNotKeptError, type KeptKind, writeKept } from './kept-file.js';

const junitFile: KeptKind = {
  what: 'JUnit report',
  named: 'an XML file',
  ending: '.xml',
  mark: junitMark,
  example: '--junit junit.xml',
  code: 'JUNIT_NOT_KEPT',
};

/** Keeps a suite as a JUnit report; where none is wanted none is worked out. */
export type KeepJunit = (suite: () => Suite) => Promise<void>;

/**
 * Makes the place ready where a suite is to go: an older report there is taken away, so that it is not taken for
 * that of a command which then fails. What is no JUnit report is left alone.
 * @throws FileNotKeptError
 */
export async function placeForJunit(path: string | undefined): Promise<KeepJunit> {
  if (path === undefined) return () => Promise.resolve();
  checkKept(path, junitFile);
  await rm(path, { force: true }).catch((cause: unknown) => {
    throw new FileNotKeptError(path, junitFile, 'unwritable', cause);
  });
  return async (suite) => writeKept(path, await junitText([suite()]), junitFile);
}
