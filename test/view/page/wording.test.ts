import { describe, expect, it } from 'vitest';
import { parseQuantity } from '../../../src/quantity/parse-quantity.js';
import { dimensions, type Dimension } from '../../../src/quantity/quantity.js';
import {
  ageWords,
  busyWords,
  endShown,
  expectedWords,
  lineWords,
  loadWords,
  lostHeading,
  lostWords,
  standingOf,
  stepWords,
  timesWords,
  titleWords,
} from '../../../src/view/page/wording.js';
import type { ViewedEnd, ViewedLeft } from '../../../src/view/view-state.js';
import { before, neverBegun } from './viewed.js';

const live = { kind: 'live' } as const;
const lost = { kind: 'lost', seconds: 4.6, why: 'silent' } as const;
const over = { kind: 'over' } as const;
const ended: ViewedEnd = {
  how: 'completed',
  reason: null,
  answer: [],
  outcome: 'conforms',
  safety: [{ what: 'load', confirmed: true, text: 'The load is off; it was read back.' }],
  record: 'runs/one',
  report: 'runs/one/report.html',
};
const unsafe: ViewedEnd = {
  ...ended,
  safety: [{ what: 'load', confirmed: false, text: 'It could not be confirmed.' }],
};

describe('of a lost runner the page says', () => {
  it('for how long nothing was heard, that all is old, that the load may be on, and what to do', () => {
    expect(lostHeading(lost)).toBe('No word from the runner for 4 s');
    const words = lostWords(lost, before).join(' ');
    expect(words).toContain('What stands below is old.');
    expect(words).toContain('The load may still be on. Look at the terminal.');
    expect(words).toContain('If in doubt cut the power by hand.');
    expect(words).not.toMatch(/\d/);
  });

  it('why, where that is known', () => {
    expect(lostWords({ ...lost, why: 'unreachable' }, before).join(' ')).toContain('Nobody answers');
    const refused = lostWords({ ...lost, why: 'refused' }, undefined).join(' ');
    expect(refused).toContain('Open the address again that the terminal shows');
    expect(refused).not.toContain('goes on trying');
    expect(refused).not.toContain('What stands below');
  });

  it('of the load only what was read last, and that the figures are old', () => {
    expect(loadWords({ ...before, input: 'on' }, lost)).toBe('Load last read on');
    expect(ageWords(6.2, true, lost)).toEqual({
      text: 'Old: read 6 s ago, and nothing was heard since.',
      old: true,
    });
    expect(lineWords(lost)).toBe('no word for 4 s');
  });
});

describe('the age of the figures', () => {
  it('is said, and old from ten seconds on', () => {
    expect(ageWords(0.4, true, live)).toEqual({ text: 'Read just now.', old: false });
    expect(ageWords(4.9, true, live)).toEqual({ text: 'Read 4 s ago.', old: false });
    expect(ageWords(130, true, live)).toEqual({ text: 'Read 2 min 10 s ago.', old: true });
  });

  it('is not made up where the page came later, and there is none without figures', () => {
    expect(ageWords(undefined, true, live).text).toContain('not known');
    expect(ageWords(3, false, live).text).toBe('Nothing was read in this step yet.');
    expect(ageWords(300, true, over)).toEqual({ text: '', old: false });
  });
});

describe('the load', () => {
  it('is on, off or not read', () => {
    expect(loadWords({ ...before, input: 'on' }, live)).toBe('Load on');
    expect(loadWords({ ...before, input: 'off' }, live)).toBe('Load off');
    expect(loadWords(before, live)).toBe('Load not read yet');
    expect(loadWords(undefined, live)).toBe('Load not read yet');
    expect(loadWords({ ...before, ended: neverBegun }, over)).toBe('Load not read');
  });

  it('may still be on where the end could not confirm that it is off', () => {
    for (const input of ['on', 'off', undefined] as const)
      expect(loadWords({ ...before, input, ended: unsafe }, over)).toBe('Load may still be on');
  });

  it('is off where the end read that back, whatever was heard before', () => {
    expect(loadWords({ ...before, input: 'on', ended }, over)).toBe('Load off');
  });

  it('is off also where only the source could not be confirmed', () => {
    const source = { what: 'source', confirmed: false, text: 'It could not be confirmed.' } as const;
    const safety = [...ended.safety, source];
    expect(loadWords({ ...before, input: 'off', ended: { ...ended, safety } }, over)).toBe('Load off');
  });
});

describe('the steps', () => {
  it('are done, now or to come', () => {
    const at = { ...before, step: 1 };
    expect([1, 2].map((number) => standingOf(number, at))).toEqual(['now', 'to-come']);
    expect(stepWords(at)).toBe('Step 1 of 2: voltage with the load off');
    expect(stepWords(before)).toBe('Before the first of 2 steps.');
  });

  it('were broken off and not done where the run ended early, and all done where it was completed', () => {
    const stopped = { ...before, step: 1, ended: { ...ended, how: 'stopped' as const } };
    expect([1, 2].map((number) => standingOf(number, stopped))).toEqual(['broken-off', 'not-done']);
    expect(stepWords(stopped)).toBe('Ended in step 1 of 2.');
    expect(stepWords({ ...stopped, step: 0 })).toBe('Ended before the first of 2 steps.');
    expect([1, 2].map((number) => standingOf(number, { ...before, step: 2, ended }))).toEqual([
      'done',
      'done',
    ]);
  });

  it('that an earlier run did are done from the beginning', () => {
    const goesOn = { ...before, run: { ...before.run, done: 1 } };
    expect([1, 2].map((number) => standingOf(number, goesOn))).toEqual(['done', 'to-come']);
  });

  it('say what has gone and about what remains', () => {
    expect(timesWords({ ...before, elapsed: 65, remaining: 26 })).toBe('1 min 5 s gone, about 26 s to go');
    expect(timesWords({ ...before, elapsed: 65, ended })).toBe('The run took 1 min 5 s.');
  });
});

describe('while the record is worked out', () => {
  const left: ViewedLeft = { how: 'completed', reason: null, safety: ended.safety, record: 'runs/one' };
  const atWork = { ...before, step: 2, input: 'on', workingOut: left } as const;
  const busy = { kind: 'working-out' } as const;

  it('the run is over and what the record shows is said to be under way', () => {
    expect(endShown(left)).toEqual({ heading: 'The run is over', look: 'plain' });
    expect(busyWords).toMatch(/^Working out what the record shows\./);
    expect(lineWords(busy)).toBe('the run is over');
    expect(titleWords(atWork, busy)).toBe('The run is over · K1');
    expect(stepWords(atWork)).toBe('All 2 steps are done.');
    expect(standingOf(2, atWork)).toBe('done');
    expect(timesWords({ ...atWork, elapsed: 65 })).toBe('The run took 1 min 5 s.');
  });

  it('the load is what was read back at the end, and the bench comes first where that could not be', () => {
    expect(loadWords(atWork, busy)).toBe('Load off');
    const unsure = { ...atWork, workingOut: { ...left, safety: unsafe.safety } };
    expect(loadWords(unsure, busy)).toBe('Load may still be on');
    expect(titleWords(unsure, busy)).toBe('Look at the bench first · K1');
  });

  it('why it was stopped or failed is said at once', () => {
    const stopped = { ...left, how: 'stopped', reason: 'stopped in the live view' } as const;
    expect(endShown(stopped).heading).toBe('Stopped in the live view');
    expect(stepWords({ ...atWork, workingOut: stopped })).toBe('Ended in step 2 of 2.');
    expect(endShown({ ...left, how: 'failed', reason: 'the load does not answer' }).heading).toBe(
      'Failed: the load does not answer',
    );
  });

  it('a runner that no longer answers is said not to, with the bench as it was last told', () => {
    const words = lostWords({ ...lost, seconds: 61 }, atWork);
    expect(words[0]).toBe('The load is off; it was read back.');
    expect(words.join(' ')).toContain('no longer answers. Look at the terminal.');
    expect(words.join(' ')).toContain('railproof analyse runs/one');
    expect(words.join(' ')).not.toMatch(/may still be on|watchman/);
    const source = { what: 'source', confirmed: false, text: 'Nobody knows of the source.' } as const;
    const unsure = { ...left, safety: [...left.safety, source] };
    expect(lostWords(lost, { ...atWork, workingOut: unsure })[0]).toBe(source.text);
  });
});

describe('the end', () => {
  it('is what was decided, why it was stopped or failed, and before all that nobody knows of the load', () => {
    expect(endShown(ended)).toEqual({ heading: 'Conforms', look: 'good' });
    expect(endShown({ ...ended, outcome: 'does-not-conform' }).look).toBe('bad');
    expect(endShown({ ...ended, how: 'stopped', reason: 'stopped on the page' }).heading).toBe(
      'Stopped on the page',
    );
    expect(endShown({ ...ended, how: 'failed', reason: null })).toEqual({ heading: 'Failed', look: 'bad' });
    expect(endShown(unsafe)).toEqual({ heading: 'Look at the bench first', look: 'bad' });
  });
});

it('what is to be typed is said with an example that is taken as it stands', () => {
  expect(expectedWords({ answer: 'yes' })).toBeUndefined();
  expect(expectedWords({ answer: 'done' })).toBeUndefined();
  expect(expectedWords({ answer: 'text' })).toBe('In your own words');
  for (const dimension of Object.keys(dimensions) as Dimension[]) {
    const example = expectedWords({ answer: dimension })?.split('for example ')[1] ?? '';
    expect(() => parseQuantity(example, dimension), example).not.toThrow();
  }
});

it('the title of the window tells whoever looks at another', () => {
  expect(titleWords(undefined, live)).toBe('Live view');
  expect(titleWords({ ...before, input: 'on' }, live)).toBe('Load on · K1');
  expect(titleWords(before, lost)).toBe('No word · K1');
  const question = { id: 1, heading: 'Wiring', text: 'so', answer: 'yes' as const };
  expect(titleWords({ ...before, question }, live)).toBe('? Wiring · K1');
  expect(titleWords({ ...before, ended }, over)).toBe('Conforms · K1');
});
