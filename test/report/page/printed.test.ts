import { execFileSync } from 'node:child_process';
import { existsSync, mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { css } from '../../../src/report/page/look.js';
import { isBrowserMissing, openBrowser } from '../../view/page/browser.js';

const isMissing = isBrowserMissing || (!existsSync('/usr/bin/pdftotext') && process.env['CI'] === undefined);

/** Millimetres of other matter above, so that the end of the paper falls anywhere within what is looked at. */
const above = Array.from({ length: 12 }, (_, index) => 180 + 7 * index);

describe.skipIf(isMissing)('a page on paper (needs /usr/bin/chromium and pdftotext)', () => {
  let browser: Browser;
  const folder = mkdtempSync(join(tmpdir(), 'railproof-printed-'));

  beforeAll(async () => {
    browser = await openBrowser();
  });
  afterAll(async () => {
    await browser.close();
    rmSync(folder, { recursive: true });
  });

  it('never parts the lines for the signatures from what is signed', async () => {
    const lines = (who: string): string => `<div><dt>${who}</dt><dd></dd></div>`.repeat(3);
    const section = `<section><h2>Signed</h2><p>Record</p><dl class="sign">${lines('Measured by')}${lines('Checked by')}</dl></section>`;
    const broken = [];
    for (const height of above) {
      const pages = await printed(height, section);
      expect(pages.filter((page) => page.includes('Signed'))).toHaveLength(1);
      if (!pages.some((page) => page.includes('Signed') && page.includes('Checked by'))) broken.push(height);
    }
    expect(broken).toEqual([]);
  });

  it('leaves no row of a table alone on a page', async () => {
    const rows = Array.from({ length: 9 }, (_, index) => `<tr><th>row ${index + 1}</th><td>seen</td></tr>`);
    const table = `<section><h2>Read</h2><table><thead><tr><th>Row</th><th>What</th></tr></thead><tbody>${rows.join('')}</tbody></table></section>`;
    const alone = [];
    for (const height of above) {
      const pages = await printed(height, table);
      const counts = pages.map((page) => page.match(/row \d/g)?.length ?? 0);
      expect(counts.reduce((sum, count) => sum + count, 0)).toBe(9);
      if (counts.includes(1)) alone.push(height);
    }
    expect(alone).toEqual([]);
  });

  async function printed(height: number, text: string): Promise<readonly string[]> {
    const page = await browser.newPage();
    const filler = `<section style="height:${height}mm"><p>Before</p></section>`;
    await page.setContent(`<style>${css}</style><main>${filler}${text}</main>`);
    const file = join(folder, 'printed.pdf');
    await page.pdf({ path: file, preferCSSPageSize: true });
    await page.close();
    return execFileSync('pdftotext', ['-layout', file, '-'], { encoding: 'utf8' }).split('\f');
  }
});
