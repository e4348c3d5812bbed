import type { Builder, TestCase } from 'junit-report-builder';
import type { Case, Suite } from './suite.js';

/** What stands in the root of a JUnit file of ours, by which it is known among other files. */
export const junitMark = '<testsuites name="railproof"';

/**
 * Suites as a JUnit XML file. That format has no standard: elements and attributes are those that all its readers
 * know (from memory): `testsuites` › `testsuite` (name, timestamp, time, counts) › `properties`, then `testcase`
 * (name, classname, time) › `failure` or `error` (type, message) or `skipped`, then `system-out`. Time belongs to
 * a record, and not to its decisions: it stands at the suite. What XML can't hold is replaced.
 */
export async function junitText(suites: readonly Suite[]): Promise<string> {
  const file = (await builder()).newBuilder().name('railproof');
  for (const { name, began, lasted, properties, cases } of suites) {
    const suite = file.testSuite().name(asXml(name)).timestamp(asXml(began)).time(lasted);
    for (const [key, value] of properties) suite.property(asXml(key), asXml(value));
    for (const one of cases) tell(one, suite.testCase());
  }
  return `${file.build()}\n`;
}

/** Loaded by whoever writes such a file, and only then. What its types call the default is one step further in. */
async function builder(): Promise<Builder> {
  const { default: junit } = await import('junit-report-builder');
  return junit as unknown as Builder;
}

function tell({ name, group, came }: Case, testCase: TestCase): void {
  testCase.name(asXml(name)).className(asXml(group)).time(0);
  switch (came.kind) {
    case 'passed':
      testCase.standardOutput(asXml(came.text));
      return;
    case 'failure':
      testCase.failure(asXml(came.message), came.type);
      return;
    case 'error':
      testCase.error(asXml(came.message), came.type);
      return;
    case 'skipped':
      testCase.skipped().standardOutput(asXml(came.text));
      return;
  }
}

/**
 * A text with what XML 1.0 (section 2.2, Char) does not allow, controls and halves of a sign, replaced and not
 * dropped: instruments do send such, and a name without them would be another name.
 */
export function asXml(text: string): string {
  // eslint-disable-next-line no-control-regex
  return text.replace(/[\p{Cs}\u0000-\u0008\u000b\u000c\u000e-\u001f\ufffe\uffff]/gu, '\ufffd');
}
