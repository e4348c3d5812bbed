/* eslint-disable @typescript-eslint/no-deprecated -- what takes their place would be two more packages */
import { XMLParser, XMLValidator } from 'fast-xml-parser';

/** A JUnit file as whatever reads test results has it. */
export interface SuiteRead {
  readonly name: string;
  readonly timestamp: string;
  readonly time: string;
  readonly counts: Counts;
  readonly properties: readonly (readonly [name: string, value: string])[];
  readonly cases: readonly CaseRead[];
}

export interface Counts {
  readonly tests: number;
  readonly failures: number;
  readonly errors: number;
  readonly skipped: number;
}

export interface CaseRead {
  readonly name: string;
  readonly group: string;
  readonly time: string;
  readonly came: 'passed' | 'failure' | 'error' | 'skipped';
  readonly type: string | undefined;
  readonly message: string | undefined;
  readonly out: string | undefined;
}

type Attributes = Readonly<Record<string, string>>;
type Node = Attributes & {
  readonly testsuite?: readonly Node[];
  readonly testcase?: readonly Node[];
  readonly properties?: { readonly property?: readonly Attributes[] };
  readonly failure?: Attributes;
  readonly error?: Attributes;
  readonly skipped?: string;
  readonly 'system-out'?: string;
};

const lists: ReadonlySet<string> = new Set(['testsuite', 'testcase', 'property']);

const parser = new XMLParser({
  ignoreAttributes: false,
  attributeNamePrefix: '',
  parseAttributeValue: false,
  parseTagValue: false,
  trimValues: false,
  // Without this it reads no &#xA;.
  htmlEntities: true,
  isArray: (name, _path, _leaf, isAttribute) => !isAttribute && lists.has(name),
});

/** What XML 1.0 allows in a document (5th edition, section 2.2, production 2). */
const legal = /^[\t\n\r\u0020-\ud7ff\ue000-\ufffd\u{10000}-\u{10ffff}]*$/u;

/** @throws where it is no XML 1.0, or no JUnit file. */
export function readJunit(text: string): { readonly counts: Counts; readonly suites: readonly SuiteRead[] } {
  if (!legal.test(text)) throw new Error('a character that XML 1.0 does not allow');
  const valid = XMLValidator.validate(text);
  if (valid !== true) throw new Error(valid.err.msg);
  const { testsuites } = parser.parse(text) as { readonly testsuites: Node };
  return { counts: countsOf(testsuites), suites: (testsuites.testsuite ?? []).map(suiteOf) };
}

function suiteOf(suite: Node): SuiteRead {
  return {
    name: suite['name'] ?? '',
    timestamp: suite['timestamp'] ?? '',
    time: suite['time'] ?? '',
    counts: countsOf(suite),
    properties: (suite.properties?.property ?? []).map(({ name = '', value = '' }) => [name, value]),
    cases: (suite.testcase ?? []).map(caseOf),
  };
}

function countsOf(node: Attributes): Counts {
  const count = (name: string): number => Number(node[name]);
  return {
    tests: count('tests'),
    failures: count('failures'),
    errors: count('errors'),
    skipped: count('skipped'),
  };
}

function caseOf(one: Node): CaseRead {
  const came = (['failure', 'error', 'skipped'] as const).filter((kind) => one[kind] !== undefined);
  if (came.length > 1) throw new Error(`${one['name'] ?? ''} came to ${came.join(' and ')}`);
  const told = one.failure ?? one.error;
  return {
    name: one['name'] ?? '',
    group: one['classname'] ?? '',
    time: one['time'] ?? '',
    came: came[0] ?? 'passed',
    type: told?.['type'],
    message: told?.['message'],
    out: one['system-out'],
  };
}

/** What the cases themselves come to, counted without a look at what the file says. */
export function counted(suites: readonly SuiteRead[]): Counts {
  const cases = suites.flatMap((suite) => suite.cases);
  const of = (kind: CaseRead['came']): number => cases.filter(({ came }) => came === kind).length;
  return { tests: cases.length, failures: of('failure'), errors: of('error'), skipped: of('skipped') };
}
