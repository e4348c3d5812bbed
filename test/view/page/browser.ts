import { existsSync, readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { chromium, type Browser, type Page } from 'playwright-core';
import { expect } from 'vitest';

/** A busy machine takes its time; nothing here is waited for by the clock. */
export const patience = 120_000;

const executablePath = '/usr/bin/chromium';

/** Where it is missing nothing can be looked at; CI installs it, and there nothing is skipped. */
export const isBrowserMissing = !existsSync(executablePath) && process.env['CI'] === undefined;

export function openBrowser(): Promise<Browser> {
  // Root, as CI runs, has no sandbox of its own to offer.
  return chromium.launch({ executablePath, args: ['--no-sandbox'] });
}

export interface Window {
  readonly page: Page;
  /** What the page complained of: scripts that broke, what its policy forbade, what was not found. */
  readonly complaints: string[];
}

/** A window as a person has it; or one where what looks into its pages steps over their policy. */
export async function openWindow(browser: Browser, use: 'as-it-is' | 'to-look-into'): Promise<Window> {
  const bypassCSP = use === 'to-look-into';
  const context = await browser.newContext({ viewport: { width: 1100, height: 800 }, bypassCSP });
  context.setDefaultTimeout(patience);
  const page = await context.newPage();
  const complaints: string[] = [];
  page.on('console', (message) => complaints.push(message.text()));
  page.on('pageerror', (error) => complaints.push(error.message));
  page.on('dialog', (dialog) => complaints.push(dialog.message()));
  return { page, complaints };
}

/** Opens the address of a view, and waits until its page has heard the runner. */
export async function openAt({ page, complaints }: Window, address: string): Promise<void> {
  await page.goto('about:blank');
  complaints.length = 0;
  await page.goto(address);
  await page.locator('h1', { hasNotText: 'Waiting for the runner' }).waitFor();
}

const axe = readFileSync(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8');

/** By the rules of axe-core, of which serious and critical ones shut people out; in the light and in the dark. */
export async function nobodyShutOut(page: Page): Promise<void> {
  await page.evaluate(`typeof axe === 'undefined' && (() => { ${axe} })()`);
  for (const colorScheme of ['dark', 'light'] as const) {
    await page.emulateMedia({ colorScheme, reducedMotion: 'reduce' });
    const { violations, passes } = await page.evaluate<{
      readonly violations: readonly { impact: string; id: string; nodes: { html: string }[] }[];
      readonly passes: number;
    }>('axe.run().then(({ violations, passes }) => ({ violations, passes: passes.length }))');
    const grave = violations.filter(({ impact }) => impact === 'serious' || impact === 'critical');
    expect(grave.map(({ id, nodes }) => `${id}: ${nodes.map(({ html }) => html).join(' ')}`)).toEqual([]);
    expect(passes).toBeGreaterThan(10);
  }
}

/** Where the keyboard is. */
export function atKeyboard(page: Page): Promise<string> {
  return page.evaluate<string>('document.activeElement.id || document.activeElement.textContent');
}

/** How many dots of the curve's canvas have a colour of the look, as it is in the light that there is. */
export function inked(page: Page, colour: 'line-0' | 'line-1' | 'bad'): Promise<number> {
  return page.evaluate<number>(`(() => {
    const canvas = document.querySelector('#plot canvas');
    if (canvas === null) return 0;
    const hex = getComputedStyle(document.documentElement).getPropertyValue('--${colour}').trim();
    const [red, green, blue] = [1, 3, 5].map((at) => parseInt(hex.slice(at, at + 2), 16));
    const { data } = canvas.getContext('2d').getImageData(0, 0, canvas.width, canvas.height);
    let count = 0;
    for (let at = 0; at < data.length; at += 4)
      if (data[at] === red && data[at + 1] === green && data[at + 2] === blue && data[at + 3] === 255) count += 1;
    return count;
  })()`);
}
