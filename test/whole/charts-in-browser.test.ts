import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { RunHeader } from '../../src/record/run-header.js';
import type { Markup } from '../../src/report/page/markup.js';
import { pageText } from '../../src/report/page/page.js';
import type { Result } from '../../src/report/result.js';
import { deratingFigure } from '../../src/report/run-charts/derating-chart.js';
import { curveFigure } from '../../src/report/run-charts/curve-chart.js';
import { limitTraceFigure } from '../../src/report/run-charts/limit-trace-chart.js';
import { residualsFigure } from '../../src/report/run-charts/residuals-chart.js';
import { sharesFigure } from '../../src/report/run-charts/shares-chart.js';
import { soakFigure } from '../../src/report/run-charts/soak-chart.js';
import { stackFigure } from '../../src/report/run-charts/stack-chart.js';
import { understand } from '../../src/report/understand.js';
import { evenly, headerOf } from '../analysis/evidence-of.js';
import { thermometerHeader, warming } from '../analysis/soak-events.js';
import { resultOf } from '../report/fixed-record.js';
import {
  bent,
  idle,
  limited,
  madeResult,
  search,
  soaked,
  upAndBack,
} from '../report/run-charts/made-results.js';
import { alike, drawer, shared, stacked } from '../report/run-charts/made-groups.js';
import { isBrowserMissing, openBrowser } from '../view/page/browser.js';
import { textsInTheWay } from './texts-in-the-way.js';

const hostile = '"><script>document.title="gone"</script><img src=x onerror=alert(1)>'.repeat(4);
const room = { ambient: { temperature: 22, uncertainty: 0.5 } };
const figures = [
  curveFigure,
  residualsFigure,
  limitTraceFigure,
  soakFigure,
  sharesFigure,
  stackFigure,
  deratingFigure,
];
const climb = evenly(0, 4, 5).map((set) => ({ set }));

/** What each is of, and how many charts it has. */
const results: readonly (readonly [name: string, result: Result, charts: number])[] = [
  ['a kept record', understand('fixtures/runs/20261130T091500Z-K1-real-limit'), 4],
  ['a hiccuping module that swings', resultOf(), 4],
  ['both ways and a search', madeResult([idle, upAndBack, search]), 3],
  ['a knee', madeResult([bent]), 3],
  ['an open circuit alone', madeResult([idle]), 1],
  ['a limit of constant power', limited((voltage) => 75 / voltage, evenly(14.7, 8, 12)), 2],
  ['a limit of constant current', limited(() => 5), 2],
  [
    'a soak that was cut short',
    soaked({ temperature: warming, until: 1080 }, thermometerHeader(room, { limit: 60 })),
    3,
  ],
  ['a soak that took a day', soaked({ temperature: warming, until: 86_400 }, thermometerHeader()), 3],
  ['hostile names', named(hostile), 3],
  ['one that hogs', shared({ K1: { ...alike, voltage: 15.9 }, K2: alike }, evenly(0.5, 4, 8)), 3],
  ['eight that share', shared(drawer(8), evenly(3.2, 32, 10)), 3],
  ['a group of hostile names', shared({ [hostile]: alike, [`${hostile}2`]: alike }, evenly(1, 8, 4)), 3],
  ['a group at one load', shared(drawer(2), [4]), 3],
  ['a string of eight', stacked(drawer(8), climb), 4],
  ['a string of hostile names', stacked({ [hostile]: alike, [`${hostile}2`]: alike }, climb), 4],
  [
    'a string in which one is driven below zero',
    stacked(drawer(3), [...climb, { set: 4.5, outcome: 'dropped', current: 0.2, change: { K2: -0.71 } }]),
    4,
  ],
];

describe.skipIf(isBrowserMissing)('the charts of a record in a browser (needs /usr/bin/chromium)', () => {
  let browser: Browser;
  const folder = mkdtempSync(join(tmpdir(), 'railproof-charts-'));

  beforeAll(async () => {
    browser = await openBrowser();
  });
  afterAll(async () => {
    await browser.close();
    rmSync(folder, { recursive: true });
  });

  it.each(results)(
    'of %s stand clear of each other, at any width, and name themselves',
    async (name, result, charts) => {
      const { page, heard } = await opened(name, result);
      const drawings = await page.getByRole('img').all();
      expect(drawings).toHaveLength(charts);
      for (const drawing of drawings) {
        expect((await drawing.locator('> title').textContent())?.length).toBeGreaterThan(5);
        expect((await drawing.locator('> desc').textContent())?.length).toBeGreaterThan(20);
        expect(await drawing.locator('.shape, .bar').count()).toBeGreaterThan(0);
      }
      expect(await textsInTheWay(page)).toEqual([]);
      expect(await page.evaluate<string[]>(outside)).toEqual([]);
      await page.setViewportSize({ width: 360, height: 800 });
      expect(await page.evaluate<number>('document.documentElement.scrollWidth')).toBe(360);
      expect(await textsInTheWay(page)).toEqual([]);
      expect(heard).toEqual([]);
      await page.close();
    },
  );

  async function opened(name: string, result: Result): Promise<{ page: Page; heard: string[] }> {
    const file = join(folder, `${name}.html`);
    writeFileSync(file, pageOf(figures.map((figure) => figure(result))));
    const page = await browser.newPage({ viewport: { width: 900, height: 800 } });
    const heard: string[] = [];
    page.on('console', (message) => heard.push(message.text()));
    page.on('pageerror', (error) => heard.push(error.message));
    page.on('dialog', (dialog) => heard.push(dialog.message()));
    await page.goto(pathToFileURL(file).href);
    return { page, heard };
  }
});

// Shapes, lines and whiskers that reach out of their drawing.
const outside = `[...document.querySelectorAll('svg[role=img]')].flatMap((svg) => {
  const whole = svg.getBoundingClientRect();
  return [...svg.querySelectorAll('.shape, .line, .band, .whisker, .mark, .between')]
    .filter((each) => {
      const { left, top, right, bottom } = each.getBoundingClientRect();
      return left < whole.left - 1 || right > whole.right + 1 || top < whole.top - 1 || bottom > whole.bottom + 1;
    })
    .filter((each) => each.closest('[clip-path]') === null)
    .map((each) => each.outerHTML);
})`;

function pageOf(sections: readonly (Markup | undefined)[]): string {
  return pageText({
    kind: 'Charts',
    title: 'Charts',
    answer: undefined,
    sections,
    made: { program: 'railproof test', date: new Date('2026-12-02T03:30:00Z') },
    pageKind: 'report',
  });
}

function named(name: string): Result {
  const header = headerOf();
  const modules = header.modules.map((module) => ({ ...module, name, description: name }));
  const renamed: RunHeader = { ...header, modules, procedure: { ...header.procedure, title: name } };
  return madeResult([idle, upAndBack, search], renamed);
}
