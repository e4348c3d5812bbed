import type { Suite } from './suite.js';

/**
 * The suite of a run of which there is nothing to judge: one that has not ended yet, one that did not begin, one
 * whose record can't be read. It is an error, so that a run that vanished is never taken for one that passed.
 */
export function unfinishedSuite(
  {
    name,
    procedure,
    modules,
  }: { readonly name: string; readonly procedure: string; readonly modules: string },
  type: 'not-ended' | 'not-begun' | 'not-read',
  message: string,
  now: Date,
): Suite {
  return {
    name,
    began: now.toISOString(),
    lasted: 0,
    properties: [
      ['module', modules],
      ['procedure', procedure],
      ['ended', type],
    ],
    cases: [{ name: 'the run', group: `${modules}.${procedure}`, came: { kind: 'error', type, message } }],
  };
}
