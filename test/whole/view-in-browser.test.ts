import type { ChildProcess } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import {
  atKeyboard,
  inked,
  nobodyShutOut,
  openAt,
  openBrowser,
  openWindow,
  patience,
} from '../view/page/browser.js';
import { askLoad, until } from './at-the-bench.js';
import { type InTerminal, startInTerminal } from './in-terminal.js';
import { ended, type Ended, start } from './railproof.js';
import { serve, type Served } from './served.js';

vi.setConfig({ testTimeout: 2 * patience, hookTimeout: patience });

/** Whoever hands on a procedure may have written anything into it. A module's name is held to letters and digits. */
const hostile = '<img src=x onerror="document.title=1">valves</p><script>document.title=1</script>';
const procedure = `railproof: procedure 1
name: watched
title: '${hostile}'
purpose: Shows what a page shows.
wiring: [Load to the module, Nothing else connected]
cautions: [hot-surfaces]
steps:
  - operator: { name: ambient, ask: 'How warm is it beside ${hostile}?', answer: temperature }
  - open-circuit: { for: 1 s }
  - load-ramp: { from: 0 A, to: 100 % of rated-current, points: 801, dwell: 100 ms, readings: 2 }
`;
/** The wiring, and what the mains, the heat and a change of this module ask for. */
const asked = [/wired so/, /^Mains/, /^Hot surfaces/, /^Earth link removed/];

let browser: Browser;
let served: Served;
const folder = mkdtempSync(join(tmpdir(), 'railproof-view-in-browser-'));
const file = join(folder, 'watched.yaml');

beforeAll(async () => {
  writeFileSync(file, procedure);
  [browser, served] = await Promise.all([
    openBrowser(),
    serve('fixtures/benches/nursery.yaml', join(folder, 'bench.yaml'), 'tcp'),
  ]);
});

afterAll(async () => {
  await browser.close();
  await served.close();
  rmSync(folder, { recursive: true, force: true });
});

describe('a run that is watched', () => {
  it('is answered by keyboard alone, followed, and stopped; what files say is text; the load is off', async () => {
    const run = await watched();
    const window = await openWindow(browser, 'as-it-is');
    const { page, complaints } = window;
    try {
      await nothingForStrangers(run.address);
      await openAt(window, run.address.href);
      await nothingForStrangers(run.address);
      for (const question of asked) await agreed(page, question);
      await typed(page, '23.5 degC');
      await followed(page);
      for (const place of ['#what', '#steps'])
        expect(await page.locator(place).innerText()).toContain(hostile);
      expect(await page.locator('main img, main script').count()).toBe(0);
      expect(await page.title()).toBe('Load on · K1 · railproof');
      expect(await page.locator('#cautions').innerText()).toMatch(
        /^(?:.+\n)+?Acknowledged by the person at the bench\./,
      );
      await lookedInto(page);

      expect(await askLoad(served.bench)).toBe('1');
      await page.keyboard.press('Escape');
      await page.keyboard.press('Escape');
      await page.locator('#ending').waitFor();
      expect(await askLoad(served.bench)).toBe('0');
      expect(await page.locator('#ending-heading').innerText()).toBe('Stopped in the live view');
      expect(await page.locator('#ending').innerText()).toContain('The load is off; it was read back.');
      expect(await page.locator('#load-word').innerText()).toBe('Load off');
      const { stderr } = await run.end;
      expect(stderr).toContain('The load is off; it was read back.');
      expect(await page.locator('#lost').isHidden()).toBe(true);
      expect(complaints).toEqual([]);
    } finally {
      await page.context().close();
      run.child.kill('SIGKILL');
      await run.end;
    }
  });
});

describe('a runner that is lost', () => {
  it('is said to be while it stands still, is followed again, and lost for good once it is killed', async () => {
    const terminal = await inTerminal('--yes');
    const window = await openWindow(browser, 'as-it-is');
    const { page } = window;
    try {
      await openAt(
        window,
        (
          await addressIn(
            () => terminal.shown(),
            () => false,
          )
        ).href,
      );
      await page.getByLabel('Your answer').fill('21');
      process.kill(terminal.pid, 'SIGSTOP');
      await page.locator('#lost-heading', { hasText: /^No word from the runner for \d+ s$/ }).waitFor();
      process.kill(terminal.pid, 'SIGCONT');
      await page.locator('#lost').waitFor({ state: 'hidden' });
      await page.locator('#line', { hasText: 'followed live' }).waitFor();
      expect(await page.getByLabel('Your answer').inputValue()).toBe('21');

      terminal.type('23.5 degC\r');
      await page.locator('#question').waitFor({ state: 'hidden' });
      await page.locator('#load-word', { hasText: /^Load on$/ }).waitFor();
      process.kill(terminal.pid, 'SIGKILL');
      await page.locator('#lost-heading', { hasText: /^No word from the runner for \d+ s$/ }).waitFor();
      const words = await page.locator('#lost').innerText();
      expect(words).toContain('The load may still be on. Look at the terminal.');
      expect(words).toContain('cut the power by hand');
      expect(await page.locator('#load-word').innerText()).toBe('Load last read on');
      // What the page promises of the watchman.
      await until(async () => (await askLoad(served.bench)) === '0');
    } finally {
      await page.context().close();
      await terminal.closed;
    }
  });
});

const words = (options: readonly string[]): readonly string[] => [
  ...['run', file, '--bench', served.bench, '--module', 'fixtures/modules/K1.yaml'],
  ...['--runs', join(folder, 'runs'), '--view', ...options],
];

interface Watched {
  readonly child: ChildProcess;
  readonly address: URL;
  readonly end: Promise<Ended>;
}

/** `railproof run … --view` without a terminal, and the address that it says. */
async function watched(...options: readonly string[]): Promise<Watched> {
  const child = start(words(options));
  const end = ended(child);
  let talk = '';
  child.stderr?.on('data', (more: string) => {
    talk += more;
  });
  return {
    child,
    end,
    address: await addressIn(
      () => talk,
      () => child.exitCode !== null,
    ),
  };
}

/** The same at a terminal, where it is asked as well. */
function inTerminal(...options: readonly string[]): Promise<InTerminal> {
  return startInTerminal(words(options), join(folder, 'session'));
}

async function addressIn(talk: () => string, isOver: () => boolean): Promise<URL> {
  const address = (): string | undefined => /http:\/\/127\.0\.0\.1:\d+\/\?token=\S+(?=\s)/.exec(talk())?.[0];
  await until(() => address() !== undefined || isOver());
  return new URL(address() ?? `about:blank#${talk()}`);
}

/** Whoever does not hold the token, or comes with one that was used, is told nothing of the run. */
async function nothingForStrangers({ origin }: URL): Promise<void> {
  for (const path of ['/?token=wrong', '/', '/events', '/page/main.js']) {
    const answer = await fetch(`${origin}${path}`, { redirect: 'manual' });
    expect(answer.status, path).toBe(403);
    expect(await answer.text()).not.toMatch(/K1|watched|nursery/);
  }
  const headers = { origin, 'content-type': 'application/json' };
  expect((await fetch(`${origin}/stop`, { method: 'POST', headers, body: '{}' })).status).toBe(403);
}

/** A key that was on its way to something else answers nothing. */
async function agreed(page: Page, question: RegExp): Promise<void> {
  const heading = page.locator('#question-heading', { hasText: question });
  await heading.waitFor();
  expect(await atKeyboard(page)).toBe('question-heading');
  await page.keyboard.press('Enter');
  await page.keyboard.press('Tab');
  expect(await atKeyboard(page)).toBe('Yes, go on');
  await page.keyboard.press('Enter');
  await heading.waitFor({ state: 'hidden' });
}

/** What is not understood is asked again, and typed again where the keyboard still is. */
async function typed(page: Page, answer: string): Promise<void> {
  const field = page.getByLabel('Your answer');
  await field.waitFor();
  await page.keyboard.press('Tab');
  expect(await atKeyboard(page)).toBe('typed');
  await page.keyboard.type('lukewarm');
  await page.keyboard.press('Enter');
  await page.locator('#question-text', { hasText: 'a temperature is needed' }).waitFor();
  expect(await page.locator('#expected').innerText()).toBe('In degrees Celsius, for example 23.5 degC');
  await page.keyboard.type(answer);
  await page.keyboard.press('Enter');
  await page.locator('#question').waitFor({ state: 'hidden' });
}

/** The load, the figures, the curve, the step and what remains. */
async function followed(page: Page): Promise<void> {
  await page.locator('#load-word', { hasText: /^Load on$/ }).waitFor();
  for (const number of [/15\.\d{3}/, /0\.\d{3}/])
    await page.locator('#figures', { hasText: number }).waitFor();
  const first = await page.locator('#figures').innerText();
  expect(first).toMatch(/Voltage\s+1[45]\.\d{3}\s+V\s+Current\s+\d\.\d{3}\s+A\s+set to \d\.\d{3} A\s+Power/);
  expect(first).toMatch(/Temperature\s+not measured/);
  const grown = page.locator('#curve-words', {
    hasText: /^Voltage against current: (?:[5-9]|\d\d+) points\./,
  });
  await grown.waitFor();
  expect(await page.locator('#figures').innerText()).not.toBe(first);
  expect(await page.locator('[aria-current=step]').innerText()).toMatch(/load ramp · now/);
  expect(await page.locator('#step-now').innerText()).toMatch(/^Step 3 of 3: 801 points from 0 A/);
  expect(await page.locator('#times').innerText()).toMatch(/ gone, about .+ to go$/);
  expect(await page.locator('#age').innerText()).toMatch(/^Read /);
}

/** A second page of the same person, on which one may look at more than its policy allows. */
async function lookedInto(page: Page): Promise<void> {
  const other = await openWindow(browser, 'to-look-into');
  await other.page.context().addCookies(await page.context().cookies());
  await openAt(other, new URL('/', page.url()).href);
  await other.page.locator('#age', { hasText: 'Read just now.' }).waitFor();
  await vi.waitFor(async () => {
    expect(await inked(other.page, 'line-0')).toBeGreaterThan(100);
  }, patience);
  await nobodyShutOut(other.page);
  await other.page.setViewportSize({ width: 360, height: 640 });
  await other.page.waitForFunction(
    'document.documentElement.scrollWidth === document.documentElement.clientWidth',
  );
  await other.page.context().close();
}
