import { coverageOf } from '../../analysis/coverage-of.js';
import type { StepEvidence } from '../../analysis/evidence.js';
import type { Finding } from '../../analysis/finding.js';
import { taken } from '../../analysis/pooled-points.js';
import { formatInterval, formatQuantity } from '../../quantity/format-quantity.js';
import { listed } from '../../quantity/listed.js';
import type { Dimension } from '../../quantity/quantity.js';
import { element, type Markup } from '../page/markup.js';
import { bullets, section } from '../page/page.js';
import { table } from '../page/table.js';
import type { Result } from '../result.js';
import { counted, foundPlusMinus } from './in-words.js';

/** What each finding rests on: the readings, and where its uncertainty comes from. */
export function budgetsSection({ findings, evidence }: Result): Markup | undefined {
  if (findings.length === 0) return undefined;
  const behind = (finding: Finding): string => readingsInWords(evidence.steps, finding);
  const budgeted = findings.filter(({ budget }) => budget.length > 0);
  const others = findings.filter(({ budget }) => budget.length === 0);
  return section(
    'What each finding rests on',
    budgeted.length > 0 &&
      element(
        'p',
        { class: 'soft' },
        'Each line of a budget is a standard uncertainty in the unit of the finding, its sensitivity already in it. ' +
          'Kind A comes of the scatter of readings, kind B of anything else; the share is that of the variance. ' +
          'Degrees of freedom are ∞ where a value is taken as known (JCGM 100:2008, 4.2, 4.3, 5.1 and G.4).',
      ),
    alike(budgeted).map(([first, ...others]) => budgetOf([first, ...others], behind(first))),
    others.length > 0 && element('h3', {}, 'Without a budget: words, bounds and choices'),
    bullets(
      byStep(others).map(([first, ...rest]) => [
        listed([first, ...rest].map((finding) => `${finding.name} ${foundPlusMinus(finding)}`)),
        `. ${behind(first)}`,
      ]),
    ),
  );
}

type Alike = readonly [Finding, ...Finding[]];

/** What one finding took over from another whole has one budget with it. */
function alike(findings: readonly Finding[]): readonly Alike[] {
  return grouped(findings, ({ value, dimension, bound, step, budget }) =>
    JSON.stringify([value, dimension, bound, step, budget]),
  );
}

function byStep(findings: readonly Finding[]): readonly Alike[] {
  return grouped(findings, ({ step }) => String(step));
}

function grouped(findings: readonly Finding[], keyOf: (finding: Finding) => string): readonly Alike[] {
  const groups = new Map<string, [Finding, ...Finding[]]>();
  for (const finding of findings) {
    const key = keyOf(finding);
    const group = groups.get(key);
    if (group === undefined) groups.set(key, [finding]);
    else group.push(finding);
  }
  return [...groups.values()];
}

function budgetOf(findings: Alike, behind: string): Markup {
  const [finding] = findings;
  const { budget, dimension, standardUncertainty: combined } = finding;
  const names = listed(findings.map(({ name }) => name));
  const inUnit = (uncertainty: number): string => uncertaintyInWords(uncertainty, combined, dimension);
  const coverage = coverageOf(finding);
  return element(
    'div',
    { class: 'one' },
    element('h3', {}, element('span', {}, names), element('span', {}, foundPlusMinus(finding))),
    element('p', {}, intervalInWords(finding), ' ', behind),
    table(
      `Uncertainty budget of ${names}.`,
      [
        { heading: 'Source', as: 'name' },
        { heading: 'Kind' },
        { heading: 'Standard uncertainty', as: 'number' },
        { heading: 'Share', as: 'number' },
        { heading: 'Degrees of freedom', as: 'number' },
      ],
      [
        ...budget.map((line) => [
          line.name,
          line.kind,
          inUnit(line.uncertainty),
          shareInWords(line.uncertainty, combined),
          freedomInWords(line.degreesOfFreedom),
        ]),
        [
          'Together',
          '',
          combined === null ? '' : inUnit(combined),
          '100 %',
          coverage === undefined ? '' : freedomInWords(coverage.degreesOfFreedom),
        ],
      ],
    ),
  );
}

/** The interval and by what factor it comes of the budget. */
function intervalInWords(finding: Finding): string {
  const { value, interval, dimension } = finding;
  if (typeof value !== 'number' || interval === null || dimension === null) return '';
  const { low, high, unit } = formatInterval(value, ...interval, dimension);
  if (low === '' && high === '') return '';
  const coverage = coverageOf(finding);
  const by =
    coverage === undefined ? 'longer to one side, so by no one factor' : `k = ${coverage.factor.toFixed(2)}`;
  return `95 % from ${low === '' ? 'any' : low} to ${high === '' ? 'any' : high} ${unit}, ${by}.`;
}

function readingsInWords(steps: readonly StepEvidence[], { step: number }: Finding): string {
  const step = steps.find((each) => each.step === number);
  if (step === undefined) return '';
  const { points, readings, lines, kind } = step;
  const journal = `lines ${lines.first} to ${lines.last} of journal.jsonl`;
  return readings === 0
    ? `Step ${step.step}, ${kind}: no readings; ${journal}.`
    : `Step ${step.step}, ${kind}: ${counted(taken(points), 'point')}, ${counted(readings, 'reading')}; ` +
        `${journal}, the rows of step ${step.step} in readings.csv.`;
}

/** Below which a contribution is what adding and multiplying lose. */
const nothing = 1e-9;

function uncertaintyInWords(value: number, combined: number | null, dimension: Dimension | null): string {
  const seen = combined !== null && value < nothing * combined ? 0 : value;
  return dimension === null ? String(seen) : formatQuantity(seen, dimension, { significant: 2 });
}

function shareInWords(uncertainty: number, combined: number | null): string {
  if (combined === null || combined === 0) return '';
  const share = (uncertainty / combined) ** 2 * 100;
  if (share < nothing) return '0 %';
  return share < 0.1 ? 'below 0.1 %' : `${share.toFixed(1)} %`;
}

function freedomInWords(degrees: number): string {
  if (!Number.isFinite(degrees)) return '∞';
  return degrees > 1000 ? 'above 1000' : degrees.toFixed(Number.isInteger(degrees) ? 0 : 1);
}
