import { mkdtempSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { findTolerance } from '../../src/cli/baseline.js';
import { movementOf } from '../../src/judgement/movement.js';
import type { RunHeader } from '../../src/record/run-header.js';
import type { ComparedRecords } from '../../src/report/comparison.js';
import { comparisonPage } from '../../src/report/comparison-page/comparison-page.js';
import type { Result } from '../../src/report/result.js';
import { understand } from '../../src/report/understand.js';
import { evenly } from '../analysis/evidence-of.js';
import { thermometerHeader, warming } from '../analysis/soak-events.js';
import {
  compared,
  fourTwins,
  header,
  limitMoved,
  moduleWith,
  nothingMoved,
} from '../report/comparison-page/made-comparisons.js';
import { limited, soaked } from '../report/run-charts/made-results.js';
import { isBrowserMissing, nobodyShutOut, openBrowser, patience } from '../view/page/browser.js';
import { chartsOn, cutOff, offThePaper, type OpenedPage, openFile } from './page-in-browser.js';
import { runShipped } from './shipped-runs.js';
import { textsInTheWay } from './texts-in-the-way.js';

const made = { program: 'railproof test', date: new Date('2026-12-02T17:00:00Z') };
const script = '"><script>document.title="gone"</script><img src=x onerror=alert(1)>';
/** Markup, marks that turn the direction of writing, and 300 letters without a place to break. */
const hostile = `${script}\u202e\u2067\u200f${'K'.repeat(300)}`;
const kept = 'fixtures/runs';
const overAll = ['How far each moved', 'Voltage over current', 'Later voltage less the earlier one'];

/** A thermometer flickers; what is fitted without any scatter has a dozen idle digits. */
const unevenly = (t: number): number => warming(t) + 0.05 * Math.sin(7 * t);

/** What is compared, what the page says first, and the charts that it has before those of single findings. */
const cases: readonly (readonly [
  name: string,
  records: ComparedRecords,
  word: string,
  charts: readonly string[],
])[] = [
  ['a limit that moved', limitMoved, 'Not as it should be', overAll],
  ['nothing that changed', nothingMoved, 'As it should be', overAll],
  ['four twins', fourTwins, 'Not as it should be', overAll],
  [
    'limits of two styles',
    compared(
      limited((voltage) => 75 / voltage, evenly(14.7, 8, 12)),
      limited(() => 5),
    ),
    'Not as it should be',
    ['How far each moved', 'Past the limit, both records'],
  ],
  [
    'two procedures',
    compared(moduleWith({}), soaked({ temperature: unevenly, until: 1080 }, thermometerHeader())),
    'Not all can be told',
    ['Voltage over current'],
  ],
];

describe.skipIf(isBrowserMissing)('the page of a comparison in a browser (needs /usr/bin/chromium)', () => {
  let browser: Browser;
  const folder = mkdtempSync(join(tmpdir(), 'railproof-comparisons-'));

  beforeAll(async () => {
    browser = await openBrowser();
  }, patience);
  afterAll(async () => {
    await browser.close();
    rmSync(folder, { recursive: true });
  });

  it.each(cases)(
    'of %s opens alone, marks what moved and nothing else, for everybody and on a phone',
    async (name, records, word, charts) => {
      const { page, heard, close } = await opened(name, records);
      expect(await page.locator('.word').innerText()).toBe(word);
      const moved = records.comparison.findings.filter((one) => movementOf(one) === 'moved');
      const single = records.comparison.findings.filter(
        (one) =>
          one.difference !== undefined && (movementOf(one) === 'moved' || one.verdict === 'cannot-tell'),
      );
      await hasCharts(page, [...charts, ...single.map(({ finding }) => finding)]);
      const arrows = await page.locator('.shift > title').allTextContents();
      const marked = new Set(arrows.map((says) => /^[\w-]+/.exec(says)?.[0]));
      const drawn = moved.filter(({ difference }) => difference !== undefined);
      expect([...marked].sort()).toEqual(drawn.map(({ finding }) => finding).sort());

      expect(await textsInTheWay(page)).toEqual([]);
      expect(await cutOff(page)).toEqual([]);
      // The others have the same parts, and each look takes its seconds.
      if (records === limitMoved) await nobodyShutOut(page);
      await page.setViewportSize({ width: 360, height: 800 });
      expect(await page.evaluate<number>('document.documentElement.scrollWidth')).toBe(360);
      expect(await textsInTheWay(page)).toEqual([]);
      expect(await offThePaper(page)).toEqual([]);
      expect(heard).toHaveLength(1);
      await close();
    },
    patience,
  );

  it.each([
    ['limit-shape', 'its limit', runShipped],
    ['thermal-soak', 'a soak', runShipped],
    ['real-limit', 'two kept modules', keptPair],
  ] as const)(
    'shows all of the findings of a whole %s record, %s, on a desk and on a phone',
    async (procedure, _, resultsOf) => {
      const results = [await resultsOf(procedure, folder)].flat();
      const [before, after = before] = results as [Result, Result?];
      const { value: tolerance } = await findTolerance('unchanged');
      const { page, close } = await opened(procedure, compared(before, after, tolerance.findings));
      expect(await page.locator('table.notes td:has-text("E_n")').count()).toBeGreaterThan(2);
      for (const width of [1280, 1000, 860, 360]) {
        await page.setViewportSize({ width, height: 800 });
        expect(await page.evaluate(wideTables), `${width} px`).toEqual([]);
      }
      expect(await page.evaluate(besideTheirHeading)).toEqual([]);
      await close();
    },
    patience,
  );

  it(
    'shows hostile names as texts',
    async () => {
      const modules = header.modules.map((module) => ({ ...module, name: hostile, description: hostile }));
      const renamed: RunHeader = { ...header, modules, bench: { ...header.bench, name: hostile } };
      const { page, heard, close } = await opened(
        'hostile',
        compared(moduleWith({}), moduleWith({ limit: 4.5 }, renamed)),
      );
      expect(heard).toHaveLength(1);
      const shown = `${script}\\u202e\\u2067\\u200fK`;
      expect(await page.title()).toContain(shown);
      expect(await page.locator('h1').innerText()).toContain(shown);
      expect(await page.locator('script, img, [onload], [onerror]').count()).toBe(0);
      expect(await textsInTheWay(page)).toEqual([]);
      await page.setViewportSize({ width: 360, height: 800 });
      expect(await page.evaluate<number>('document.documentElement.scrollWidth')).toBe(360);
      await close();
    },
    patience,
  );

  async function opened(name: string, records: ComparedRecords): Promise<OpenedPage> {
    const file = join(folder, `${name}.html`);
    writeFileSync(file, comparisonPage(records, made));
    return openFile(browser, file);
  }
});

/** Records of two modules that are kept in the drawer. */
function keptPair(procedure: string): readonly [Result, Result] {
  const [one = '', other = ''] = readdirSync(kept)
    .filter((run) => run.endsWith(procedure))
    .map((run) => join(kept, run));
  return [understand(one), understand(other)];
}

// What runs in the page is text, as the types of a browser are none of ours.
const wideTables = `[...document.querySelectorAll('.wide:has(table)')]
  .filter((one) => one.scrollWidth > one.clientWidth)
  .map((one) => one.ariaLabel + ' ' + one.scrollWidth + ' > ' + one.clientWidth)`;

/** Texts of a cell that slid below its heading at the left, where a table has become a list. */
const besideTheirHeading = `[...document.querySelectorAll('table.notes td')].flatMap((cell) => {
  const room = cell.getBoundingClientRect();
  if (room.width === 0) return [];
  const text = document.createRange();
  text.selectNodeContents(cell);
  return [...text.getClientRects()].some(({ left, width }) => width > 0 && left < room.left + 100)
    ? [cell.textContent]
    : [];
})`;

/** All of them and no others, in their order. */
async function hasCharts(page: Page, titles: readonly string[]): Promise<void> {
  const expected = titles.map((title) => expect.stringContaining(title) as string);
  expect(await chartsOn(page, { leastMarks: 2 })).toEqual(expected);
}
