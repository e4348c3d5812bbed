import { pathToFileURL } from 'node:url';
import type { Browser, Page } from 'playwright-core';
import { expect } from 'vitest';
import { openWindow } from '../view/page/browser.js';

export interface OpenedPage {
  readonly page: Page;
  /** All that it asked for or said. */
  readonly heard: string[];
  readonly close: () => Promise<void>;
}

/** A page of ours as it lies on a disk. */
export async function openFile(browser: Browser, file: string): Promise<OpenedPage> {
  const { page, complaints } = await openWindow(browser, 'to-look-into');
  page.on('request', (request) => complaints.push(request.url()));
  await page.goto(pathToFileURL(file).href);
  return { page, heard: complaints, close: () => page.context().close() };
}

/** The titles of its charts, in their order; each must have a description, and marks that can be seen. */
export async function chartsOn(
  page: Page,
  { leastMarks }: { leastMarks: number },
): Promise<readonly string[]> {
  const titles: string[] = [];
  for (const drawing of await page.getByRole('img').all()) {
    // A number and its unit are held together on the page.
    titles.push((await drawing.locator('> title').textContent())?.replaceAll('\u00a0', ' ') ?? '');
    expect((await drawing.locator('> desc').textContent())?.length).toBeGreaterThan(20);
  }
  for (const marks of await page.evaluate<number[]>(marksOfDrawings))
    expect(marks).toBeGreaterThanOrEqual(leastMarks);
  return titles;
}

/** What is wider than the place that it has. */
export function cutOff(page: Page): Promise<readonly string[]> {
  return page.evaluate<string[]>(wideOnes);
}

/** What A4 (210 mm by 297 mm, ISO 216), with the margins of the page, would cut off. */
export async function offThePaper(page: Page): Promise<readonly string[]> {
  await page.emulateMedia({ media: 'print' });
  await page.setViewportSize({ width: 680, height: 994 });
  const found = await page.evaluate<string[]>(tooLarge);
  await page.emulateMedia({ media: 'screen' });
  return found;
}

// What runs in the page is text, as the types of a browser are none of ours.
const marksOfDrawings = `[...document.querySelectorAll('svg[role=img]')].map((svg) =>
  [...svg.querySelectorAll('.line, .band, .bar, .shape, .whisker, .between')].filter((mark) => {
    const { width, height } = mark.getBoundingClientRect();
    return width + height > 0;
  }).length)`;

const wideOnes = `[...document.querySelectorAll('.wide')].filter((one) => one.scrollWidth > one.clientWidth)
  .map((one) => one.ariaLabel + ' ' + one.scrollWidth + ' > ' + one.clientWidth)`;

const tooLarge = `[...document.querySelectorAll('main, header, table, figure, svg, .standing, .facts, .sign, .code')]
  .filter((one) => {
    const { right, height } = one.getBoundingClientRect();
    return right > 681 || (height > 994 && one.matches('figure, svg, .standing, .sign'));
  })
  .map((one) => one.outerHTML.slice(0, 120))`;
