import { subscribe, unsubscribe } from 'node:diagnostics_channel';
import type { Socket } from 'node:net';
import { dirname } from 'node:path';
import { createRequire } from 'node:module';
import { randomBytes } from 'node:crypto';
import type { Browser, Page } from 'playwright-core';
import { afterAll, afterEach, beforeAll, describe, expect, it, vi } from 'vitest';
import { realClock } from '../../../src/clock/real-clock.js';
import { patience as patienceWithRunner } from '../../../src/view/page/silence.js';
import { readPageFiles } from '../../../src/view/page-files.js';
import { type LiveView, openLiveView } from '../../../src/view/server.js';
import type { ViewedEnd, ViewState } from '../../../src/view/view-state.js';
import { root } from '../../whole/railproof.js';
import {
  atKeyboard,
  inked,
  nobodyShutOut,
  openAt,
  openBrowser,
  openWindow,
  patience,
  type Window,
} from './browser.js';
import { aBusyRunner } from '../busy-runner.js';
import { before, neverBegun, point } from './viewed.js';

vi.setConfig({ testTimeout: patience, hookTimeout: patience });

let browser: Browser;
let window: Window;
const views: LiveView[] = [];
const files = readPageFiles(`${root}dist/`, dirname(createRequire(import.meta.url).resolve('uplot')));

beforeAll(async () => {
  browser = await openBrowser();
  window = await openWindow(browser, 'to-look-into');
});

afterEach(async () => {
  await window.page.setViewportSize({ width: 1100, height: 800 });
  await Promise.all(views.splice(0).map((view) => view.close()));
});

afterAll(() => browser.close());

/** The server of a run, in which the test is the runner; and its page. */
async function viewed(state: Partial<ViewState> = {}, inWindow = window) {
  const stop = vi.fn();
  const view = await openLiveView({
    ...{
      state: { ...before, ...state },
      files,
      clock: realClock,
      random: randomBytes,
      stop,
    },
    addressed: () => undefined,
  });
  views.push(view);
  await openAt(inWindow, view.address);
  return { view, stop, ...inWindow };
}

const never = new AbortController().signal;
const wiring = {
  heading: 'Is it wired so?',
  text: 'Load to the module.\nNothing else connected.',
  answer: 'yes',
} as const;
const warmth = { heading: 'To read: ambient', text: 'How warm is it?', answer: 'temperature' } as const;

const nowhere = { x: 0, y: 0, width: 0, height: 0 };

describe('what is asked', () => {
  it('is answered by keyboard alone: a key that was on its way to something else answers nothing', async () => {
    const { view, page, complaints } = await viewed();
    const answer = view.ask(wiring, never);
    await page.getByRole('heading', { name: wiring.heading }).waitFor();
    expect(await atKeyboard(page)).toBe('question-heading');
    expect(await page.locator('#question li').allInnerTexts()).toEqual(wiring.text.split('\n'));
    expect(await page.title()).toBe('? Is it wired so? · K1 · railproof');
    await nobodyShutOut(page);
    await page.keyboard.press('Enter');
    await page.keyboard.press('Space');
    await page.keyboard.press('Tab');
    expect(await atKeyboard(page)).toBe('Yes, go on');
    await page.keyboard.press('Tab');
    expect(await atKeyboard(page)).toBe('No, stop here');
    await page.keyboard.press('Space');
    expect(await answer).toBe('no');
    await page.locator('#question').waitFor({ state: 'hidden' });
    expect(complaints).toEqual([]);
  });

  it('takes no second half of a double click on the question before for its answer', async () => {
    const { view, page } = await viewed();
    const first = view.ask(wiring, never);
    const go = page.getByRole('button', { name: 'Yes, go on' });
    await go.waitFor();
    // What passes by itself stands still as soon as it begins, so that no busy machine is too late for it.
    await page.evaluate(`new MutationObserver(() => document.getAnimations().forEach((each) => each.pause()))
      .observe(document.getElementById('question-form'), { childList: true })`);
    await go.click();
    expect(await first).toBe('yes');
    const answered = vi.fn();
    const heat = { ...wiring, heading: 'Hot surfaces: understood?' };
    const second = view.ask(heat, never);
    second.then(answered, answered);
    await page.getByRole('heading', { name: heat.heading }).waitFor();
    const { x, y, width, height } = (await go.boundingBox()) ?? nowhere;
    await page.mouse.click(x + width / 2, y + height / 2);
    await page.waitForTimeout(300);
    expect(answered).not.toHaveBeenCalled();
    await page.evaluate('document.getAnimations().forEach((each) => each.finish())');
    await page.mouse.click(x + width / 2, y + height / 2);
    expect(await second).toBe('yes');
  });

  it('and all else is reached by the Tab key, in the order in which it stands', async () => {
    const { view, page } = await viewed({ step: 2, points: [point(0), point(1)] });
    view.ask(wiring, never).catch(() => undefined);
    await page.getByRole('heading', { name: wiring.heading }).waitFor();
    await page.keyboard.press('Shift+Tab');
    expect(await atKeyboard(page)).toBe('stop');
    const reached: string[] = [];
    for (let count = 1; count <= 4; count += 1) {
      await page.keyboard.press('Tab');
      reached.push(await atKeyboard(page));
      // What is opened comes next.
      if (count === 3) await page.keyboard.press('Enter');
    }
    expect(reached).toEqual(['Yes, go on', 'No, stop here', 'The last points as a table', 'points']);
  });

  it('of another step is not filled in with what was read for the one before', async () => {
    const { view, page } = await viewed({ step: 1 });
    const first = view.ask(warmth, never);
    await page.getByLabel('Your answer').fill('23.5 degC');
    await page.keyboard.press('Enter');
    expect(await first).toBe('23.5 degC');
    view.show({ kind: 'step', step: 2, elapsed: 20, remaining: 10 });
    view.ask(warmth, never).catch(() => undefined);
    await page.getByLabel('Your answer').waitFor();
    expect(await page.getByLabel('Your answer').inputValue()).toBe('');
    expect(await atKeyboard(page)).toBe('question-heading');
  });

  it('keeps what is being typed while the figures come, and says why an answer can not be taken', async () => {
    const { view, page } = await viewed({ step: 1 });
    const answer = view.ask(warmth, never);
    await page.getByLabel('Your answer').press('Enter');
    await page.locator('#question-error', { hasText: 'Nothing was typed.' }).waitFor();
    expect(await atKeyboard(page)).toBe('typed');
    await page.keyboard.type('23.');
    view.show({ kind: 'figures', figures: { voltage: 15.2 }, elapsed: 3, remaining: 20 });
    await page.locator('#figures', { hasText: '15.200' }).waitFor();
    await page.keyboard.type('5 degC');
    await page.keyboard.press('Enter');
    expect(await answer).toBe('23.5 degC');
  });

  it('is asked again where it was typed, with the reason, and the next letter replaces the answer', async () => {
    const { view, page } = await viewed({ step: 1 });
    await page.setViewportSize({ width: 640, height: 400 });
    const first = view.ask(warmth, never);
    await page.getByLabel('Your answer').fill('lukewarm');
    await page.evaluate('document.getElementById("typed").scrollIntoView({ block: "center" })');
    await page.keyboard.press('Enter');
    await first;
    const why = "That was not understood: found 'lukewarm'; a temperature is needed: 40 °C, 40 degC.";
    const second = view.ask({ ...warmth, text: `${why}\n${warmth.text}` }, never);
    await page.locator('#question', { hasText: why }).waitFor();
    await page.locator('#alarm', { hasText: why }).waitFor({ state: 'attached' });
    expect(await page.locator('#question-text p').allInnerTexts()).toEqual([why, warmth.text]);
    expect(await atKeyboard(page)).toBe('typed');
    const top = (selector: string): Promise<number> =>
      page.evaluate<number>(`document.querySelector('${selector}').getBoundingClientRect().top`);
    const strip = await page.evaluate<number>('document.querySelector(".strip").offsetHeight');
    expect(await top('#question-text')).toBeGreaterThanOrEqual(strip);
    expect(await top('#typed')).toBeLessThan(360);
    await page.keyboard.type('23.5');
    await page.keyboard.press('Enter');
    expect(await second).toBe('23.5');
  });

  it('that was answered elsewhere while an answer was on its way says that the other one was taken', async () => {
    const { view, page } = await viewed({ step: 1 });
    const elsewhere = new AbortController();
    const takenAway = expect(view.ask(warmth, elsewhere.signal)).rejects.toThrow();
    await page.route('**/answer', async (route) => {
      elsewhere.abort(new Error('answered at the terminal'));
      await page.locator('#question').waitFor({ state: 'hidden' });
      await route.continue();
    });
    await page.getByLabel('Your answer').fill('23 degC');
    await page.keyboard.press('Enter');
    await takenAway;
    const words = `“${warmth.heading}” was answered at the terminal, or on another page.`;
    await page.locator('#answered', { hasText: words }).waitFor();
    expect(await page.locator('#status').textContent()).not.toContain('The answer was sent.');
    await page.unroute('**/answer');
  });

  it('goes when it was answered elsewhere, and that is said', async () => {
    const { view, page } = await viewed({ step: 1 });
    const elsewhere = new AbortController();
    const asked = view.ask(warmth, elsewhere.signal);
    await page.getByLabel('Your answer').fill('23');
    elsewhere.abort(new Error('answered at the terminal'));
    await expect(asked).rejects.toThrow();
    await page.locator('#answered').waitFor();
    expect(await page.locator('#answered').innerText()).toBe(
      '“To read: ambient” was answered at the terminal, or on another page.',
    );
    expect(await page.locator('#question').isHidden()).toBe(true);
    expect(await atKeyboard(page)).toBe('module');
  });
});

describe('the cautions', () => {
  it('stand on the page with who acknowledged them, the wiring line by line', async () => {
    const cautions = [
      { name: 'wiring', text: wiring.text, by: 'operator' },
      { name: 'hot-surfaces', text: 'It gets hot.', by: undefined },
    ] as const;
    const { view, page } = await viewed({ cautions });
    const items = page.locator('#cautions > li');
    expect(await items.first().locator('li').allInnerTexts()).toEqual(wiring.text.split('\n'));
    expect(await items.first().innerText()).toMatch(/^Wiring\n.*Acknowledged by the person at the bench\.$/s);
    expect(await items.last().innerText()).toMatch(/Waits to be acknowledged\.$/);
    view.show({ kind: 'caution', caution: { ...cautions[1], by: '--yes' } });
    await items.last().getByText('Acknowledged beforehand, with --yes.').waitFor();
  });
});

describe('what others wrote', () => {
  it('shows as text, with what steers or hides itself made visible', async () => {
    const evil = (where: string): string =>
      `<img src=x onerror="document.title='${where}'"><script>document.title='${where}'</script>\u202e\u0007`;
    const shown = (where: string): string => evil(where).slice(0, -2);
    const { view, page, complaints } = await viewed({
      run: {
        ...before.run,
        ...{
          title: evil('title'),
          module: evil('module'),
          procedure: evil('procedure'),
          bench: evil('bench'),
        },
        steps: [{ kind: 'operator', summary: evil('step'), duration: 3 }],
      },
      step: 1,
      figures: { note: evil('note') },
      cautions: [{ name: evil('caution'), text: evil('caution-text'), by: undefined }],
    });
    view.show({ kind: 'notice', notice: { t: 1, text: evil('notice') } });
    const asked = new AbortController();
    const answer = view.ask({ heading: evil('heading'), text: evil('text'), answer: 'text' }, asked.signal);
    answer.catch(() => undefined);
    for (const [place, where] of Object.entries({
      ...{ module: 'module', what: 'title', kind: 'bench', steps: 'step', note: 'note', notices: 'notice' },
      ...{ cautions: 'caution-text', 'question-heading': 'heading', 'question-text': 'text' },
    }))
      await page.locator(`#${place}`, { hasText: shown(where) }).waitFor();
    asked.abort();
    const ended = { ...completed, how: 'failed', reason: evil('reason'), record: evil('record') } as const;
    view.show({ kind: 'ended', ended: { ...ended, answer: [evil('answer')] } });
    for (const where of ['reason', 'record', 'answer'])
      await page.locator('#ending', { hasText: shown(where) }).waitFor();
    expect(await page.locator('main img, main script').count()).toBe(0);
    expect(await page.locator('body').innerText()).not.toMatch(/\u202e/);
    expect(await page.title()).toMatch(/ · railproof$/);
    expect(complaints).toEqual([]);
  });
});

describe('the curve', () => {
  it('grows with its points, in ink of the light that there is, with words and a table beside it', async () => {
    const { view, page } = await viewed({ step: 2, input: 'on' });
    expect(await page.locator('#curve-words').innerText()).toBe('No points so far.');
    expect(await inked(page, 'line-0')).toBe(0);
    for (const current of [0, 1, 2, 3, 4]) view.show({ kind: 'point', point: point(current) });
    await page.locator('#curve-words', { hasText: ': 5 points' }).waitFor();
    expect(await inked(page, 'line-0')).toBeGreaterThan(500);
    expect((await inked(page, 'line-1')) + (await inked(page, 'bad'))).toBe(0);
    for (const current of [3, 2, 1]) view.show({ kind: 'point', point: point(current, { phase: 'down' }) });
    view.show({ kind: 'point', point: point(5.2, { phase: 'climb', outcome: 'dropped', voltage: 2 }) });
    await page.locator('#curve-words', { hasText: '9 points, of which 1 did not hold' }).waitFor();
    for (const colorScheme of ['dark', 'light'] as const) {
      await page.emulateMedia({ colorScheme });
      for (const colour of ['line-0', 'line-1', 'bad'] as const)
        await vi.waitFor(async () => {
          expect(await inked(page, colour), `${colour} where it is ${colorScheme}`).toBeGreaterThan(10);
        }, patience);
    }
    expect(await page.locator('#legend').innerText()).toMatch(/held.*on the way back.*did not hold/s);
    await page.getByText('The last points as a table').focus();
    await page.keyboard.press('Enter');
    expect(await page.locator('#points tbody tr').count()).toBe(8);
    expect(await page.locator('#points tbody tr').first().innerText()).toMatch(
      /5\.200 A.*2\.000 V.*did not hold/s,
    );
    await nobodyShutOut(page);
  });
});

describe('the policy of the page', () => {
  it('forbids nothing that the page itself does', async () => {
    const strict = await openWindow(browser, 'as-it-is');
    const { view, page, complaints } = await viewed({ step: 2, input: 'on' }, strict);
    for (const current of [0, 1, 2]) view.show({ kind: 'point', point: point(current) });
    view.show({ kind: 'figures', figures: { voltage: 15.2, current: 2 }, elapsed: 3, remaining: 20 });
    await page.locator('#figures', { hasText: '15.200' }).waitFor();
    await page.locator('#plot canvas').waitFor();
    const answer = view.ask(wiring, never);
    await page.getByRole('button', { name: 'Yes, go on' }).click();
    expect(await answer).toBe('yes');
    await page.getByRole('button', { name: /^Stop/ }).click();
    await page.locator('#stop-word', { hasText: 'Making the bench safe…' }).waitFor();
    view.show({ kind: 'ended', ended: completed });
    await page.locator('#ending').waitFor();
    expect(complaints).toEqual([]);
    await page.context().close();
  });
});

describe('on a phone', () => {
  it('all of it fits in 360 px, with the stop button in sight wherever one has scrolled', async () => {
    const long = 'K1+K2+K3+K4 in-one-long-name-that-nobody-would-give-to-a-module-but-somebody-does';
    const { view, page } = await viewed({
      run: { ...before.run, module: long, title: long.replaceAll(' ', '-') },
      step: 1,
      figures: { voltage: 15.2041, current: -4.0001, temperature: 104.25, setCurrent: 4, note: long },
      cautions: [{ name: 'hot-surfaces', text: long, by: 'operator' }],
    });
    for (const current of [0, 1, 2]) view.show({ kind: 'point', point: point(current) });
    view.show({ kind: 'notice', notice: { t: 1, text: long.replaceAll('-', '') } });
    view.ask({ ...warmth, text: long }, never).catch(() => undefined);
    await page.getByLabel('Your answer').waitFor();
    await page.setViewportSize({ width: 360, height: 640 });
    const tooWide = 'document.documentElement.scrollWidth - document.documentElement.clientWidth';
    await page.waitForFunction(`${tooWide} === 0`);
    await page.evaluate('window.scrollTo(0, document.body.scrollHeight)');
    const box = await page.getByRole('button', { name: /^Stop/ }).boundingBox();
    expect(box?.y).toBeGreaterThanOrEqual(0);
    expect(box?.y).toBeLessThan(100);
    expect(box?.height).toBeGreaterThanOrEqual(44);
    await nobodyShutOut(page);
  });
});

describe('the stop button', () => {
  it('stops at once, by a press or by Esc twice, and says so; Esc once is a habit and stops nothing', async () => {
    const { view, page, stop } = await viewed({ step: 2, input: 'on' });
    await page.keyboard.press('Escape');
    await page.locator('#stop-how', { hasText: 'Esc once more' }).waitFor();
    await page.locator('#stop-how', { hasText: 'or Esc twice' }).waitFor();
    expect(stop).not.toHaveBeenCalled();
    await page.getByRole('button', { name: /^Stop/ }).focus();
    await page.keyboard.press('Enter');
    await page.locator('#stop-word', { hasText: 'Making the bench safe…' }).waitFor();
    await vi.waitFor(() => {
      expect(stop).toHaveBeenCalledOnce();
    }, patience);
    await nobodyShutOut(page);
    view.show({ kind: 'stopping' });
    view.show({ kind: 'input', input: 'off' });
    view.show({ kind: 'ended', ended: { ...completed, how: 'stopped', reason: 'stopped in the live view' } });
    await page.locator('#ending').waitFor();
    expect(await atKeyboard(page)).toBe('ending-heading');
    expect(await page.locator('#stop').isHidden()).toBe(true);
  });

  it('says what to do where the wish does not reach the runner', async () => {
    const { view, page, stop } = await viewed({ step: 2, input: 'on' });
    await view.close();
    // Both at once, as of a hand that is in a hurry: a second passes quickly on a slow machine.
    await page.evaluate(`for (const each of [1, 2])
      document.dispatchEvent(new KeyboardEvent('keydown', { key: 'Escape', bubbles: true }))`);
    await page.locator('#trouble', { hasText: 'Press Ctrl-C at the terminal, or cut the power' }).waitFor();
    expect(await page.locator('#stop-word').innerText()).toBe('Stop');
    expect(stop).not.toHaveBeenCalled();
  });
});

describe('several pages in one browser, which keeps six lines to the runner and no more', () => {
  it('a fifth is told that there are too many; a stop leaves each of them at once, and the fifth takes a place that comes free', async () => {
    const {
      view,
      stop,
      page: first,
    } = await viewed({ step: 2, input: 'on' }, await openWindow(browser, 'as-it-is'));
    const context = first.context();
    const open = async (): Promise<Page> => {
      const page = await context.newPage();
      await page.goto(new URL('/', view.address).href);
      return page;
    };
    const [second, third, fourth] = [await open(), await open(), await open()];
    const following = [first, second, third, fourth];
    for (const page of following) await page.locator('#line', { hasText: 'followed live' }).waitFor();
    const fifth = await open();
    await fifth.locator('#lost', { hasText: 'Too many pages follow this run.' }).waitFor();
    for (const [index, page] of [...following, fifth].entries()) {
      await page.getByRole('button', { name: /^Stop/ }).click();
      await vi.waitFor(() => {
        expect(stop).toHaveBeenCalledTimes(index + 1);
      }, patience);
      // A wish that is kept waiting for a line is given up after some seconds, and the page says so.
      await page.locator('#stop-word', { hasText: 'Making the bench safe…' }).waitFor();
      expect(await page.locator('#trouble').isHidden()).toBe(true);
    }
    await second.close();
    await fifth.locator('#line', { hasText: 'followed live' }).waitFor();
    expect(await fifth.locator('#lost').isHidden()).toBe(true);
    expect(await fifth.locator('#load-word').innerText()).toBe('Load on');
    await context.close();
  });
});

describe('when the runner is not heard', () => {
  it('the page says that the load may be on, what was read last, and why; and what to do on a new address', async () => {
    const { view, page } = await viewed({ step: 2, input: 'on', figures: { voltage: 15.2 } });
    const port = Number(new URL(view.address).port);
    expect(await page.locator('#load-word').innerText()).toBe('Load on');
    await view.close();
    await page.locator('#lost', { hasText: 'Nobody answers at this address' }).waitFor();
    const words = await page.locator('#lost').innerText();
    expect(words).toMatch(
      /^No word from the runner for \d+ s\s+The load may still be on\. Look at the terminal\./,
    );
    expect(words).toContain('cut the power by hand');
    expect(await page.locator('#load-word').innerText()).toBe('Load last read on');
    expect(await page.locator('#figures-heading').innerText()).toBe('Last read');
    expect(await page.locator('#age').innerText()).toMatch(/^Old: /);
    expect(await page.title()).toBe('No word · K1 · railproof');
    await nobodyShutOut(page);
    // Another run, which knows nothing of this page.
    const other = await openLiveView({
      ...{ state: before, files, clock: realClock, random: randomBytes, port },
      ...{ stop: () => undefined, addressed: () => undefined },
    });
    views.push(other);
    await page.locator('#lost', { hasText: 'does not know this page' }).waitFor();
    expect(await page.locator('#lost').innerText()).not.toContain('goes on trying');
  });

  it('it goes on of itself where the line was cut, and has what was said meanwhile', async () => {
    const lines = new Set<Socket>();
    const noted = (message: unknown): void => {
      lines.add((message as { socket: Socket }).socket);
    };
    subscribe('http.server.request.start', noted);
    try {
      const { view, page } = await viewed({ step: 2 });
      for (const line of lines) line.destroy();
      view.show({ kind: 'notice', notice: { t: 12, text: 'the fan of the load is loud' } });
      await page.locator('#notices', { hasText: 'the fan of the load is loud' }).waitFor();
      await page.locator('#line', { hasText: 'followed live' }).waitFor();
      view.show({ kind: 'figures', figures: { voltage: 15.2 }, elapsed: 13, remaining: 20 });
      await page.locator('#age', { hasText: 'Read just now.' }).waitFor();
      expect(await page.locator('#lost').isHidden()).toBe(true);
    } finally {
      unsubscribe('http.server.request.start', noted);
    }
  });
});

const completed: ViewedEnd = {
  how: 'completed',
  reason: null,
  answer: ['Load it continuously with up to 3.18 A.'],
  outcome: 'conforms',
  safety: [{ what: 'load', confirmed: true, text: 'The load is off; it was read back.' }],
  record: 'runs/20261202T120000Z-K1-quick-look',
  report: 'runs/20261202T120000Z-K1-quick-look/report.html',
};

describe('while what the record shows is worked out', () => {
  it('the silent runner raises no alarm, nothing is left to stop, and then the same page has the end', async () => {
    const runner = await aBusyRunner({ ...before, step: 2, input: 'off', figures: { voltage: 15.2 } });
    await openAt(window, runner.address);
    const { page, complaints } = window;
    await page.getByRole('button', { name: /^Stop/ }).focus();
    await page.evaluate(`new MutationObserver(() => {
      if (!document.getElementById('lost').hidden) document.body.dataset.alarmed = 'yes';
    }).observe(document.getElementById('lost'), { attributes: true })`);
    runner.workOut(3 * patienceWithRunner, completed);
    await page.locator('#ending-heading', { hasText: /^The run is over$/ }).waitFor();
    const words = await page.locator('#ending').innerText();
    expect(words).toMatch(
      /^The run is over\s+The load is off; it was read back\.\s+Record: runs\/\S+\s+Working out/,
    );
    expect(await page.locator('#about-stop').isHidden()).toBe(true);
    expect(await page.locator('#load-word').innerText()).toBe('Load off');
    expect(await page.locator('#line').innerText()).toBe('the run is over');
    expect(await page.title()).toBe('The run is over · K1 · railproof');
    expect(await page.locator('#stop').isHidden()).toBe(true);
    expect(await atKeyboard(page)).toBe('ending-heading');
    await page.keyboard.press('Escape');
    await page.keyboard.press('Escape');
    await heardOf(page, '#status');
    await nobodyShutOut(page);
    await page.locator('#ending-heading', { hasText: 'Conforms' }).waitFor();
    expect(await page.locator('#ending').innerText()).not.toContain('Working out');
    expect(await page.evaluate('document.body.dataset.alarmed')).toBeUndefined();
    expect(await page.locator('#lost').isHidden()).toBe(true);
    expect(await page.locator('#trouble').isHidden()).toBe(true);
    expect(await atKeyboard(page)).toBe('ending-heading');
    expect(complaints).toEqual([]);
  });

  it('a runner that is gone is said to be, with the bench as it was left', async () => {
    const runner = await aBusyRunner({ ...before, step: 2, input: 'off' });
    await openAt(window, runner.address);
    const { page } = window;
    runner.workOut(3600, completed);
    await page.locator('#ending-heading', { hasText: /^The run is over$/ }).waitFor();
    process.kill(runner.pid, 'SIGKILL');
    await page.locator('#lost', { hasText: 'Nobody answers at this address' }).waitFor();
    const words = await page.locator('#lost').innerText();
    expect(words).toContain('The load is off; it was read back.');
    expect(words).toContain(`railproof analyse ${completed.record}`);
    expect(words).not.toContain('may still be on');
    // Nobody works anything out any more.
    expect(await page.locator('#ending').innerText()).not.toContain('Working out');
    await nobodyShutOut(page);
  });
});

describe('a page that nobody saw for a while', () => {
  it('looks at once when it is seen again, and not when its clock comes round', async () => {
    const runner = await aBusyRunner({ ...before, step: 2, input: 'on' });
    const hidden = await openWindow(browser, 'as-it-is');
    const { page } = hidden;
    // As a browser does to a page that is hidden for long, and more so.
    await page.addInitScript('window.setInterval = () => 0');
    await openAt(hidden, runner.address);
    process.kill(runner.pid, 'SIGSTOP');
    await page.waitForTimeout((patienceWithRunner + 1.5) * 1000);
    expect(await page.title()).toBe('Load on · K1 · railproof');
    await page.evaluate(`document.dispatchEvent(new Event('visibilitychange'))`);
    expect(await page.title()).toBe('No word · K1 · railproof');
    await page.context().close();
  });
});

describe('at the end', () => {
  it('of a run that was given up before it began nothing waits any more', async () => {
    const cautions = [{ name: 'mains', text: 'Its case stays closed.', by: undefined }];
    const { view, page } = await viewed({ cautions });
    expect(await page.locator('#cautions').innerText()).toContain('Waits to be acknowledged.');
    view.show({ kind: 'ended', ended: neverBegun });
    await page.locator('#ending-heading', { hasText: /^Stopped with Ctrl-C$/ }).waitFor();
    expect(await page.locator('#cautions').innerText()).toContain('Was not acknowledged.');
    expect(await page.locator('#load-word').innerText()).toBe('Load not read');
    expect(await page.locator('body').innerText()).not.toContain('yet');
  });

  const unsafe = {
    what: 'load',
    confirmed: false,
    text: 'It could not be confirmed that the load is off: it does not answer\nTHE LOAD MAY STILL BE ON. Unplug the module.',
  } as const;
  const ends: readonly [string, Partial<ViewedEnd>][] = [
    ['Conforms', {}],
    ['Does not conform', { outcome: 'does-not-conform' }],
    ['Undecided', { outcome: 'undecided' }],
    ['Completed; nothing was judged', { outcome: 'not-judged' }],
    ['Stopped in the live view', { how: 'stopped', reason: 'stopped in the live view' }],
    ['Failed: the load does not answer', { how: 'failed', reason: 'the load does not answer' }],
    ['Look at the bench first', { safety: [unsafe] }],
  ];

  it.each(ends)(
    'the page says “%s”, what it came to and where it is kept, and raises no alarm',
    async (heading, end) => {
      const { view, page, complaints } = await viewed({ step: 2, input: 'off', figures: { voltage: 15.2 } });
      view.show({ kind: 'ended', ended: { ...completed, ...end } });
      await view.close();
      await page.locator('#ending').waitFor();
      expect(await page.locator('#ending-heading').innerText()).toBe(heading);
      const words = await page.locator('#ending-text').innerText();
      const safety = (end.safety ?? completed.safety).flatMap(({ text }) => text.split('\n'));
      expect(words.split(/\n+/).slice(0, safety.length)).toEqual(safety);
      expect(words).toContain('Load it continuously with up to 3.18 A.');
      expect(words).toMatch(/Report: runs\/\S+-quick-look\/report\.html\s+Record: runs\/\S+-quick-look$/);
      expect(await page.locator('#line').innerText()).toBe('the run is over');
      const aloud = end.safety === undefined ? '#status' : '#alarm';
      await heardOf(page, aloud);
      expect(await page.locator(aloud).innerText()).toContain(safety.join(' '));
      expect(await page.locator('footer').innerText()).toMatch(
        /^The run is over: this page can’t be loaded again/,
      );
      if (end.how === undefined) await nobodyShutOut(page);
      expect(await page.locator('#lost').isHidden()).toBe(true);
      expect(complaints).toEqual([]);
    },
  );
});

/** Whoever does not see the page is told there. */
async function heardOf(page: Page, region: string): Promise<void> {
  await page.locator(region, { hasText: /\S/ }).waitFor({ state: 'attached' });
}
