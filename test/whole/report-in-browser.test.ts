import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Result } from '../../src/report/result.js';
import { runPage } from '../../src/report/run-page/run-page.js';
import { eventsOf } from '../analysis/evidence-of.js';
import { header, resultOf, steps } from '../report/fixed-record.js';
import { isBrowserMissing, nobodyShutOut, openBrowser, patience } from '../view/page/browser.js';
import { chartsOn, cutOff, offThePaper, openFile } from './page-in-browser.js';
import { runShipped, shown } from './shipped-runs.js';
import { textsInTheWay } from './texts-in-the-way.js';

const made = { program: 'railproof test', date: new Date('2026-12-02T18:20:00Z') };
const hostile = '"><script>document.title="gone"</script><img src=x onerror=alert(1)>'.repeat(3);

/** What each shipped procedure has something to draw for, where it is shown. */
const charts: Readonly<Record<string, readonly string[]>> = {
  'quick-look': ['Voltage over current', 'What the points lie off the line', 'From the measured limit'],
  'real-limit': [
    'Voltage over current',
    'What the points lie off the line',
    'Past the limit: hiccup',
    'From the measured limit',
  ],
  'limit-shape': [
    'Voltage over current',
    'What the points lie off the line',
    'Past the limit: foldback',
    'From the measured limit',
  ],
  'thermal-soak': ['Soak at 3.990 A', 'Voltage during the soak', 'From the measured limit'],
  isolation: [],
  acceptance: [
    'Voltage over current',
    'What the points lie off the line',
    'Past the limit: hiccup',
    'From the measured limit',
  ],
  sharing: [
    'Voltage of the whole over its current',
    'Past the limit: hiccup',
    'Who carries how much',
    'From the measured limit',
  ],
  stacking: ['Voltage of the whole over its current', 'Voltages in the string', 'From the measured limit'],
};

describe.skipIf(isBrowserMissing)('the report of a run in a browser (needs /usr/bin/chromium)', () => {
  let browser: Browser;
  const folder = mkdtempSync(join(tmpdir(), 'railproof-reports-'));

  beforeAll(async () => {
    browser = await openBrowser();
  }, patience);
  afterAll(async () => {
    await browser.close();
    rmSync(folder, { recursive: true });
  });

  it('is looked at for each shipped procedure', () => {
    expect(Object.keys(charts).sort()).toEqual(Object.keys(shown).sort());
  });

  it.each(Object.keys(charts))(
    'of %s stands in its folder and opens alone, with its charts, for everybody, on a phone and on paper',
    async (procedure) => {
      const result = await runShipped(procedure, folder);
      const file = join(folder, result.run, 'report.html');
      const { page, heard, close } = await openFile(browser, file);
      expect(heard).toEqual([pathToFileURL(file).href]);
      expect(await page.locator('h1').innerText()).toContain(result.header.procedure.title);
      expect(await page.locator('.word').first().innerText()).toBe('Conforms');

      await hasCharts(page, charts[procedure] ?? []);
      await standsClear(page);
      await page.setViewportSize({ width: 1100, height: 800 });
      expect(await cutOff(page)).toEqual([]);
      await nobodyShutOut(page);
      await page.setViewportSize({ width: 360, height: 800 });
      expect(await page.evaluate<number>('document.documentElement.scrollWidth')).toBe(360);
      await standsClear(page);
      await printsOnA4(page);
      expect(heard).toHaveLength(1);
      await close();
    },
    patience,
  );

  it('shows hostile names as texts, and a stopped run as stopped', async () => {
    const modules = header.modules.map((module) => ({ ...module, name: hostile, description: hostile }));
    const events = [
      ...eventsOf(steps).slice(0, -1),
      { t: 70, event: 'notice', text: hostile } as const,
      { t: 71, event: 'ended', how: 'stopped', reason: hostile, status: 3 } as const,
    ];
    const renamed = { ...header, modules, procedure: { ...header.procedure, title: hostile } };
    const { page, heard, close } = await openFile(browser, kept('hostile', resultOf(events, renamed)));
    expect(heard).toHaveLength(1);
    expect(await page.title()).toContain(hostile);
    expect(await page.locator('script, img, [onload], [onerror]').count()).toBe(0);
    expect(await page.locator('.word').allInnerTexts()).toEqual([
      'Stopped: this test was not finished',
      'As far as it went: does not conform',
    ]);
    await page.setViewportSize({ width: 360, height: 800 });
    expect(await page.evaluate<number>('document.documentElement.scrollWidth')).toBe(360);
    await nobodyShutOut(page);
    await close();
  });

  function kept(name: string, result: Result): string {
    const file = join(folder, `${name}.html`);
    writeFileSync(file, runPage(result, made));
    return file;
  }
});

/** Those that must be there, in their order. */
async function hasCharts(page: Page, expected: readonly string[]): Promise<void> {
  const titles = await chartsOn(page, { leastMarks: 3 });
  const found = titles.map((title) => expected.find((each) => title.startsWith(each)));
  expect(found.filter((each) => each !== undefined)).toEqual(expected);
  expect(titles.every((title) => title.length > 5)).toBe(true);
  expect(titles.length === 0).toBe(expected.length === 0);
}

async function standsClear(page: Page): Promise<void> {
  expect(await textsInTheWay(page)).toEqual([]);
}

/** 210 mm by 297 mm (ISO 216), with the margins of the page: what is wider or higher than that is cut off. */
async function printsOnA4(page: Page): Promise<void> {
  const pdf = (await page.pdf({ preferCSSPageSize: true })).toString('latin1');
  const boxes = [...pdf.matchAll(/\/MediaBox \[([^\]]*)\]/g)].map(([, box]) =>
    box?.trim().split(/\s+/).map(Number),
  );
  expect(boxes.length).toBeGreaterThan(1);
  for (const box of boxes) {
    expect(Math.abs((box?.[2] ?? NaN) - 595.28)).toBeLessThan(1);
    expect(Math.abs((box?.[3] ?? NaN) - 841.89)).toBeLessThan(1);
  }
  expect(await offThePaper(page)).toEqual([]);
}
