import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { buildPage } from '../../src/report/page/build-page.js';
import { madeParallel, madeSelection, madeSeries, madeStages } from '../report/sheet/made-builds.js';
import { isBrowserMissing, nobodyShutOut, openBrowser } from '../view/page/browser.js';
import { openFile } from './page-in-browser.js';
import { textsInTheWay } from './texts-in-the-way.js';

const made = { program: 'railproof test', date: new Date('2026-12-02T03:30:00Z') };
const many = ['K1', 'K2', 'K3', 'K4', 'K5', 'K6', 'K7', 'K8'];
const hostile = '<script>document.title="gone"</script><img src=x onerror=alert(1)>" onload="alert(1)';

const sheets = {
  parallel: { build: madeParallel(), title: 'K1, K2 and K3 in parallel', drawings: 4 },
  'parallel of eight': {
    build: madeParallel({}, many),
    title: 'K1, K2, K3, K4, K5, K6, K7 and K8 in parallel',
    drawings: 4,
  },
  series: { build: madeSeries(), title: 'K1, K2 and K3 in series', drawings: 3 },
  'series of five': {
    build: madeSeries({}, many.slice(0, 5)),
    title: 'K1, K2, K3, K4 and K5 in series',
    drawings: 3,
  },
  stages: { build: madeStages(), title: 'valves: adjustable supply for the valve bench', drawings: 5 },
  selection: { build: madeSelection(), title: '2 supplies: 2 groups of 2 each in a stack', drawings: 2 },
} as const;
const rows = Object.entries(sheets).map(([name, sheet]) => [name, sheet] as const);

describe.skipIf(isBrowserMissing)('a build sheet in a browser (needs /usr/bin/chromium)', () => {
  let browser: Browser;
  const folder = mkdtempSync(join(tmpdir(), 'railproof-sheets-'));

  beforeAll(async () => {
    browser = await openBrowser();
  });
  afterAll(async () => {
    await browser.close();
    rmSync(folder, { recursive: true });
  });

  describe.each(rows)('of %s', (name, sheet) => {
    let page: Page;
    let heard: readonly string[];

    beforeAll(async () => {
      ({ page, heard } = await opened(name, buildPage(sheet.build, made)));
    });
    afterAll(() => page.close());

    it('opens from a file, asks for nothing else and has nothing to complain about', async () => {
      expect(await page.title()).toBe(`${sheet.title} · railproof`);
      expect(await page.locator('h1').innerText()).toBe(sheet.title);
      expect(heard).toEqual([pathToFileURL(join(folder, `${name}.html`)).href]);
    });

    it('has marks in each drawing, and a name and a description for it', async () => {
      const drawings = await page.getByRole('img').all();
      expect(drawings).toHaveLength(sheet.drawings);
      for (const drawing of drawings) {
        const title = await drawing.locator('> title').textContent();
        const description = await drawing.locator('> desc').textContent();
        expect(description?.length).toBeGreaterThan(10);
        const named = page.getByRole('img', { name: `${title ?? ''} ${description ?? ''}`, exact: true });
        expect(await named.count()).toBe(1);
      }
      for (const marks of await page.evaluate<number[]>(marksOfDrawings)) expect(marks).toBeGreaterThan(2);
    });

    it('has no two texts of a drawing over each other, and none outside of it', async () => {
      expect(await textsInTheWay(page)).toEqual([]);
    });

    it('shuts nobody out, in the light, in the dark or on a phone', async () => {
      const looked = await openFile(browser, join(folder, `${name}.html`));
      await nobodyShutOut(looked.page);
      await looked.page.setViewportSize({ width: 360, height: 800 });
      await nobodyShutOut(looked.page);
      await looked.close();
    });

    it('shows its tables whole on a desk screen', async () => {
      await page.setViewportSize({ width: 1100, height: 800 });
      const cut = await page.evaluate<string[]>(
        "[...document.querySelectorAll('.wide:has(table)')].filter((one) => one.scrollWidth > one.clientWidth).map((one) => one.ariaLabel)",
      );
      expect(cut).toEqual([]);
    });

    it('does not scroll sideways at 360 px', async () => {
      await page.setViewportSize({ width: 360, height: 800 });
      const widths = await page.evaluate<number[]>(
        '[document.documentElement.scrollWidth, document.documentElement.clientWidth]',
      );
      expect(widths).toEqual([360, 360]);
      expect(await textsInTheWay(page)).toEqual([]);
    });
  });

  it('keeps all of a note in its own column on a phone', async () => {
    const { page } = await opened('notes', buildPage(madeStages(), made));
    await page.setViewportSize({ width: 360, height: 800 });
    const within = await page.evaluate<number[]>(
      "[...document.querySelectorAll('.notes td > *')].map((each) => each.getBoundingClientRect().left - each.parentElement.getBoundingClientRect().left)",
    );
    expect(within.length).toBeGreaterThan(0);
    // The names of the columns stand in the first 7rem.
    for (const left of within) expect(left).toBeGreaterThanOrEqual(112);
    await page.close();
  });

  it('shows a hostile name and a hostile record as text', async () => {
    const build = madeParallel({}, [hostile, 'K2']);
    const concerns = [{ ...build.concerns[0], run: hostile, text: hostile }] as typeof build.concerns;
    const { page, heard } = await opened('hostile', buildPage({ ...build, concerns }, made));
    expect(heard).toHaveLength(1);
    expect(await page.title()).toContain(hostile);
    expect(await page.locator('script, img, [onload], [onerror]').count()).toBe(0);
    expect(await page.locator('th', { hasText: hostile }).count()).toBeGreaterThan(0);
    expect(await textsInTheWay(page)).toEqual([]);
    await page.close();
  });

  it('could run no script even if one got in', async () => {
    const text = buildPage(madeParallel(), made).replace(
      '</main>',
      '<script>document.title = "ran"</script></main>',
    );
    const { page, heard } = await opened('with-script', text);
    expect(await page.title()).not.toBe('ran');
    expect(heard.join('\n')).toContain('Content Security Policy');
    await page.close();
  });

  it('of stages prints on A4, every page of it', async () => {
    const { page } = await opened('print', buildPage(madeStages(), made));
    const pdf = (await page.pdf({ preferCSSPageSize: true })).toString('latin1');
    const boxes = [...pdf.matchAll(/\/MediaBox \[([^\]]*)\]/g)].map(([, box]) =>
      box?.trim().split(/\s+/).map(Number),
    );
    expect(boxes.length).toBeGreaterThan(2);
    // 210 mm by 297 mm (ISO 216) in points, to the rounding of the browser.
    for (const box of boxes) {
      expect(Math.abs((box?.[2] ?? NaN) - 595.28)).toBeLessThan(1);
      expect(Math.abs((box?.[3] ?? NaN) - 841.89)).toBeLessThan(1);
    }
    await page.close();
  });

  // With tables as large as on the screen each took seven pages or eight; another font may ask for one more than this one.
  it.each([
    ['parallel', madeParallel(), 6],
    ['series', madeSeries(), 5],
    ['stages', madeStages(), 7],
    ['selection', madeSelection(), 6],
  ])('of %s prints on few pages, its tables no larger than its text', async (name, build, most) => {
    const { page } = await opened(`pages-${name}`, buildPage(build, made));
    const pdf = (await page.pdf({ preferCSSPageSize: true })).toString('latin1');
    expect(pdf.match(/\/MediaBox/g)?.length ?? Infinity).toBeLessThanOrEqual(most);
    await page.emulateMedia({ media: 'print' });
    const [table = NaN, text = NaN] = await page.evaluate<number[]>(
      "['td', 'li'].map((each) => parseFloat(getComputedStyle(document.querySelector(each)).fontSize))",
    );
    expect(table).toBeLessThanOrEqual(text);
    await page.close();
  });

  it('prints dark on white though the screen is dark', async () => {
    const { page } = await opened('dark', buildPage(madeSeries(), made));
    await page.emulateMedia({ colorScheme: 'dark' });
    const ground = (): Promise<string> =>
      page.evaluate<string>('getComputedStyle(document.body).backgroundColor');
    expect(await ground()).toBe('rgb(20, 24, 26)');
    await page.emulateMedia({ colorScheme: 'dark', media: 'print' });
    expect(await ground()).toBe('rgb(255, 255, 255)');
    await page.close();
  });

  /** The page, and all that it asked for or said. */
  async function opened(name: string, text: string): Promise<{ page: Page; heard: string[] }> {
    const file = join(folder, `${name}.html`);
    writeFileSync(file, text);
    const page = await browser.newPage({ viewport: { width: 1000, height: 800 } });
    const heard: string[] = [];
    page.on('console', (message) => heard.push(message.text()));
    page.on('pageerror', (error) => heard.push(error.message));
    page.on('request', (request) => heard.push(request.url()));
    page.on('dialog', (dialog) => heard.push(dialog.message()));
    await page.goto(pathToFileURL(file).href);
    return { page, heard };
  }
});

// What runs in the page is text, as the types of a browser are none of ours.
const marksOfDrawings = `[...document.querySelectorAll('svg[role=img]')].map((svg) =>
  [...svg.querySelectorAll('.line, .band, .bar, .spot, .heat, .contour, .box, .resistor, .symbol')].filter((mark) => {
    const { width, height } = mark.getBoundingClientRect();
    return width + height > 0;
  }).length)`;
